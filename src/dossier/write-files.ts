/** Loose files into a folder that may hold other things (simulated tables, single charts). */
import { randomUUID } from 'node:crypto';
import { access, mkdir, rename, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';

import { UsageError } from '../errors.js';
import type { DossierFile, WriteChoices } from './write-dossier.js';

async function exists(path: string): Promise<boolean> {
  try {
    await access(path);
    return true;
  } catch {
    return false;
  }
}

/** @throws UsageError when one of the files exists and `force` is not set */
export async function checkFiles(
  folder: string,
  names: readonly string[],
  choices: WriteChoices,
): Promise<void> {
  const paths = names.map((name) => join(folder, name));
  if (!choices.force) {
    const standing: string[] = [];
    for (const path of paths) if (await exists(path)) standing.push(path);
    if (standing.length > 0)
      throw new UsageError(
        `${standing.length === 1 ? 'the file' : `${standing.length} files, among them`} "${standing[0]!}" exist${standing.length === 1 ? 's' : ''} already`,
        { allowed: 'new files', hint: 'add --force to overwrite, or choose another folder with --out DIR' },
      );
  }
}

/**
 * Writes each file under a passing name first, and gives them their names only when all are complete.
 *
 * @throws UsageError when a file exists and `force` is not set (nothing is written then), or the folder is unwritable
 */
export async function writeFiles(
  folder: string,
  files: readonly DossierFile[],
  choices: WriteChoices,
): Promise<string[]> {
  const paths = files.map((file) => join(folder, file.name));
  await checkFiles(
    folder,
    files.map(({ name }) => name),
    choices,
  );
  const passing = paths.map((path) => `${path}.${randomUUID().slice(0, 8)}`);
  try {
    await mkdir(folder, { recursive: true });
    for (const [index, file] of files.entries()) await writeFile(passing[index]!, file.bytes, { flag: 'wx' });
    for (const [index, path] of paths.entries()) await rename(passing[index]!, path);
  } catch (error) {
    for (const path of passing) await rm(path, { force: true }).catch(() => undefined);
    throw new UsageError(
      `the folder "${folder}" cannot be written: ${error instanceof Error ? error.message : String(error)}`,
      { allowed: 'a folder in which you may create files', hint: 'choose another folder with --out DIR' },
      { cause: error },
    );
  }
  return paths;
}
