import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';

import { dossierFiles } from '../../src/dossier/dossier-files.js';
import { posteriorTable, thinningOf } from '../../src/dossier/posterior-table.js';
import type { Solved } from '../../src/solving/types.js';
import { drawsOf, posteriorRecord } from '../support/posterior-fixture.js';
import { solvedFixture } from '../support/solved-record-fixture.js';

const PERIOD = 'companions.b.elements.period';
const facts = () => ({
  date: '2030-01-01T00:00:00.000Z',
  durationSeconds: 1,
  machine: { system: 'linux', architecture: 'x64', processors: 2 },
});

function filesOf(solved: Solved): Map<string, string> {
  return new Map(dossierFiles(solved, [], facts).map(({ name, bytes }) => [name, String(bytes)]));
}

describe('posterior.csv', () => {
  it('gives back every draw as the same double, in its chain and order', () => {
    const values = [0.1 + 0.2, 1 / 3, 2460496.123456789, -0, 5e-324, 1.7976931348623157e308];
    const text = posteriorTable(drawsOf({ [PERIOD]: values }));
    const rows: Record<string, string>[] = parse(text, { columns: true });
    expect(rows.map((row) => [row['chain'], row['draw']])).toEqual([
      ['1', '1'],
      ['1', '2'],
      ['1', '3'],
      ['2', '1'],
      ['2', '2'],
      ['2', '3'],
    ]);
    rows.forEach((row, i) => {
      expect(Number(row[PERIOD]) === values[i]).toBe(true);
      expect(Number(row['log_density'])).toBe(-100 - i / 8);
    });
  });

  it('names its columns by their paths, ends lines as RFC 4180 does, and quotes a name with a comma', () => {
    const text = posteriorTable(drawsOf({ [PERIOD]: [1, 2], 'velocity.instruments.a,"b.jitter': [3, 4] }));
    expect(text).toBe(
      `chain,draw,log_density,${PERIOD},"velocity.instruments.a,""b.jitter"\r\n1,1,-100,1,3\r\n2,1,-100.125,2,4\r\n`,
    );
    const [header]: string[][] = parse(text);
    expect(header!.at(-1)).toBe('velocity.instruments.a,"b.jitter');
  });

  it('is thinned evenly beyond eight million bytes, to at most 20 000 rows, and only then', () => {
    const small = drawsOf({ [PERIOD]: new Float64Array(40_000) }, 4);
    expect(thinningOf(small)).toBe(1);
    const large = drawsOf(
      Object.fromEntries(Array.from({ length: 20 }, (_, k) => [`k${k}`, new Float64Array(44_000).fill(0.1)])),
      4,
    );
    const rows: string[][] = parse(posteriorTable(large));
    expect(rows.length - 1).toBeLessThanOrEqual(20_000);
    // 11 000 draws a chain and room for 5 000: one in three.
    expect(rows.slice(1, 4).map((row) => row[1])).toEqual(['1', '4', '7']);
    expect(rows.length - 1).toBe(4 * Math.ceil(11_000 / 3));
  });

  it('stays near eight million bytes at the longest numbers that are kept whole', () => {
    const random = Float64Array.from({ length: 32_000 }, (_, i) => Math.sin(i + 1));
    const draws = drawsOf(Object.fromEntries(Array.from({ length: 11 }, (_, k) => [`k${k}`, random])), 4);
    expect(thinningOf(draws)).toBe(1);
    expect(posteriorTable(draws).length).toBeLessThan(8.8e6);
  });

  it('is part of the dossier when there are draws, and of its lists; without draws there is none', () => {
    const posterior = drawsOf({ [PERIOD]: [41, 42] });
    const files = filesOf({ ...solvedFixture({ record: { posterior: posteriorRecord() } }), posterior });
    expect(files.get('posterior.csv')).toBe(posteriorTable(posterior));
    expect(files.get('report.md')).toContain('- `posterior.csv`: the draws of the posterior');
    expect(files.get('report.md')).not.toContain('one draw in');
    expect(JSON.parse(files.get('run.json')!)).not.toHaveProperty('thinned');
    const without = filesOf(solvedFixture());
    expect(without.has('posterior.csv')).toBe(false);
    expect(without.get('report.md')).not.toContain('`posterior.csv`');
  });

  it('says in the report and in run.json that it was thinned', () => {
    const posterior = drawsOf(
      Object.fromEntries(Array.from({ length: 20 }, (_, k) => [`k${k}`, new Float64Array(44_000)])),
      4,
    );
    const files = filesOf({ ...solvedFixture({ record: { posterior: posteriorRecord() } }), posterior });
    expect(files.get('report.md')).toContain('one draw in 3, evenly');
    expect(JSON.parse(files.get('run.json')!)).toMatchObject({
      thinned: { 'posterior.csv': { oneDrawIn: 3 } },
    });
  });

  it('does not change from one writing to the next, nor does solution.json lose a key of the posterior', () => {
    const posterior = drawsOf({ [PERIOD]: [41, 42] });
    const solved = { ...solvedFixture({ record: { posterior: posteriorRecord() } }), posterior };
    expect(filesOf(solved)).toEqual(filesOf(solved));
    const { posterior: written } = JSON.parse(filesOf(solved).get('solution.json')!) as { posterior: object };
    expect(written).toEqual(posteriorRecord());
    expect(Object.keys(written)).toEqual(Object.keys(posteriorRecord()));
  });
});
