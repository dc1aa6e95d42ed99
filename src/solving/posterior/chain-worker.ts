/** Thread that runs chains: receives recipes, answers with draws. */
import { parentPort } from 'node:worker_threads';
import { ChainRunner, type ChainOutput, type ChainRecipe } from './chain-job.js';

export type WorkerRequest =
  | { readonly kind: 'start'; readonly chain: number; readonly recipe: ChainRecipe }
  | { readonly kind: 'draw'; readonly chain: number; readonly count: number }
  | { readonly kind: 'forget' };

export type WorkerAnswer =
  | { readonly kind: 'started'; readonly chain: number }
  | { readonly kind: 'drawn'; readonly chain: number; readonly output: ChainOutput };

const runners = new Map<number, ChainRunner>();
const port = parentPort;

port?.on('message', (request: WorkerRequest) => {
  switch (request.kind) {
    case 'start':
      runners.set(request.chain, new ChainRunner(request.recipe));
      port.postMessage({ kind: 'started', chain: request.chain } satisfies WorkerAnswer);
      break;
    case 'draw': {
      const runner = runners.get(request.chain);
      if (runner === undefined) throw new RangeError(`chain ${request.chain} was not started in this thread`);
      const output = runner.draw(request.count);
      port.postMessage({ kind: 'drawn', chain: request.chain, output } satisfies WorkerAnswer, [
        output.positions.buffer as ArrayBuffer,
        output.logDensities.buffer as ArrayBuffer,
        output.energies.buffer as ArrayBuffer,
      ]);
      break;
    }
    case 'forget':
      runners.clear();
      break;
  }
});
