/** The invented cases that charts and reports are tried on: from the easiest to the unkindest. */
import type { Solved } from '../../src/solving/types.js';
import { makeSolved } from './solved-fixture.js';

const FROM = 2_459_123;

/** One instrument, one circular companion of short period. */
export function hotCircular(target = 'Vellamo'): Solved {
  return makeSolved({
    seed: 1,
    target,
    instruments: [{ name: 'North', count: 46, sigmaMps: 2.5, jitterMps: 1.5, zeroPointMps: -13_250 }],
    companions: [
      { periodDays: 3.52474, eccentricity: 0, argPeriastronStarRad: Math.PI / 2, timePeriastronBjdTdb: FROM + 60.2, semiAmplitudeMps: 84, semiMajorAxisAu: 0.0456 },
    ], // prettier-ignore
    fromBjdTdb: FROM,
    toBjdTdb: FROM + 120,
  });
}

/** Four instruments, three companions, a drift. */
export function threeCompanions(): Solved {
  return makeSolved({
    seed: 2,
    target: 'Vellamo',
    instruments: [
      { name: 'North', count: 45, sigmaMps: 3, jitterMps: 2, zeroPointMps: 120 },
      { name: 'South', count: 60, sigmaMps: 1.2, jitterMps: 1.6, zeroPointMps: -40 },
      { name: 'Dome 3', count: 30, sigmaMps: 5, jitterMps: 2, zeroPointMps: 20_300 },
      { name: 'a spectrograph with a long name', count: 35, sigmaMps: 2, jitterMps: 4, zeroPointMps: 0 },
    ],
    companions: [
      { periodDays: 14.651, eccentricity: 0.05, argPeriastronStarRad: 1.9, timePeriastronBjdTdb: FROM + 700.1, semiAmplitudeMps: 21, semiMajorAxisAu: 0.118 },
      { periodDays: 261.4, eccentricity: 0.32, argPeriastronStarRad: 5.1, timePeriastronBjdTdb: FROM + 650, semiAmplitudeMps: 34, semiMajorAxisAu: 0.79 },
      { periodDays: 1210, eccentricity: 0.18, argPeriastronStarRad: 3.3, timePeriastronBjdTdb: FROM + 900, semiAmplitudeMps: 18, semiMajorAxisAu: 2.24 },
    ], // prettier-ignore
    fromBjdTdb: FROM,
    toBjdTdb: FROM + 1800,
    slopeMpsPerDay: 0.018,
  });
}

/** An eccentricity of 0.93 and a star of unknown mass; two periastron passages in the span. */
export function highlyEccentric(): Solved {
  return makeSolved({
    seed: 3,
    target: 'Vellamo',
    instruments: [
      { name: 'North', count: 38, sigmaMps: 4, jitterMps: 2, zeroPointMps: 55 },
      { name: 'South', count: 22, sigmaMps: 6, jitterMps: 3, zeroPointMps: -310 },
    ],
    companions: [
      { periodDays: 1115.3, eccentricity: 0.93, argPeriastronStarRad: 5.2, timePeriastronBjdTdb: FROM + 640.3, semiAmplitudeMps: 470, semiMajorAxisAu: null },
    ], // prettier-ignore
    fromBjdTdb: FROM,
    toBjdTdb: FROM + 2300,
  });
}

/** Noise. */
export function noCompanion(): Solved {
  return makeSolved({
    seed: 4,
    target: 'A star with a name that is much too long to stand above a chart',
    instruments: [{ name: 'North', count: 25, sigmaMps: 3, jitterMps: 1, zeroPointMps: 0 }],
    companions: [],
    fromBjdTdb: FROM,
    toBjdTdb: FROM + 400,
  });
}

/** Eight instruments with 2000 velocities over ten years, and labels that try to break things. */
export function manyInstruments(): Solved {
  return makeSolved({
    seed: 5,
    target: 'Vellamo <b>&amp;"\u202e\u0007',
    instruments: Array.from({ length: 8 }, (_, index) => ({
      name: [
        'North',
        'South',
        'Dome 3',
        'West & <East>',
        'Hill',
        'Lake',
        'Fell \u0001 hut',
        'an endlessly named spectrograph',
      ][index]!,
      count: 250,
      sigmaMps: 1 + index * 0.7,
      jitterMps: 1 + (index % 3),
      zeroPointMps: 1000 * index,
    })),
    companions: [
      { periodDays: 4.23078, eccentricity: 0.11, argPeriastronStarRad: 0.9, timePeriastronBjdTdb: FROM + 1500.2, semiAmplitudeMps: 31, semiMajorAxisAu: 0.052 },
      { periodDays: 5230, eccentricity: 0.4, argPeriastronStarRad: 2.2, timePeriastronBjdTdb: FROM + 1200, semiAmplitudeMps: 42, semiMajorAxisAu: 5.9 },
    ], // prettier-ignore
    fromBjdTdb: FROM,
    toBjdTdb: FROM + 3650,
    gridLength: 100_000,
  });
}
