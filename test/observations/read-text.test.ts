import { createHash } from 'node:crypto';
import { mkdtemp, rm, truncate, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readTable, readTables, requestFor } from '../../src/observations/index.js';
import { readTextFile } from '../../src/observations/read-text.js';

let folder = '';
const at = (name: string): string => join(folder, name);
const code = async (path: string): Promise<unknown> =>
  readTable(requestFor(path)).then(
    () => 'read',
    (error: unknown) =>
      (error as { issues?: { code: string }[] }).issues?.map((issue) => issue.code).join() ?? error,
  );

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'tables-'));
  await writeFile(at('north.csv'), '\ufeffBJD_TDB,RV (m/s),err\n2459000.5,1,2\n2459001.5,3,4\n');
  await writeFile(at('empty.csv'), '');
  await writeFile(at('packed.csv'), Buffer.from([0x1f, 0x8b, 8, 0, 0, 0, 1]));
  await writeFile(at('utf16.csv'), Buffer.from('\ufeffBJD,RV,err\n', 'utf16le'));
  await writeFile(
    at('latin.csv'),
    Buffer.from('# \xb1 error\nBJD_TDB,RV (m/s),err\n2459000.5,1,2\n2459001.5,3,4\n', 'latin1'),
  );
  await writeFile(at('bad.csv'), 'BJD,RV,err\n2459000.5,x,2\n');
  await writeFile(at('huge.csv'), 'BJD,RV,err\n');
  await truncate(at('huge.csv'), 2 ** 31); // sparse: no space is used
});
afterAll(async () => {
  await rm(folder, { recursive: true });
});

describe('files', () => {
  it('are read with the checksum of their bytes', async () => {
    const table = await readTable(requestFor(at('north.csv')));
    const bytes = Buffer.from('\ufeffBJD_TDB,RV (m/s),err\n2459000.5,1,2\n2459001.5,3,4\n', 'utf8');
    expect(table.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
    expect(table.used).toBe(2);
  });

  it.each([
    ['nowhere.csv', 'missing-file'],
    ['no-folder/north.csv', 'missing-file'],
    ['north.csv/inside', 'missing-file'],
    ['', 'is-a-folder'],
    ['empty.csv', 'empty-file'],
    ['packed.csv', 'binary-file'],
    ['utf16.csv', 'binary-file'],
    ['huge.csv', 'too-large'],
    ['a\0b', 'missing-file'],
    ['latin.csv', 'read'],
  ])('%j: %s', async (name, expected) => {
    expect(await code(at(name))).toBe(expected);
  });

  it('suggests the file that was meant', async () => {
    await expect(readTable(requestFor(at('nort.csv')))).rejects.toMatchObject({
      issues: [
        { hint: `did you mean "${at('north.csv').slice(0, 60)}${at('north.csv').length > 60 ? '…' : ''}"?` },
      ],
    });
  });

  it('are read up to a limit when they have no size', async () => {
    expect(await code('/dev/zero')).toBe('binary-file');
    await expect(readTextFile('/dev/urandom', 1000)).rejects.toMatchObject({ name: 'InputDataError' });
  });

  it('report the problems of all of them together', async () => {
    const requests = ['bad.csv', 'north.csv', 'empty.csv', 'nowhere.csv'].map((name) => requestFor(at(name)));
    await expect(readTables(requests)).rejects.toMatchObject({
      issues: [{ code: 'not-a-number' }, { code: 'empty-file' }, { code: 'missing-file' }],
    });
  });
});
