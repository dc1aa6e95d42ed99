/** Fits against numbers from outside: an optimum found by another program, and errors in closed form. */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { scaledSemiMajorAxisFromDensity } from '../../../src/orbit/star-density.js';
import { JointDensity } from '../../../src/solving/joint/joint-density.js';
import type { CurveData, JointRecipe } from '../../../src/solving/joint/joint-data.js';
import { fitFromStarts, type JointFit } from '../../../src/solving/joint/joint-fit.js';
import { CONJUNCTION, RADIUS_RATIO } from '../../../src/solving/joint/natural.js';
import { curvatureOfDensity } from '../../../src/solving/posterior/density-curvature.js';
import { expectWithin } from '../../support/expect-within.js';
import { companion, recipe, stated } from './recipes.js';

function fixture(name: string): unknown {
  return JSON.parse(readFileSync(new URL(name, import.meta.url), 'utf8'));
}

/** One run of points with a constant under it and no extra scatter. */
function plainCurve(timesDays: Float64Array, flux: Float64Array, sigma: number): CurveData {
  const rows = timesDays.length;
  return {
    name: 'curve',
    timesDays,
    flux,
    sigmas: new Float64Array(rows).fill(sigma),
    averaged: new Float64Array(rows).fill(1),
    exposureDays: 0,
    band: 0,
    segments: [{ start: 0, end: rows, columns: 1, design: new Float64Array(rows).fill(1) }],
    dilution: { value: 0, sigma: 0 },
    jitter: { kind: 'fixed', value: 0 },
    noise: 'white',
    typicalSigma: sigma,
    scatter: 4e-3,
  };
}

function recipeOf(curve: CurveData, periodDays: number, limb: readonly [number | null, number]): JointRecipe {
  const [u1, u2] = limb;
  return recipe({
    curves: [curve],
    starRadiusLightDays: 0,
    bands: [{ name: 'V', u1: u1 === null ? null : { value: u1, sigma: 0 }, u2: { value: u2, sigma: 0 } }],
    companions: [
      companion(0, {
        conjunctionDays: 0,
        choice: stated({ period: { kind: 'fixed', value: periodDays } }),
      }),
    ],
  });
}

/** tc, k, b, a/R, u1 at a position. */
function read(
  density: JointDensity,
  position: Float64Array,
): Record<'tc' | 'k' | 'b' | 'axis' | 'u1', number> {
  const natural = density.naturalAt(position)!;
  const { transit, index } = density.coordinates;
  return {
    tc: natural[CONJUNCTION]!,
    k: natural[RADIUS_RATIO]!,
    b: transit[5]!,
    axis: Math.exp(transit[6]!),
    u1: natural[index.band(0)]!,
  };
}

/** Standard error of a number by the curvature and difference quotients. */
function errorOf(density: JointDensity, position: Float64Array, of: (at: Float64Array) => number): number {
  const covariance = curvatureOfDensity(density, position);
  const { size } = density;
  const slopes = Float64Array.from(position, (_, j) => {
    const step = 1e-4 * Math.sqrt(covariance[j * size + j]!);
    const moved = (by: number): Float64Array => position.map((value, k) => (k === j ? value + by : value));
    return (of(moved(step)) - of(moved(-step))) / (2 * step);
  });
  let square = 0;
  for (let i = 0; i < size; i++)
    for (let j = 0; j < size; j++) square += slopes[i]! * slopes[j]! * covariance[i * size + j]!;
  return Math.sqrt(square);
}

