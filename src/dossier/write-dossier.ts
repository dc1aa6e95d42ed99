/**
 * Puts finished files on disk: whole or not at all. Everything is written into a new folder beside the wanted one,
 * which then takes its place in one rename; a run that dies half-way leaves the old dossier as it was.
 */
import { randomUUID } from 'node:crypto';
import {
  lstat,
  mkdir,
  readFile,
  readdir,
  realpath,
  rename,
  rm,
  rmdir,
  stat,
  writeFile,
} from 'node:fs/promises';
import { basename, dirname, join, posix, resolve } from 'node:path';

import { UsageError } from '../errors.js';

export interface DossierFile {
  /** Relative path with `/`, at most one folder deep: `report.md`, `charts/velocities.png`. */
  readonly name: string;
  readonly bytes: Uint8Array | string;
}

export interface WriteChoices {
  readonly force: boolean;
}

function codeOf(error: unknown): string {
  return error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : '';
}

/** Turns what the file system said into what the user can do about it. */
function unwritable(folder: string, error: unknown): UsageError {
  const reasons: Readonly<Record<string, string>> = {
    EACCES: 'permission denied',
    EPERM: 'operation not permitted',
    EROFS: 'the file system is read-only',
    ENOSPC: 'no space left on the device',
    ENOTDIR: 'a part of the path is a file, not a folder',
    ENAMETOOLONG: 'the name is too long',
    ENOENT: 'the folder cannot be created there',
  };
  const reason = reasons[codeOf(error)] ?? (error instanceof Error ? error.message : String(error));
  return new UsageError(
    `the output folder "${folder}" cannot be written: ${reason}`,
    { allowed: 'a folder that you may create or replace', hint: 'choose another folder with --out DIR' },
    { cause: error },
  );
}

/** Entries of a folder, `null` when nothing is there. */
async function entriesOf(folder: string): Promise<string[] | null> {
  try {
    const found = await stat(folder);
    if (!found.isDirectory())
      throw new UsageError(`the output "${folder}" exists and is not a folder`, {
        allowed: 'a new folder, an empty one, or (with --force) a dossier',
        hint: 'choose another folder with --out DIR',
      });
    return await readdir(folder);
  } catch (error) {
    if (error instanceof UsageError) throw error;
    if (codeOf(error) === 'ENOENT') return null;
    throw unwritable(folder, error);
  }
}

async function readJson(path: string): Promise<unknown> {
  try {
    return JSON.parse(await readFile(path, 'utf8')) as unknown;
  } catch {
    return null;
  }
}

/** Refuses to let `--force` remove anything that a dossier of ours would not contain. */
async function refuseForeignContent(folder: string): Promise<void> {
  const solution = (await readJson(join(folder, 'solution.json'))) as { schema?: unknown } | null;
  if (solution?.schema !== 'tugline/solution')
    throw new UsageError(`"${folder}" is not a dossier (it has no solution.json of this program)`, {
      allowed: '--force replaces dossiers only',
      hint: 'choose another folder with --out DIR, or remove this one yourself',
    });
  const run = (await readJson(join(folder, 'run.json'))) as { files?: unknown } | null;
  if (!Array.isArray(run?.files)) return;
  const written = run.files.filter((file) => typeof file === 'string');
  const ours = new Set([...written, ...written.map((file) => posix.dirname(file)), 'run.json']);
  // Only now: what is no dossier may be a whole disk.
  const entries = await readdir(folder, { recursive: true });
  const foreign = entries.map((entry) => entry.replaceAll('\\', '/')).filter((entry) => !ours.has(entry));
  if (foreign.length > 0)
    throw new UsageError(
      `"${folder}" holds ${foreign.length} file${foreign.length === 1 ? '' : 's'} that the dossier does not list, e.g. "${foreign.sort()[0]!}"`,
      {
        allowed: '--force replaces a dossier, not what was put beside it',
        hint: 'move your own files out of the folder, or choose another with --out DIR',
      },
    );
}

/**
 * Checks before any work is done that `folder` may become a dossier.
 *
 * @throws UsageError when it holds something and `force` is not set, or when what it holds is not a dossier of ours
 */
export async function checkDestination(folder: string, choices: WriteChoices): Promise<void> {
  const entries = await entriesOf(folder);
  if (entries === null || entries.length === 0) return;
  if (!choices.force)
    throw new UsageError(`the output folder "${folder}" exists already`, {
      allowed: 'a new or an empty folder',
      hint: 'add --force to replace the dossier in it, or choose another folder with --out DIR',
    });
  await refuseForeignContent(folder);
}

async function fill(folder: string, files: readonly DossierFile[]): Promise<void> {
  await mkdir(folder);
  for (const file of files) {
    const path = join(folder, file.name);
    if (dirname(path) !== folder) await mkdir(dirname(path), { recursive: true });
    await writeFile(path, file.bytes, { flag: 'wx' });
  }
}

/** Moves the finished folder to its place; the old dossier goes last, and comes back if the move fails. */
async function takePlace(finished: string, folder: string): Promise<void> {
  const entries = await entriesOf(folder);
  if (entries === null) {
    await rename(finished, folder);
    return;
  }
  if (entries.length === 0) {
    await rmdir(folder);
    await rename(finished, folder);
    return;
  }
  const old = `${finished}-old`;
  await rename(folder, old);
  try {
    await rename(finished, folder);
  } catch (error) {
    await rename(old, folder);
    throw error;
  }
  await rm(old, { recursive: true, force: true });
}

/** Where the folder really is: a link is followed, so that its target is replaced and not the link. */
async function placeOf(folder: string): Promise<string> {
  const path = resolve(folder);
  try {
    return (await lstat(path)).isSymbolicLink() ? await realpath(path) : path;
  } catch {
    return path;
  }
}

/**
 * Writes a dossier.
 *
 * @param folder - the folder to make; missing parents are made as well
 * @throws UsageError under the conditions of `checkDestination`, and when the place cannot be written
 */
export async function writeDossier(
  folder: string,
  files: readonly DossierFile[],
  choices: WriteChoices,
): Promise<void> {
  await checkDestination(folder, choices);
  const place = await placeOf(folder);
  const parent = dirname(place);
  const unfinished = join(parent, `.${basename(place).slice(0, 60)}-${randomUUID().slice(0, 8)}`);
  try {
    await mkdir(parent, { recursive: true });
    await fill(unfinished, files);
    await takePlace(unfinished, place);
  } catch (error) {
    await rm(unfinished, { recursive: true, force: true }).catch(() => undefined);
    throw error instanceof UsageError ? error : unwritable(folder, error);
  }
}
