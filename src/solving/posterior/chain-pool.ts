/**
 * Chains in worker threads. Which thread runs which chain changes nothing in the draws: every chain has its own random
 * stream. Where the compiled worker is not at hand (running from the TypeScript sources) the chains run in this thread.
 */
import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { Worker } from 'node:worker_threads';
import { ConvergenceError } from '../../errors.js';
import { ChainRunner, type ChainOutput, type ChainRecipe } from './chain-job.js';
import type { WorkerAnswer, WorkerRequest } from './chain-worker.js';

const WORKER_URL = new URL('./chain-worker.js', import.meta.url);

export interface ChainPool {
  /** Warms up one chain per recipe; forgets the chains before. */
  start(recipes: readonly ChainRecipe[]): Promise<void>;
  /** The next draws of every chain. */
  draw(count: number): Promise<ChainOutput[]>;
  close(): Promise<void>;
}

/** @param threads - worker threads to use; 0 runs everything in this thread */
export function chainPool(threads: number): ChainPool {
  return threads > 0 && existsSync(fileURLToPath(WORKER_URL)) ? new ThreadPool(threads) : new InlinePool();
}

class InlinePool implements ChainPool {
  #runners: ChainRunner[] = [];

  start(recipes: readonly ChainRecipe[]): Promise<void> {
    this.#runners = recipes.map((recipe) => new ChainRunner(recipe));
    return Promise.resolve();
  }

  draw(count: number): Promise<ChainOutput[]> {
    return Promise.resolve(this.#runners.map((runner) => runner.draw(count)));
  }

  close(): Promise<void> {
    this.#runners = [];
    return Promise.resolve();
  }
}

class ThreadPool implements ChainPool {
  readonly #workers: readonly Worker[];
  #chains = 0;

  constructor(threads: number) {
    this.#workers = Array.from({ length: threads }, () => new Worker(WORKER_URL));
  }

  async start(recipes: readonly ChainRecipe[]): Promise<void> {
    for (const worker of this.#workers) worker.postMessage({ kind: 'forget' } satisfies WorkerRequest);
    this.#chains = recipes.length;
    await this.#ask(
      (chain) => ({ kind: 'start', chain, recipe: recipes[chain]! }),
      () => true,
    );
  }

  async draw(count: number): Promise<ChainOutput[]> {
    const outputs = new Array<ChainOutput | undefined>(this.#chains);
    await this.#ask(
      (chain) => ({ kind: 'draw', chain, count }),
      (answer) => {
        if (answer.kind === 'drawn') outputs[answer.chain] = answer.output;
      },
    );
    return outputs.map((output) => output!);
  }

  /** Sends one request per chain to its thread and waits for all answers. */
  async #ask(
    request: (chain: number) => WorkerRequest,
    receive: (answer: WorkerAnswer) => unknown,
  ): Promise<void> {
    const threads = this.#workers.length;
    await Promise.all(
      this.#workers.map(
        (worker, thread) =>
          new Promise<void>((resolve, reject) => {
            const own = Array.from({ length: this.#chains }, (_, c) => c).filter(
              (c) => c % threads === thread,
            );
            let waiting = own.length;
            if (waiting === 0) {
              resolve();
              return;
            }
            const finish = (): void => {
              worker.off('message', onMessage);
              worker.off('error', onError);
            };
            const onMessage = (answer: WorkerAnswer): void => {
              if (answer.kind === 'failed') {
                finish();
                reject(new ConvergenceError(answer.message, answer.details));
                return;
              }
              receive(answer);
              if (--waiting > 0) return;
              finish();
              resolve();
            };
            const onError = (error: unknown): void => {
              finish();
              reject(error instanceof Error ? error : new Error(String(error)));
            };
            worker.on('message', onMessage);
            worker.on('error', onError);
            for (const chain of own) worker.postMessage(request(chain));
          }),
      ),
    );
  }

  async close(): Promise<void> {
    await Promise.all(this.#workers.map((worker) => worker.terminate()));
  }
}
