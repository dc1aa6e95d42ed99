import { describe, expect, it } from 'vitest';
import { renderCharts } from '../../../src/dossier/charts/index.js';
import { markerStyle } from '../../../src/dossier/charts/style.js';
import type { Solved } from '../../../src/solving/types.js';
import { hotCircular, noCompanion } from '../../support/solved-cases.js';
import { makeSolved } from '../../support/solved-fixture.js';
import { parseXml } from '../../support/xml-check.js';

const FROM = 2_459_123;
const instrument = { name: 'North', count: 12, sigmaMps: 2, jitterMps: 0, zeroPointMps: 0 };
const companion = (
  periodDays: number,
  eccentricity: number,
  semiAmplitudeMps: number,
): Parameters<typeof makeSolved>[0]['companions'][number] => ({
  periodDays,
  eccentricity,
  semiAmplitudeMps,
  argPeriastronStarRad: 2.5,
  timePeriastronBjdTdb: FROM + 3,
  semiMajorAxisAu: null,
});

function withoutSpectra(): Solved {
  const solved = noCompanion();
  const none = new Float64Array(0);
  const stage = { ...solved.stages[0]!, frequenciesPerDay: none, power: none, levels: [], peaks: [] };
  return { ...solved, stages: [stage], window: { frequenciesPerDay: none, power: none, peaks: [] } };
}

function withOutlier(): Solved {
  const solved = hotCircular();
  solved.velocities.velocitiesMps[5]! += 30_000;
  solved.residualsMps[5]! += 30_000;
  solved.velocities.sigmasMps[7] = 1e6;
  return solved;
}

const span = { fromBjdTdb: FROM, toBjdTdb: FROM + 900 };
const ODD: Record<string, () => Solved> = {
  'one velocity and a target without a printable character': () =>
    makeSolved({
      seed: 1,
      target: '\u0000\u202e',
      instruments: [{ ...instrument, count: 1 }],
      companions: [],
      ...span,
    }),
  'a period of ten times the span': () =>
    makeSolved({
      seed: 2,
      target: 'Vellamo',
      instruments: [instrument],
      companions: [companion(9000, 0.6, 30)],
      ...span,
    }),
  'e = 0.995 beside a companion without amplitude': () =>
    makeSolved({
      seed: 3, target: 'Vellamo', instruments: [instrument], companions: [companion(700, 0.995, 5e4), companion(0.7, 0, 0)], ...span,
    }), // prettier-ignore
  'twenty instruments': () =>
    makeSolved({
      seed: 4,
      target: 'Vellamo',
      instruments: Array.from({ length: 20 }, (_, i) => ({
        ...instrument,
        name: `instrument ${i}`,
        count: 2,
      })),
      companions: [companion(4, 0.1, 20)],
      ...span,
    }),
  'empty spectra': withoutSpectra,
  'a wild velocity and a hopeless error': withOutlier,
};

describe.each(Object.keys(ODD))('a solution with %s', (name) => {
  it('is drawn all the same, in well-formed SVG with numbers only', async () => {
    const files = await renderCharts(ODD[name]!());
    expect(files.length).toBeGreaterThanOrEqual(4);
    for (const file of files.filter((one) => one.name.endsWith('.svg'))) {
      const document = new TextDecoder().decode(file.bytes);
      expect(parseXml(document)[0]!.name).toBe('svg');
      expect(document, file.name).not.toMatch(/NaN|Infinity|undefined/);
    }
  });
});

it('draws no error bar far outside its panel (the clip path does the rest)', async () => {
  const files = await renderCharts(withOutlier());
  const elements = parseXml(
    new TextDecoder().decode(files.find((one) => one.name === 'velocities.svg')!.bytes),
  );
  const height = Number(elements[0]!.attributes['viewBox']!.split(' ')[3]);
  const bars = elements.filter(
    (one) => one.name === 'path' && /^(M[\d.]+ [-\d.]+L[\d.]+ [-\d.]+)+$/.test(one.attributes['d']!),
  );
  expect(bars.length).toBeGreaterThan(0);
  for (const { attributes } of bars) {
    for (const [, y] of attributes['d']!.matchAll(/[ML][\d.]+ (-?[\d.]+)/g)) {
      expect(Number(y)).toBeGreaterThan(0);
      expect(Number(y)).toBeLessThan(height);
    }
  }
});

it('no two of sixteen instruments look alike, and the first eight differ in colour', () => {
  const looks = Array.from({ length: 16 }, (_, i) => JSON.stringify(markerStyle(i)));
  expect(new Set(looks).size).toBe(16);
  expect(new Set(Array.from({ length: 8 }, (_, i) => markerStyle(i).edge)).size).toBe(8);
});