describe('an optimum found elsewhere', () => {
  interface Optimum {
    readonly data: {
      readonly t: readonly number[];
      readonly flux: readonly number[];
      readonly sigma: number;
    };
    readonly optimum: {
      readonly chi2: number;
      readonly params: Readonly<Record<'tc' | 'k' | 'b' | 'a_over_R' | 'u1', number>>;
      readonly sigma: readonly number[];
    };
  }
  const { data, optimum } = fixture('light-curve-optimum.json') as Optimum;
  const curve = plainCurve(Float64Array.from(data.t), Float64Array.from(data.flux), data.sigma);
  const of = recipeOf(curve, 3.3, [null, 0.25]);
  const start = {
    periodDays: 3.3,
    conjunctionDays: 0.004,
    eccentricity: 0,
    argPeriastronStarRad: Math.PI / 2,
    semiAmplitudeMps: 0,
    transit: { durationDays: 0.11, depth: 0.012 },
  };
  const fit: JointFit = fitFromStarts(of, [start], null)!;
  const got = read(fit.density, fit.maximum.position);
  const wanted = optimum.params;
  const rows = [
    ['tc', got.tc, wanted.tc, optimum.sigma[0]!],
    ['k', got.k, wanted.k, optimum.sigma[1]!],
    ['b', got.b, wanted.b, optimum.sigma[2]!],
    ['axis', got.axis, wanted.a_over_R, optimum.sigma[3]!],
    ['u1', got.u1, wanted.u1, optimum.sigma[4]!],
  ] as const;

  for (const [name, value, expected, sigma] of rows)
    it(`${name} (light-curve-optimum.json: least squares by scipy on a quadrature model)`, () => {
      expectWithin(value, expected, {
        abs: 0.003 * sigma,
        unit: 'as data',
        why: 'the source states 0.003 sigma; the constant is integrated out here with a wide prior',
      });
    });

  it('its errors are those of the curvature', () => {
    // The source leaves second derivatives of the model out; with the model itself as data they have no weight.
    const flux = Float64Array.from(fit.density.curves[0]!.transit);
    const expected = new JointDensity({ ...of, curves: [{ ...curve, flux }] }, 'stated');
    for (const [name, , , sigma] of rows)
      expectWithin(
        errorOf(expected, fit.maximum.position, (at) => read(expected, at)[name]),
        sigma,
        {
          rel: 1e-3,
          unit: 'as data',
          why: 'the constant is integrated out here, which gives the same errors; difference quotients',
        },
      );
  });

  it('ln L is that of its chi-square, the constant integrated out in closed form', () => {
    // With a flat prior of density 1/(w sqrt(2 pi)): ln L = -chi2/2 - n ln(sigma sqrt(2 pi)) + ln(sigma_f0/w).
    const n = data.t.length;
    const constant = n * Math.log(data.sigma * Math.sqrt(2 * Math.PI));
    const model = fit.density.curves[0]!.transit;
    const weight = model.reduce((sum, value) => sum + (value / data.sigma) ** 2, 0);
    const width = 100 * curve.scatter;
    expectWithin(fit.maximum.value, -0.5 * optimum.chi2 - constant - Math.log(width * Math.sqrt(weight)), {
      abs: 1e-4,
      unit: 'ln L',
      why: 'the prior of the constant pulls by (1e-4/0.4)^2',
    });
  });
});

describe('light of a disc by quadrature (reference/transit/exposure.json, mpmath 25 digits)', () => {
  interface Case { readonly name: string; readonly period: number; readonly axis: number; readonly b: number; readonly k: number; readonly u1: number; readonly u2: number; readonly exposure: number; readonly rows: readonly (readonly [number, number])[] } // prettier-ignore
  const { cases } = fixture('../../reference/transit/exposure.json') as { readonly cases: readonly Case[] };
  for (const { name, period, axis, b, k, u1, u2, exposure, rows } of cases)
    it(`${name}: the curve of the joint model, from density of the star to averages over exposures`, () => {
      const sorted = [...rows].sort((x, y) => x[0] - y[0]);
      const timesDays = Float64Array.from(sorted, ([time]) => time);
      const curve = plainCurve(timesDays, new Float64Array(rows.length).fill(1), 1e-5);
      const density = new JointDensity(
        recipeOf({ ...curve, exposureDays: exposure }, period, [u1, u2]),
        'stated',
      );
      const natural = new Float64Array(density.coordinates.index.size);
      natural[0] = Math.log(period);
      natural[RADIUS_RATIO] = k;
      natural[RADIUS_RATIO + 1] = b / (1 + k);
      // Kepler's third law: density in proportion to (a/R)^3/P^2; IAU nominal constants are in the scale.
      natural[density.coordinates.index.logStarDensity] =
        3 * Math.log(axis / scaledSemiMajorAxisFromDensity(1, period));
      const position = density.coordinates.position(natural);
      density.evaluate(position, new Float64Array(density.size));
      sorted.forEach(([, loss], i) => {
        expectWithin(1 - density.curves[0]!.transit[i]!, loss, {
          abs: 5e-8,
          unit: '1',
          why: 'averages are right to 1 % of the error of the mean of all points, here 3.5e-8',
        });
      });
    });
});

