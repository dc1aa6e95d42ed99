import { describe, expect, it } from 'vitest';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import {
  VelocityTerm,
  linearParameterCount,
  type DriftDegree,
  type VelocityData,
} from '../../src/signals/velocity-term.js';
import { expectWithin } from '../support/expect-within.js';

const DATA: VelocityData = {
  timesDays: Float64Array.of(-30, -11.5, 0, 2, 17.25, 40),
  velocitiesMps: new Float64Array(6),
  sigmasMps: new Float64Array(6).fill(1),
  instrumentOf: Uint16Array.of(0, 2, 1, 0, 2, 2),
  instrumentCount: 3,
};
const ORBITS = Float64Array.of(Math.log(12), 0.4, 0.2, -0.1, 30, Math.log(55), 4, 0, 0, 8);

describe('VelocityTerm', () => {
  it('is linear in zero points and drift, with the columns that it names', () => {
    const term = new VelocityTerm(DATA);
    for (const drift of [0, 1, 2] as const) {
      const count = linearParameterCount(DATA, drift);
      expect(count).toBe(3 + drift);
      const linear = Float64Array.from({ length: count }, (_, l) => 1.5 * l - 2);
      const [full, bare] = [linear, new Float64Array(count)].map((values) => {
        const prediction = new Float64Array(6).fill(NaN);
        expect(term.predict(ORBITS, 2, values, drift, prediction, null)).toBe(true);
        return prediction;
      });
      const columns = Array.from({ length: count }, (_, l) => term.linearColumn(l));
      full!.forEach((value, i) => {
        const part = columns.reduce((sum, column, l) => sum + linear[l]! * column[i]!, 0);
        expectWithin(value, bare![i]! + part, { abs: 1e-10, unit: 'm/s', why: 'rounding of sums near 4e3' });
      });
      expect([...columns[1]!]).toEqual([0, 0, 1, 0, 0, 0]);
    }
    expect([...term.linearColumn(3)]).toEqual([...DATA.timesDays]);
    expect(term.linearColumn(4)[5]).toBe(800);
  });

  it('adds up the companions as evaluateVelocity does', () => {
    const prediction = new Float64Array(6);
    new VelocityTerm(DATA).predict(ORBITS, 2, new Float64Array(3), 0, prediction, null);
    const omega = Math.atan2(-0.1, 0.2);
    const want = evaluateVelocity(
      {
        companions: [
          { periodDays: 12, eccentricity: Math.hypot(0.2, 0.1), argPeriastronStarRad: omega, timePeriastronBjdTdb: (-(0.4 - omega) * 12) / (2 * Math.PI), semiAmplitudeMps: 30 },
          { periodDays: 55, eccentricity: 0, argPeriastronStarRad: 0, timePeriastronBjdTdb: (-4 * 55) / (2 * Math.PI), semiAmplitudeMps: 8 },
        ],
        letters: ['b', 'c'], zeroPointsMps: new Float64Array(3), jittersMps: new Float64Array(3),
        epochBjdTdb: 0, slopeMpsPerDay: 0, curvatureMpsPerDay2: 0,
      },
      DATA.timesDays,
    ); // prettier-ignore
    prediction.forEach((value, i) => {
      expectWithin(value, want[i]!, { abs: 1e-11, unit: 'm/s', why: 'two ways to the same angle' });
    });
  });

  it('puts the partials of companion c in columns 5c to 5c + 4', () => {
    const drift: DriftDegree = 0;
    const term = new VelocityTerm(DATA);
    const partials = new Float64Array(6 * 10).fill(NaN);
    term.predict(ORBITS, 2, new Float64Array(3), drift, new Float64Array(6), partials);
    const single = new Float64Array(6 * 5);
    term.predict(ORBITS.slice(5), 1, new Float64Array(3), drift, new Float64Array(6), single);
    for (let i = 0; i < 6; i++) {
      expect(partials.slice(10 * i + 5, 10 * i + 10)).toEqual(single.slice(5 * i, 5 * i + 5));
    }
    expect(partials.every(Number.isFinite)).toBe(true);
  });

  it('reports an orbit outside the domain', () => {
    const beyond = Float64Array.from(ORBITS);
    beyond[7] = 1.2;
    const term = new VelocityTerm(DATA);
    expect(term.predict(beyond, 2, new Float64Array(3), 0, new Float64Array(6), null)).toBe(false);
  });
});
