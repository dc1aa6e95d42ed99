/** What the solution screen says of transits, light curves and mid-times. */
import { drawnBoundOf, keyOf } from '../../dossier/draws.js';
import { plainLabel } from '../../dossier/escape.js';
import { formatQuantity, significant } from '../../dossier/numbers.js';
import type { CompanionRecord, PosteriorDraws, Quantity, Solved } from '../../solving/types.js';
import { columnsOf } from './layout.js';

type Row = readonly [name: string, value: string];

/** More tables than this are counted, not listed: the report has them all. */
const MOST_LISTED = 10;

function row(name: string, quantity: Quantity | undefined): Row[] {
  if (quantity === undefined || quantity.value === null) return [];
  return [[name, formatQuantity(quantity, 'text')]];
}

/** Radius, depth, durations and shape of a companion's transit. */
export function transitRows(
  { letter, elements, derived }: CompanionRecord,
  posterior: PosteriorDraws | null,
): Row[] {
  const { impactParameter } = elements;
  const drawn = drawnBoundOf(posterior, keyOf.element(letter, 'impactParameter'));
  return [
    ...row('radius', derived.radius),
    ...row('radius ratio', elements.radiusRatio),
    ...(impactParameter === undefined || impactParameter.value === null
      ? []
      : [
          [
            'impact parameter',
            formatQuantity(impactParameter, 'text', { zeroBounded: true, drawn }),
          ] as const,
        ]),
    ...row('a / stellar radius', elements.scaledSemiMajorAxis),
    ...row('inclination', elements.inclination),
    ...row('light lost', derived.midTransitDepth),
    ...row('transit lasts', derived.totalDuration),
    ...row('mean density', derived.meanDensity),
  ];
}

function andMore(count: number, what: string): string[] {
  return count > MOST_LISTED ? [`   and ${count - MOST_LISTED} more ${what}; the report has them all`] : [];
}

/** One line for each light curve, and an empty one after the last. */
export function lightCurveLines({ record: { photometry }, posterior }: Solved): string[] {
  const tables = photometry?.lightCurves ?? [];
  if (tables.length === 0) return [];
  const rows = tables.slice(0, MOST_LISTED).map((one) => [
    plainLabel(one.name, 24),
    plainLabel(one.band, 10),
    String(one.count),
    formatQuantity(one.jitter, 'text', {
      withUnit: false,
      zeroBounded: true,
      drawn: drawnBoundOf(posterior, keyOf.lightCurveJitter(one.name)),
    }),
    significant(one.rms, 3),
  ]);
  return [
    ...columnsOf([['ppm', 'band', 'points', 'jitter', 'rms'], ...rows], [2, 3, 4], 3).map(
      (line) => `   ${line}`,
    ),
    ...andMore(tables.length, 'light curves'),
    '',
  ];
}

/** One line for each table of mid-times, and an empty one after the last. */
export function midTimeLines({ record: { photometry } }: Solved): string[] {
  const tables = photometry?.midTimes ?? [];
  if (tables.length === 0) return [];
  const rows = tables
    .slice(0, MOST_LISTED)
    .map((one) => [
      plainLabel(one.path, 24),
      plainLabel(one.letter, 4),
      String(one.count),
      formatQuantity(one.jitter, 'text', { withUnit: false, zeroBounded: true }),
      significant(one.rms, 3),
    ]);
  return [
    ...columnsOf([['min', 'of', 'n', 'jitter', 'rms'], ...rows], [2, 3, 4], 3).map((line) => `   ${line}`),
    ...andMore(tables.length, 'tables of mid-times'),
    '',
  ];
}

/** The density of the star from the transits, beside the given one where there is one. */
export function densityLines({ record: { photometry } }: Solved): string[] {
  if (photometry === undefined || photometry.starDensity.value === null) return [];
  const { starDensity, starDensityGiven, starDensityTension } = photometry;
  const given: Row[] =
    starDensityGiven.value === null || starDensityTension === null
      ? []
      : [
          [
            '',
            `given ${formatQuantity(starDensityGiven, 'text')}, ${significant(Math.abs(starDensityTension), 2)} sigma apart`,
          ],
        ];
  const rows: Row[] = [
    ['density of the star', `${formatQuantity(starDensity, 'text')} from the transits`],
    ...given,
  ];
  return [...columnsOf(rows).map((line) => `   ${line}`), ''];
}
