import { describe, expect, test } from 'vitest';
import { InputDataError } from '../../src/errors.js';
import { parseCase } from '../../src/observations/case-reader.js';

const HEAD = `target: Somebody
star: { mass: 0.9 M_sun, radius: 0.8 R_sun }
mock:
  site: { name: Pier, latitude: 38 deg, longitude: -12 deg, elevation: 3 m }
  position: { right-ascension: 58 deg, declination: 21 deg }
`;
const TRANSITING = `  companions:
    - { period: 3 d, time-of-periastron: 2460600, semi-amplitude: 50 m/s, radius-ratio: 0.1, inclination: 88 deg }
    - { period: 9 d, time-of-periastron: 2460601, semi-amplitude: 20 m/s }
  bands: { red: { u1: 0.4, u2: 0.2 } }
`;
const SURVEY = `  light-curves:
    - { kind: survey, table: s.csv, band: red, from: 2460600, span: 20 d, cadence: 2 min, noise: 400 ppm,
        gaps: [ { after: 4 d, length: 6 h } ], variability: { size: 0.2 %, period: 9 d, lifetime: 20 d } }
    - { kind: night, table: n.csv, band: red, after: 2460650, cadence: 90 s, exposure: 1 min, noise: 0.1 %, airmass-trend: -0.3 %,
        red-noise: { size: 200 ppm, time: 30 min } }
  mid-times:
    - { table: t.csv, companion: c, count: 5, error: 2 min, from: 2460000, to: 2460500, sources: [ the pier ] }
`;

function problems(text: string): { readonly line: number | null; readonly message: string }[] {
  try {
    parseCase(text, 'case.yaml');
  } catch (error) {
    if (error instanceof InputDataError)
      return error.issues.map(({ line, message }) => ({ line: line ?? null, message }));
    throw error;
  }
  return [];
}

/** Ten digits: a unit costs the last ones. */
function rounded(value: unknown): unknown {
  return JSON.parse(JSON.stringify(value), (_, item: unknown) =>
    typeof item === 'number' ? Number(item.toPrecision(10)) : item,
  ) as unknown;
}

describe('light curves and mid-times in a mock block', () => {
  test('are read in the units used inside', () => {
    const { mock } = parseCase(HEAD + TRANSITING + SURVEY, 'case.yaml');
    expect(rounded(mock!.photometry)).toEqual({
      star: { massSolar: 0.9, radiusSolar: 0.8 },
      bands: { red: { u1: 0.4, u2: 0.2 } },
      lightCurves: [
        {
          kind: 'survey', table: 's.csv', band: 'red', unit: 'relative', level: 100000, cadenceDays: 0.001388888889, exposureDays: 0.001388888889,
          noise: 4e-4, redNoise: null, fromBjdTdb: 2460600, spanDays: 20, gaps: [{ afterDays: 4, lengthDays: 0.25 }],
          variability: { size: 0.002, periodDays: 9, lifetimeDays: 20 }, flagged: 0,
        },
        {
          kind: 'night', table: 'n.csv', band: 'red', unit: 'relative', level: 100000, cadenceDays: 0.001041666667, exposureDays: 0.0006944444444,
          noise: 0.001, redNoise: { size: 2e-4, timeDays: 0.02083333333 }, companion: 0, afterBjdTdb: 2460650, marginDays: 0.0625,
          airmassTrend: -0.003, positionTrend: 0, widthTrend: 0,
        },
      ],
      midTimes: [
        { table: 't.csv', companion: 1, count: 5, errorDays: 0.001388888889, errorScatter: 0, fromBjdTdb: 2460000, toBjdTdb: 2460500, sources: ['the pier'] },
      ],
    }); // prettier-ignore
    expect(mock!.companions.map(({ transit }) => transit)).toEqual([
      { radiusRatio: 0.1, path: { kind: 'inclination', deg: 88 } },
      undefined,
    ]);
    // without a word, drift is zero in the middle of everything observed
    expect(mock!.epochBjdTdb).toBe((2460000 + 2460650) / 2);
  });

  test('instruments may be missing then, but not everything', () => {
    expect(problems(HEAD + TRANSITING + SURVEY)).toEqual([]);
    expect(problems(HEAD + TRANSITING).map(({ message }) => message)).toEqual([
      'at least one instrument is needed, or a light curve, or mid-times',
    ]);
  });

  test.each<[string, string, number, RegExp]>([
    ['a band without limb darkening', TRANSITING.replace('red:', 'blue:') + SURVEY, 11, /"red" has no limb darkening/],
    ['an unknown kind', TRANSITING + SURVEY.replace('kind: survey', 'kind: surv'), 11, /kind: survey or kind: night/],
    ['a wrong unit', TRANSITING + SURVEY.replace('2 min', '2 ppm'), 11, /does not fit a duration/],
    ['an exposure longer than the cadence', TRANSITING + SURVEY.replace('exposure: 1 min', 'exposure: 2 min'), 13, /longer than the cadence/],
    ['a night of a companion that does not transit', TRANSITING + SURVEY.replace('after: 2460650', 'companion: c, after: 2460650'), 13, /c of the mock block does not transit/],
    ['mid-times of nobody', TRANSITING + SURVEY.replace('companion: c', 'companion: d'), 16, /no companion d/],
    ['dates in the wrong order', TRANSITING + SURVEY.replace('from: 2460000', 'from: 2460600'), 16, /from must be earlier than to/],
    ['two paths', TRANSITING.replace('inclination:', 'impact-parameter: 0.3, inclination:') + SURVEY, 7, /say the same/],
    ['no path', TRANSITING.replace(', inclination: 88 deg', '') + SURVEY, 7, /needs an impact-parameter or an inclination/],
    ['a path alone', TRANSITING.replace('semi-amplitude: 20 m/s', 'semi-amplitude: 20 m/s, inclination: 88 deg') + SURVEY, 8, /needs a radius-ratio/],
    ['an unphysical limb', TRANSITING.replace('u2: 0.2', 'u2: 0.7') + SURVEY, 9, /darker than black/],
    ['a table in another folder', TRANSITING + SURVEY.replace('t.csv', '../t.csv'), 16, /plain file name/],
    ['an unknown key', TRANSITING + SURVEY.replace('span: 20 d', 'span: 20 d, cloud: 3'), 11, /cloud/],
  ])('%s is named with its line', (_, rest, line, words) => {
    const found = problems(HEAD + rest);
    expect(found.filter(({ message }) => words.test(message)).map((problem) => problem.line)).toContain(line);
  }); // prettier-ignore

  test('a star without mass or radius cannot be transited', () => {
    const found = problems((HEAD + TRANSITING + SURVEY).replace(', radius: 0.8 R_sun', ''));
    expect(found).toEqual([{ line: 8 - 1, message: 'transits need the mass and the radius of the star' }]);
  });
});
