/** Tables of mid-times for the tests. */
import type { MidTimeTable } from '../../../src/observations/photometry-types.js';
import type { TimingChoices } from '../../../src/solving/timing/solve-timing.js';

export interface Row {
  readonly time: number;
  readonly sigma: number;
  readonly cycle?: number;
  readonly isOccultation?: boolean;
  readonly source?: string;
}

/** Line 2 holds the first row. Cycles are written when every row has one, unless told otherwise. */
export function tableOf(
  rows: readonly Row[],
  choices: { readonly path?: string; readonly withoutCycles?: boolean } = {},
): MidTimeTable {
  const numbered = choices.withoutCycles !== true && rows.every(({ cycle }) => cycle !== undefined);
  return {
    content: 'mid-times',
    path: choices.path ?? 'mid-times.csv',
    sha256: '0'.repeat(64),
    rows: rows.length,
    used: rows.length,
    columns: [],
    timeScale: 'BJD_TDB',
    timeOffsetDays: 0,
    lines: Uint32Array.from(rows, (_, index) => index + 2),
    notices: [],
    timesBjdTdb: Float64Array.from(rows, ({ time }) => time),
    sigmasDays: Float64Array.from(rows, ({ sigma }) => sigma),
    cycles: numbered ? Int32Array.from(rows, ({ cycle }) => cycle!) : null,
    isOccultation: Uint8Array.from(rows, ({ isOccultation }) => (isOccultation === true ? 1 : 0)),
    sources: rows.map(({ source }) => source ?? ''),
    companion: null,
  };
}

export const CHOICES: TimingChoices = {
  target: 'Invented',
  periodDays: null,
  renumber: false,
  facts: {
    massRatio: null,
    scaledSemiMajorAxis: null,
    semiMajorAxisAu: null,
    properMotionMasPerYear: null,
    distanceParsec: null,
  },
  starMassSolar: null,
  modulationDays: { low: null, high: null },
  next: 3,
  afterBjdTdb: null,
  seed: 1,
  provenance: { version: 'test', node: 'test', command: ['tugline', 'timing', 'mid-times.csv'] },
};
