/** Thread that runs chains: receives recipes, answers with draws. */
import { parentPort } from 'node:worker_threads';
import { ConvergenceError } from '../../errors.js';
import { ChainRunner, type ChainOutput, type ChainRecipe } from './chain-job.js';

export type WorkerRequest =
  | { readonly kind: 'start'; readonly chain: number; readonly recipe: ChainRecipe }
  | { readonly kind: 'draw'; readonly chain: number; readonly count: number }
  | { readonly kind: 'forget' };

/** `failed` carries what a chain could not do: an error that is thrown in a thread arrives without its class. */
export type WorkerAnswer =
  | { readonly kind: 'started'; readonly chain: number }
  | { readonly kind: 'drawn'; readonly chain: number; readonly output: ChainOutput }
  | { readonly kind: 'failed'; readonly message: string; readonly details: ConvergenceError['details'] };

const runners = new Map<number, ChainRunner>();
const port = parentPort;

function answer(request: WorkerRequest): void {
  switch (request.kind) {
    case 'start':
      runners.set(request.chain, new ChainRunner(request.recipe));
      port?.postMessage({ kind: 'started', chain: request.chain } satisfies WorkerAnswer);
      break;
    case 'draw': {
      const runner = runners.get(request.chain);
      if (runner === undefined) throw new RangeError(`chain ${request.chain} was not started in this thread`);
      const output = runner.draw(request.count);
      port?.postMessage({ kind: 'drawn', chain: request.chain, output } satisfies WorkerAnswer, [
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
}

port?.on('message', (request: WorkerRequest) => {
  try {
    answer(request);
  } catch (error) {
    if (!(error instanceof ConvergenceError)) throw error;
    const { message, details } = error;
    port.postMessage({ kind: 'failed', message, details } satisfies WorkerAnswer);
  }
});
