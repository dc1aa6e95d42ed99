/** Ctrl-C while draws are taken: the first ends the sampling and keeps what there is, the second ends the program. */
import type { Terminal } from './terminal.js';

/** The part of the process that tells of signals. */
export interface SignalSource {
  once(name: 'SIGINT', listener: () => void): unknown;
  off(name: 'SIGINT', listener: () => void): unknown;
}

/**
 * Runs `work` with a signal that Ctrl-C aborts; before and afterwards Ctrl-C ends the program as usual. The listener comes
 * with the first turn of the event loop: the search holds the loop, so that a listener set earlier would make it deaf to
 * Ctrl-C, and it has nothing to show yet; the chains, in threads of their own, are the first to let the loop turn.
 */
export async function withInterrupt<T>(
  terminal: Terminal,
  work: (signal: AbortSignal) => Promise<T>,
  source: SignalSource = process,
): Promise<T> {
  const stop = new AbortController();
  const onInterrupt = (): void => {
    if (terminal.interactive) terminal.rewrite('');
    terminal.note('stopping early with the draws so far; Ctrl-C once more ends the program at once');
    stop.abort();
  };
  const listening = setImmediate(() => source.once('SIGINT', onInterrupt));
  try {
    return await work(stop.signal);
  } finally {
    clearImmediate(listening);
    source.off('SIGINT', onInterrupt);
  }
}
