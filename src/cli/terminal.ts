/** The three streams of the process, and nothing else of it: commands write through this and can be tested without it. */
import { styleText } from 'node:util';

export type Paint = 'heading' | 'good' | 'caution' | 'faint';

export interface Terminal {
  /** Results, to standard output; a line end is added. */
  readonly print: (text: string) => void;
  /** Progress and warnings, to standard error; a line end is added. */
  readonly note: (text: string) => void;
  /** Colours text that goes to standard output (`print`) or to standard error (`note`), if that one wants colours. */
  readonly paint: (kind: Paint, text: string, stream?: 'print' | 'note') => string;
  /** Standard error is a screen: a line on it may be rewritten. */
  readonly interactive: boolean;
  /** Writes over the last line of standard error; only when `interactive`. */
  readonly rewrite: (text: string) => void;
  /** All of standard input as text; at most `limitBytes` of it. */
  readonly readInput: (limitBytes: number) => Promise<{ readonly text: string; readonly complete: boolean }>;
}

const STYLES = { heading: 'bold', good: 'green', caution: 'yellow', faint: 'dim' } as const;

function writeTo(stream: NodeJS.WriteStream, text: string): void {
  // A reader that went away (`tugline ... | head`) is no reason to die: the dossier must still be written.
  if (!stream.destroyed && stream.writable) stream.write(text);
}

async function readAll(limitBytes: number): Promise<{ text: string; complete: boolean }> {
  const parts: Buffer[] = [];
  let size = 0;
  for await (const part of process.stdin as AsyncIterable<Buffer>) {
    size += part.length;
    if (size > limitBytes) return { text: '', complete: false };
    parts.push(part);
  }
  return { text: Buffer.concat(parts).toString('utf8'), complete: true };
}

/** The files that a command writes are safe by now or never begun; only the words on the stream are lost. */
function streamFailed(error: NodeJS.ErrnoException): void {
  if (error.code === 'EPIPE' || error.code === 'ERR_STREAM_DESTROYED') return;
  writeTo(process.stderr, `error: the result cannot be written: ${error.message}\n`);
  process.exit(2);
}

export function processTerminal(): Terminal {
  for (const stream of [process.stdout, process.stderr]) stream.on('error', streamFailed);
  return {
    print: (text) => {
      writeTo(process.stdout, `${text}\n`);
    },
    note: (text) => {
      writeTo(process.stderr, `${text}\n`);
    },
    paint: (kind, text, stream = 'print') =>
      styleText(STYLES[kind], text, { stream: stream === 'print' ? process.stdout : process.stderr }),
    interactive: process.stderr.isTTY,
    rewrite: (text) => {
      writeTo(process.stderr, `\r\u001b[2K${text}`);
    },
    readInput: readAll,
  };
}
