import { mkdir, mkdtemp, readFile, readdir, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';

import { checkDestination, writeDossier, type DossierFile } from '../../src/dossier/write-dossier.js';
import { writeFiles } from '../../src/dossier/write-files.js';
import { UsageError } from '../../src/errors.js';

let place: string;

beforeEach(async () => {
  place = await mkdtemp(join(tmpdir(), 'dossier-test-'));
});
afterEach(async () => {
  await rm(place, { recursive: true, force: true });
});

function dossier(mark: string): DossierFile[] {
  return [
    { name: 'solution.json', bytes: JSON.stringify({ schema: 'tugline/solution', mark }) },
    { name: 'charts/velocities.png', bytes: Uint8Array.from([137, 80]) },
    { name: 'run.json', bytes: JSON.stringify({ files: ['solution.json', 'charts/velocities.png'] }) },
  ];
}

/** A name that cannot be a file makes the writing fail after the first file is on disk. */
const BROKEN: DossierFile[] = [...dossier('new'), { name: 'solution.json/impossible', bytes: '' }];

async function markOf(folder: string): Promise<unknown> {
  return (JSON.parse(await readFile(join(folder, 'solution.json'), 'utf8')) as { mark: unknown }).mark;
}

describe('writeDossier', () => {
  it('writes all files, making missing parents, and leaves nothing else behind', async () => {
    const folder = join(place, 'a', 'b', 'dossier-vellamo');
    await writeDossier(folder, dossier('first'), { force: false });
    expect((await readdir(folder)).sort()).toEqual(['charts', 'run.json', 'solution.json']);
    expect(await readdir(join(place, 'a', 'b'))).toEqual(['dossier-vellamo']);
  });

  it('fills an empty folder', async () => {
    const folder = join(place, 'empty');
    await mkdir(folder);
    await writeDossier(folder, dossier('first'), { force: false });
    expect(await markOf(folder)).toBe('first');
  });

  it('refuses a folder that holds something, unless it is a dossier and force is set', async () => {
    const folder = join(place, 'd');
    await writeDossier(folder, dossier('first'), { force: false });
    await expect(writeDossier(folder, dossier('second'), { force: false })).rejects.toThrow(UsageError);
    expect(await markOf(folder)).toBe('first');
    await writeDossier(folder, dossier('second'), { force: true });
    expect(await markOf(folder)).toBe('second');
    expect(await readdir(place)).toEqual(['d']);
  });

  it('never replaces a folder that is not a dossier, force or not', async () => {
    const folder = join(place, 'thesis');
    await mkdir(folder);
    await writeFile(join(folder, 'chapter-1.tex'), 'years of work');
    await expect(writeDossier(folder, dossier('x'), { force: true })).rejects.toThrow(/not a dossier/);
    await writeFile(join(folder, 'solution.json'), '{"schema":"something else"}');
    await expect(writeDossier(folder, dossier('x'), { force: true })).rejects.toThrow(/not a dossier/);
    expect(await readFile(join(folder, 'chapter-1.tex'), 'utf8')).toBe('years of work');
  });

  it('never removes a file that somebody else put into a dossier', async () => {
    const folder = join(place, 'd');
    await writeDossier(folder, dossier('first'), { force: false });
    await writeFile(join(folder, 'charts', 'notes.txt'), 'mine');
    await expect(writeDossier(folder, dossier('second'), { force: true })).rejects.toThrow(
      /charts\/notes\.txt/,
    );
    expect(await markOf(folder)).toBe('first');
  });

  it('leaves no trace when the writing fails half-way', async () => {
    await expect(writeDossier(join(place, 'd'), BROKEN, { force: false })).rejects.toThrow(UsageError);
    expect(await readdir(place)).toEqual([]);
  });

  it('leaves the old dossier as it was when the writing of the new one fails', async () => {
    const folder = join(place, 'd');
    await writeDossier(folder, dossier('old'), { force: false });
    await expect(writeDossier(folder, BROKEN, { force: true })).rejects.toThrow(UsageError);
    expect(await markOf(folder)).toBe('old');
    expect(await readdir(place)).toEqual(['d']);
  });

  it('replaces what a link points to, not the link', async () => {
    const folder = join(place, 'real');
    await writeDossier(folder, dossier('old'), { force: false });
    await symlink(folder, join(place, 'link'));
    await writeDossier(join(place, 'link'), dossier('new'), { force: true });
    expect(await markOf(folder)).toBe('new');
  });

  it('explains a parent that is a file and an output that is one', async () => {
    await writeFile(join(place, 'file'), '');
    await expect(writeDossier(join(place, 'file', 'd'), dossier('x'), { force: false })).rejects.toThrow(
      /cannot be written: a part of the path is a file/,
    );
    await expect(checkDestination(join(place, 'file'), { force: true })).rejects.toThrow(/is not a folder/);
  });
});

describe('writeFiles', () => {
  const tables = [
    { name: 'north.csv', bytes: 'a' },
    { name: 'south.csv', bytes: 'b' },
  ];

  it('writes beside what is there, and overwrites only with force', async () => {
    await writeFile(join(place, 'other.txt'), 'kept');
    await writeFiles(place, [tables[0]!], { force: false });
    await expect(writeFiles(place, tables, { force: false })).rejects.toThrow(/north\.csv" exists already/);
    expect((await readdir(place)).sort()).toEqual(['north.csv', 'other.txt']);
    await writeFiles(place, [{ name: 'north.csv', bytes: 'c' }, tables[1]!], { force: true });
    expect(await readFile(join(place, 'north.csv'), 'utf8')).toBe('c');
    expect((await readdir(place)).sort()).toEqual(['north.csv', 'other.txt', 'south.csv']);
  });

  it('explains a folder that cannot be made', async () => {
    await writeFile(join(place, 'file'), '');
    await expect(writeFiles(join(place, 'file', 'x'), tables, { force: false })).rejects.toThrow(UsageError);
  });
});
