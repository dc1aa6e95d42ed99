/** Progress on standard error: a bar on a screen, a line every few seconds elsewhere, nothing when quiet. */
import type { Terminal } from './terminal.js';

const BAR_CELLS = 24;
const REDRAW_MS = 80;
const LINE_EVERY_MS = 5000;
/** The stage whose pace is even enough for a forecast: one draw costs what another costs. */
const EVEN_STAGE = 'sampling';

export interface Progress {
  /** @param fraction - 0..1 of the work of the command */
  readonly update: (stage: string, fraction: number) => void;
  /** Clears the bar; call before anything else is written. */
  readonly done: () => void;
}

export function progressOn(terminal: Terminal, quiet: boolean, now: () => number = Date.now): Progress {
  if (quiet) return { update: () => undefined, done: () => undefined };
  let last = terminal.interactive ? -Infinity : now();
  let drawn = false;
  const timeLeft = forecast();
  return {
    update: (stage, fraction) => {
      const time = now();
      const left = timeLeft(stage, fraction, time);
      if (time - last < (terminal.interactive ? REDRAW_MS : LINE_EVERY_MS)) return;
      last = time;
      const share = Math.min(1, Math.max(0, fraction));
      if (!terminal.interactive) {
        terminal.note(`${stage}: ${Math.round(100 * share)} %`);
        return;
      }
      const full = Math.round(BAR_CELLS * share);
      terminal.rewrite(`${'▪'.repeat(full)}${'·'.repeat(BAR_CELLS - full)} ${stage.slice(0, 50)}${left}`);
      drawn = true;
    },
    done: () => {
      if (drawn) terminal.rewrite('');
      drawn = false;
    },
  };
}

/** Seconds as a person would say them. */
function spoken(seconds: number): string {
  return seconds < 90 ? `${Math.max(1, Math.round(seconds))} s` : `${Math.round(seconds / 60)} min`;
}

/** `: 60 %, about 2 s left` for the even stage, from its second report on; empty for any other. */
function forecast(): (stage: string, fraction: number, time: number) => string {
  let start: { readonly fraction: number; readonly time: number } | null = null;
  return (stage, fraction, time) => {
    if (stage !== EVEN_STAGE) return '';
    start ??= { fraction, time };
    const share = `: ${Math.round(100 * Math.min(1, Math.max(0, fraction)))} %`;
    const gained = fraction - start.fraction;
    if (!(gained > 0) || time <= start.time) return share;
    return `${share}, about ${spoken(((time - start.time) * (1 - fraction)) / gained / 1000)} left`;
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
