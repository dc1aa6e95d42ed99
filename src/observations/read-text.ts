/** Reads a text file with a limit on its size, whatever it really is: a folder, a pipe, a device, a binary file. */
import { createHash } from 'node:crypto';
import { open, readdir, type FileHandle } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { singleIssue } from './issues.js';
import { nearest } from './suggest.js';
import { quoted } from './text.js';

export interface SourceText {
  readonly text: string;
  /** Of the bytes of the file, hexadecimal. */
  readonly sha256: string;
}

const CHUNK_BYTES = 1 << 20;

/**
 * The text of a file in UTF-8 (bytes that are not UTF-8 become U+FFFD).
 *
 * @param limitBytes - a file that claims to be larger is refused unread; a pipe or device is read up to the limit and then refused
 * @throws InputDataError `missing-file`, `is-a-folder`, `too-large`, `binary-file`, `empty-file`, `unreadable-file`
 */
export async function readTextFile(path: string, limitBytes: number): Promise<SourceText> {
  if (path.includes('\0')) throw singleIssue(path, 'missing-file', 'the file name contains a NUL character');
  let handle: FileHandle;
  try {
    handle = await open(path, 'r');
  } catch (cause) {
    throw await openingFailed(path, cause);
  }
  try {
    const status = await handle.stat();
    if (status.isDirectory()) {
      throw singleIssue(
        path,
        'is-a-folder',
        'this is a folder, not a file',
        'name the tables in it one by one',
      );
    }
    if (status.size > limitBytes) throw tooLarge(path, `${(status.size / 1e6).toFixed(0)} MB`, limitBytes);
    const bytes = await readUpTo(handle, path, limitBytes);
    return decode(path, bytes);
  } catch (cause) {
    throw isSystemError(cause) ? unreadable(path, cause) : cause;
  } finally {
    await handle.close();
  }
}

async function readUpTo(handle: FileHandle, path: string, limitBytes: number): Promise<Uint8Array> {
  const chunks: Uint8Array[] = [];
  let total = 0;
  for (;;) {
    const chunk = new Uint8Array(CHUNK_BYTES);
    const { bytesRead } = await handle.read(chunk, 0, CHUNK_BYTES, null);
    if (bytesRead === 0) break;
    const part = chunk.subarray(0, bytesRead);
    // A NUL byte settles the matter: no need to read the rest of an endless device.
    if (part.includes(0)) throw binary(path, total === 0 ? part : chunks[0]!);
    total += bytesRead;
    if (total > limitBytes) throw tooLarge(path, `more than ${(limitBytes / 1e6).toFixed(0)} MB`, limitBytes);
    chunks.push(part);
  }
  const all = new Uint8Array(total);
  let at = 0;
  for (const part of chunks) {
    all.set(part, at);
    at += part.length;
  }
  return all;
}

function decode(path: string, bytes: Uint8Array): SourceText {
  if (bytes.length === 0) throw singleIssue(path, 'empty-file', 'the file is empty (0 bytes)');
  const text = new TextDecoder('utf-8', { ignoreBOM: true }).decode(bytes);
  return { text, sha256: createHash('sha256').update(bytes).digest('hex') };
}

async function openingFailed(path: string, cause: unknown): Promise<unknown> {
  if (!isSystemError(cause)) return cause;
  if (cause.code !== 'ENOENT' && cause.code !== 'ENOTDIR') return unreadable(path, cause);
  let hint = 'check the spelling, and the folder from which the command is run';
  try {
    const near = nearest(basename(path), (await readdir(dirname(path))).slice(0, 2000));
    if (near !== null) hint = `did you mean ${quoted(join(dirname(path), near))}?`;
  } catch {
    hint = `there is no folder ${quoted(dirname(path))}`;
  }
  return singleIssue(path, 'missing-file', 'there is no such file', hint);
}

function unreadable(path: string, cause: NodeJS.ErrnoException): Error {
  if (cause.code === 'EISDIR') return singleIssue(path, 'is-a-folder', 'this is a folder, not a file');
  return singleIssue(
    path,
    'unreadable-file',
    `the file cannot be read (${cause.code ?? cause.message})`,
    'check its permissions',
  );
}

function tooLarge(path: string, size: string, limitBytes: number): Error {
  const limit = (limitBytes / 1e6).toFixed(0);
  return singleIssue(
    path,
    'too-large',
    `the file has ${size}; at most ${limit} MB are read`,
    'is this the right file?',
  );
}

function binary(path: string, head: Uint8Array): Error {
  const start = String.fromCharCode(...head.subarray(0, 8));
  let hint = 'tables are text: comma, semicolon, tab or blank separated';
  if (start.startsWith('\xff\xfe') || start.startsWith('\xfe\xff'))
    hint = 'it is UTF-16 text: save it as UTF-8';
  else if (start.startsWith('\x1f\x8b')) hint = 'it is compressed: unpack it first (gunzip)';
  else if (start.startsWith('PK')) hint = 'it is a ZIP archive or a spreadsheet: export the sheet as CSV';
  else if (start.startsWith('SIMPLE')) hint = 'it is a FITS file: export the table as text';
  return singleIssue(path, 'binary-file', 'this is a binary file (it contains NUL bytes), not text', hint);
}

function isSystemError(cause: unknown): cause is NodeJS.ErrnoException {
  return cause instanceof Error && 'code' in cause && 'syscall' in cause;
}
