/** The text of a simulated table: comma separated, with comment lines that say that it is simulated. */
import type { MockInstrument } from '../observations/types.js';

export interface MockRow {
  readonly timeBjdTdb: number;
  readonly velocityMps: number;
  readonly errorMps: number;
  readonly airmass: number;
}

/** Where a table comes from, for its comment lines. */
export interface TableOrigin {
  readonly seed: number;
  /** Name of the case, `null` when unknown; control characters are replaced by blanks. */
  readonly title: string | null;
}

const MPS_PER_KMPS = 1000;

/** Decimals of a velocity in m/s: at least two, and enough for three digits of the typical error. */
export function decimalsFor(errorMps: number): number {
  return Math.min(9, Math.max(2, 2 - Math.floor(Math.log10(errorMps))));
}

/**
 * Puts a table together. Lines end in `\n`, the last one as well.
 *
 * @param subject - what this table is, in words; untrusted labels in it cannot break out of their line
 * @param remarks - further comment lines
 */
export function tableText(
  subject: readonly string[],
  about: TableOrigin,
  remarks: readonly string[],
  header: readonly string[],
  rows: readonly (readonly string[])[],
): string {
  const origin = [
    ...(about.title === null ? [] : [`case ${oneLine(about.title)}`]),
    ...subject.map(oneLine),
    `seed ${about.seed}`,
  ];
  const lines = [
    '# Simulated observations, made by tugline mock: no telescope was involved.',
    `# ${origin.join(', ')}`,
    ...remarks.map((remark) => `# ${remark}`),
    header.join(','),
    ...rows.map((row) => row.join(',')),
  ];
  return `${lines.join('\n')}\n`;
}

/**
 * Writes a table of velocities, in the instrument's unit.
 *
 * @param about.timeDecimals - decimals of a day
 */
export function mockTableText(
  instrument: MockInstrument,
  rows: readonly MockRow[],
  about: TableOrigin & { readonly timeDecimals: number },
): string {
  const { unit } = instrument;
  const perUnit = unit === 'km/s' ? MPS_PER_KMPS : 1;
  const decimals = decimalsFor(instrument.errorMps) + (unit === 'km/s' ? 3 : 0);
  const velocity = (valueMps: number): string => (valueMps / perUnit).toFixed(decimals);
  return tableText(
    [`instrument ${instrument.name}`],
    about,
    ['Times are mid-exposure, BJD_TDB in days; velocities are positive when the star recedes.'],
    ['BJD_TDB', `RV (${unit})`, `RV error (${unit})`, 'airmass'],
    rows.map((row) => [
      row.timeBjdTdb.toFixed(about.timeDecimals),
      velocity(row.velocityMps),
      velocity(row.errorMps),
      row.airmass.toFixed(3),
    ]),
  );
}

/** A label that cannot break out of its comment line. */
function oneLine(label: string): string {
  return label.replace(/[\p{Cc}\u2028\u2029]+/gu, ' ').trim();
}
