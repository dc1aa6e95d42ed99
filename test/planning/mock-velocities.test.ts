import { describe, expect, test } from 'vitest';
import type { MockPlan } from '../../src/observations/types.js';
import { simulateObservations } from '../../src/planning/mock.js';
import { expectWithin } from '../support/expect-within.js';
import { plan, rowsOf, type Row } from './velocity-plan.js';

/** Velocity from the definition, Kepler's equation by bisection: shares no code with the program. */
function velocityMps(truth: MockPlan, time: number): number {
  const years = (time - truth.epochBjdTdb) / 365.25;
  let sum = truth.slopeMpsPerYear * years + 0.5 * truth.curvatureMpsPerYear2 * years ** 2;
  for (const orbit of truth.companions) {
    const e = orbit.eccentricity;
    const cycles = (time - orbit.timePeriastronBjdTdb) / orbit.periodDays;
    const mean = 2 * Math.PI * (cycles - Math.floor(cycles));
    let [low, high] = [0, 2 * Math.PI];
    for (let step = 0; step < 60; step += 1) {
      const middle = (low + high) / 2;
      if (middle - e * Math.sin(middle) < mean) low = middle;
      else high = middle;
    }
    const anomaly = 2 * Math.atan(Math.sqrt((1 + e) / (1 - e)) * Math.tan(low / 2));
    const omega = (orbit.argPeriastronStarDeg * Math.PI) / 180;
    sum += orbit.semiAmplitudeMps * (Math.cos(anomaly + omega) + e * Math.cos(omega));
  }
  return sum;
}

/** Sum of squared residuals in units of formal error and jitter; about the number of rows when the truth is right. */
function chiSquare(rows: readonly Row[], truth: MockPlan, zeroPointMps: number, jitterMps: number): number {
  return rows.reduce(
    (sum, { time, velocity, error }) =>
      sum + (velocity - zeroPointMps - velocityMps(truth, time)) ** 2 / (error ** 2 + jitterMps ** 2),
    0,
  );
}

describe('the velocities', () => {
  const truth = plan();
  const rows = rowsOf(simulateObservations(truth, 5)[0]!);
  const n = rows.length;

  test('scatter about the stated orbit and drift as stated: mean, variance and shape of a normal law', () => {
    const pulls = rows.map(
      ({ time, velocity, error }) => (velocity - 118 - velocityMps(truth, time)) / Math.hypot(error, 1.8),
    );
    const moment = (power: number): number => pulls.reduce((sum, pull) => sum + pull ** power, 0) / n;
    const why = 'four standard errors of a normal sample';
    expectWithin(moment(1), 0, { abs: 4 / Math.sqrt(n), unit: '1', why });
    expectWithin(moment(2), 1, { abs: 4 * Math.sqrt(2 / n), unit: '1', why });
    expectWithin(moment(3), 0, { abs: 4 * Math.sqrt(15 / n), unit: '1', why });
    expectWithin(moment(4), 3, { abs: 4 * Math.sqrt(96 / n), unit: '1', why });
  });

  test('a wrong orbit, drift or jitter is noticed by the same sum', () => {
    const limit = n + 6 * Math.sqrt(2 * n);
    expect(chiSquare(rows, truth, 118, 1.8)).toBeLessThan(limit);
    expect(chiSquare(rows, plan({ slopeMpsPerYear: -5 }), 118, 1.8)).toBeGreaterThan(limit);
    expect(chiSquare(rows, plan({ curvatureMpsPerYear2: 0 }), 118, 1.8)).toBeGreaterThan(limit);
    const turned = truth.companions.map((orbit) => ({ ...orbit, argPeriastronStarDeg: 118 }));
    expect(chiSquare(rows, plan({ companions: turned }), 118, 1.8)).toBeGreaterThan(limit);
    expect(chiSquare(rows, truth, 121, 1.8)).toBeGreaterThan(limit);
    expect(chiSquare(rows, truth, 118, 0)).toBeGreaterThan(limit);
  });

  test('neighbouring rows have independent noise', () => {
    const residuals = rows.map(
      ({ time, velocity, error }) => (velocity - 118 - velocityMps(truth, time)) / Math.hypot(error, 1.8),
    );
    const lagOne =
      residuals.slice(1).reduce((sum, residual, index) => sum + residual * residuals[index]!, 0) / n;
    expectWithin(lagOne, 0, { abs: 4 / Math.sqrt(n), unit: '1', why: 'four standard errors' });
  });

  test('formal errors are log-normal: median 2.3 m/s, scatter 0.25', () => {
    const logs = rows.map(({ error }) => Math.log(error / 2.3));
    const mean = logs.reduce((sum, log) => sum + log, 0) / n;
    const scatter = Math.sqrt(logs.reduce((sum, log) => sum + (log - mean) ** 2, 0) / (n - 1));
    expectWithin(mean, 0, { abs: (4 * 0.25) / Math.sqrt(n), unit: '1', why: 'four standard errors' });
    expectWithin(scatter, 0.25, {
      abs: (4 * 0.25) / Math.sqrt(2 * n),
      unit: '1',
      why: 'four standard errors',
    });
  });

  test('several companions add up', () => {
    const two = plan({
      companions: [
        ...truth.companions,
        { periodDays: 3.19, eccentricity: 0, argPeriastronStarDeg: 90, timePeriastronBjdTdb: 2457001.1, semiAmplitudeMps: 12 },
      ],
    }); // prettier-ignore
    const sample = rowsOf(simulateObservations(two, 6)[0]!);
    const limit = n + 6 * Math.sqrt(2 * n);
    expect(chiSquare(sample, two, 118, 1.8)).toBeLessThan(limit);
    expect(chiSquare(sample, truth, 118, 1.8)).toBeGreaterThan(limit);
  });

  test('no companion, no drift, no jitter: noise about the zero point', () => {
    const quiet = plan(
      { companions: [], slopeMpsPerYear: 0, curvatureMpsPerYear2: 0 },
      { jitterMps: 0, errorScatter: 0 },
    );
    const sample = rowsOf(simulateObservations(quiet, 2)[0]!);
    expect(new Set(sample.map(({ error }) => error))).toEqual(new Set([2.3]));
    expectWithin(chiSquare(sample, quiet, 118, 0), n, {
      abs: 4 * Math.sqrt(2 * n),
      unit: '1',
      why: 'chi-square law',
    });
  });
});
