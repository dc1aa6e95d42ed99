/** Progress on standard error: a bar on a screen, a line every few seconds elsewhere, nothing when quiet. */
import type { Terminal } from './terminal.js';

const BAR_CELLS = 24;
const REDRAW_MS = 80;
const LINE_EVERY_MS = 5000;

export interface Progress {
  /** @param fraction - 0..1 of this stage */
  readonly update: (stage: string, fraction: number) => void;
  /** Clears the bar; call before anything else is written. */
  readonly done: () => void;
}

export function progressOn(terminal: Terminal, quiet: boolean, now: () => number = Date.now): Progress {
  if (quiet) return { update: () => undefined, done: () => undefined };
  let last = terminal.interactive ? -Infinity : now();
  let drawn = false;
  return {
    update: (stage, fraction) => {
      const time = now();
      if (time - last < (terminal.interactive ? REDRAW_MS : LINE_EVERY_MS)) return;
      last = time;
      const share = Math.min(1, Math.max(0, fraction));
      if (!terminal.interactive) {
        terminal.note(`${stage}: ${Math.round(100 * share)} %`);
        return;
      }
      const full = Math.round(BAR_CELLS * share);
      terminal.rewrite(`${'▪'.repeat(full)}${'·'.repeat(BAR_CELLS - full)} ${stage.slice(0, 50)}`);
      drawn = true;
    },
    done: () => {
      if (drawn) terminal.rewrite('');
      drawn = false;
    },
  };
}

/** Runs `work` with a progress display that is cleared when it ends, also when it ends in an error. */
export async function withProgress<T>(
  terminal: Terminal,
  quiet: boolean,
  work: (update: Progress['update']) => Promise<T>,
): Promise<T> {
  const progress = progressOn(terminal, quiet);
  try {
    return await work(progress.update);
  } finally {
    progress.done();
  }
}