describe('errors in closed form [Carter2008]', () => {
  interface Errors {
    readonly inputs: { readonly T: number; readonly tau: number; readonly delta: number; readonly sigma: number; readonly cadence_s: number };
    readonly expected: { readonly full: Readonly<Record<'tc' | 'T' | 'tau' | 'delta', number>> };
  } // prettier-ignore
  const { inputs, expected } = fixture('carter-errors.json') as Errors;
  const { T, tau, delta, sigma } = inputs;
  // Their geometry: b^2 = 1 - k T/tau, T = 2 tau0 sqrt(1 - b^2), tau0 = P R/(2 pi a).
  const periodDays = 3.3;
  const ratio = Math.sqrt(delta);
  const impact = Math.sqrt(1 - (ratio * T) / tau);
  const axis = (periodDays * Math.sqrt(1 - impact ** 2)) / (Math.PI * T);
  const cadence = inputs.cadence_s / 86_400;
  const timesDays = Float64Array.from({ length: 1600 }, (_, i) => (i - 799.7) * cadence);
  const of = recipeOf(plainCurve(timesDays, new Float64Array(1600).fill(1), sigma), periodDays, [0, 0]);
  const blank = new JointDensity(of, 'stated');
  const natural = new Float64Array(blank.coordinates.index.size);
  natural[0] = Math.log(periodDays);
  natural[RADIUS_RATIO] = ratio;
  natural[RADIUS_RATIO + 1] = impact / (1 + ratio);
  natural[blank.coordinates.index.logStarDensity] =
    3 * Math.log(axis / scaledSemiMajorAxisFromDensity(1, periodDays));
  const position = blank.coordinates.position(natural);
  blank.evaluate(position, new Float64Array(blank.size));
  // Without noise the curvature at the truth is the information of the data.
  const flux = Float64Array.from(blank.curves[0]!.transit);
  const density = new JointDensity({ ...of, curves: [{ ...of.curves[0]!, flux }] }, 'stated');
  const why = 'a trapezoid stands for the curve of a disc; T and tau are tied to b and a/R to second order';

  it('the geometry is theirs', () => {
    const got = read(density, position);
    expectWithin(got.axis, axis, { rel: 1e-12, unit: 'R_star', why: 'rounding' });
    expectWithin(got.b, impact, { rel: 1e-12, unit: 'R_star', why: 'rounding' });
    expect(1 - Math.min(...flux)).toBeCloseTo(delta, 12);
  });

  it('mid-time', () => {
    const got = errorOf(density, position, (at) => read(density, at).tc);
    expectWithin(got, expected.full.tc, { rel: 0.06, unit: 'd', why });
  });

  it('depth', () => {
    const got = errorOf(density, position, (at) => read(density, at).k ** 2);
    expectWithin(got, expected.full.delta, {
      rel: 0.06,
      unit: '1',
      why: `${why}; the light outside is measured too`,
    });
  });

  it('duration', () => {
    const chord = (at: Float64Array): number => {
      const { b, axis: own } = read(density, at);
      return ((periodDays / Math.PI) * Math.sqrt(1 - b * b)) / own;
    };
    expectWithin(errorOf(density, position, chord), expected.full.T, { rel: 0.06, unit: 'd', why });
  });
});
