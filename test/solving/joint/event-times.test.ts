/** Times of single transits, each displaced by an amount of its own: recovered within the errors that are given. */
import { describe, expect, it } from 'vitest';
import { timeEvents } from '../../../src/solving/joint/event-times.js';
import { JointDensity } from '../../../src/solving/joint/joint-density.js';
import type { JointRecipe } from '../../../src/solving/joint/joint-data.js';
import { fitOf } from '../../../src/solving/joint/joint-fit.js';
import {
  CONJUNCTION,
  LOG_PERIOD,
  RADIUS_RATIO,
  RELATIVE_IMPACT,
} from '../../../src/solving/joint/natural.js';
import { prepareCurve } from '../../../src/solving/joint/prepare-curve.js';
import { expectWithin } from '../../support/expect-within.js';
import { companion, recipe, seeded, stated } from './recipes.js';
import { cadence, LIMB, lightCurve, orbitOf, START_BJD, tableOf, type TrueCompanion } from './simulate.js';

const PERIOD = 2;
const EVENTS = 60;
const SIGMA = 1e-3;
const STEP = 4 / 1440;
const TRUTH: TrueCompanion = {
  periodDays: PERIOD,
  conjunctionBjdTdb: START_BJD + 1,
  radiusRatio: 0.1,
  impactParameter: 0.3,
};
const HALF = 0.14;

/** Transit n is late by `shifts[n]`; the shape is known. */
function timed(shifts: readonly number[], sigma: number, hole: (offset: number) => boolean = () => false) {
  const random = seeded(5);
  const pieces = shifts.map((shift, n) => {
    const middle = TRUTH.conjunctionBjdTdb + n * PERIOD;
    const times = cadence(middle - HALF, middle + HALF, STEP).filter((time) => !hole(time - middle));
    return lightCurve(random, {
      name: 'survey',
      timesBjdTdb: times,
      sigma,
      companions: [{ ...TRUTH, conjunctionBjdTdb: TRUTH.conjunctionBjdTdb + shift }],
      // Every event on a level of its own.
      baseline: () => 1 + 2e-3 * Math.sin(n),
    });
  });
  const join = (of: (piece: (typeof pieces)[number]) => Float64Array): Float64Array =>
    Float64Array.from(pieces.flatMap((piece) => Array.from(of(piece))));
  const table = tableOf(
    { name: 'survey', timesBjdTdb: join((piece) => piece.timesBjdTdb), sigma: Math.max(sigma, 1e-5), companions: [] },
    join((piece) => piece.flux),
  );
  const ephemeris = {
    letter: 'b',
    periodDays: PERIOD,
    midTimeDays: 1,
    durationDays: 0.1,
    depth: 0.011,
    occultationLagDays: null,
  };
  const prepared = prepareCurve(table, START_BJD, [ephemeris], 0, [])!;
  const of: JointRecipe = recipe({
    epochBjdTdb: START_BJD,
    starRadiusLightDays: 0,
    curves: [{ ...prepared.data, jitter: { kind: 'fixed', value: 0 } }],
    bands: [{ name: 'V', u1: { value: LIMB.u1, sigma: 0 }, u2: { value: LIMB.u2, sigma: 0 } }],
    companions: [companion(0, { conjunctionDays: 1, shortestPeriodDays: 1, longestPeriodDays: 3, choice: stated({}) })],
  });
  const density = new JointDensity(of, 'stated');
  const natural = new Float64Array(density.coordinates.index.size);
  natural[LOG_PERIOD] = Math.log(PERIOD);
  natural[CONJUNCTION] = 1;
  natural[RADIUS_RATIO] = TRUTH.radiusRatio;
  natural[RELATIVE_IMPACT] = TRUTH.impactParameter / (1 + TRUTH.radiusRatio);
  const { scaledSemiMajorAxis } = orbitOf(TRUTH);
  const trial = density.coordinates;
  trial.read(trial.position(natural));
  natural[trial.index.logStarDensity]! += 3 * (Math.log(scaledSemiMajorAxis) - trial.transit[6]!);
  const position = density.coordinates.position(natural);
  const fit = fitOf(of, density, { position, value: density.evaluate(position, new Float64Array(density.size)), steepest: 0 })!;
  return timeEvents(fit, [prepared]);
} // prettier-ignore

describe('the time of each transit by itself', () => {
  const random = seeded(9);
  const shifts = Array.from({ length: EVENTS }, () => 0.01 * (2 * random.uniform() - 1));

  it('without noise is exactly the time that it was displaced to', () => {
    const events = timed(shifts.slice(0, 8), 0);
    expect(events.map(({ cycle }) => cycle)).toEqual([0, 1, 2, 3, 4, 5, 6, 7]);
    events.forEach(({ midTimeDays }, n) => {
      expectWithin(midTimeDays! - 1 - n * PERIOD, shifts[n]!, { abs: 2e-7, unit: 'd', why: 'golden section; dates in double precision' });
    });
  }); // prettier-ignore

  it('with noise scatters by the errors that are given', () => {
    const events = timed(shifts, SIGMA);
    expect(events).toHaveLength(EVENTS);
    let chiSquare = 0;
    let sigmas = 0;
    events.forEach(({ midTimeDays, lowerDays, upperDays }, n) => {
      const off = midTimeDays! - 1 - n * PERIOD - shifts[n]!;
      const sigma = 0.5 * (upperDays! - lowerDays!);
      expect(lowerDays! < midTimeDays! && midTimeDays! < upperDays!).toBe(true);
      chiSquare += (off / sigma) ** 2;
      sigmas += sigma / EVENTS;
    });
    // chi-square with 60 degrees of freedom lies between 31.7 and 99.6 in 99.8 % of cases (tables of the distribution).
    expect(chiSquare).toBeGreaterThan(31.7);
    expect(chiSquare).toBeLessThan(99.6);
    // sigma = T sqrt(tau/(2 T)) / Q, Q = sqrt(T/step) delta/sigma [Carter2008], with the duration and ingress of this orbit.
    const { scaledSemiMajorAxis: axis } = orbitOf(TRUTH);
    const chord = Math.sqrt(1 - TRUTH.impactParameter ** 2);
    const duration = (PERIOD * chord) / (Math.PI * axis);
    const ingress = (PERIOD * TRUTH.radiusRatio) / (Math.PI * axis * chord);
    const quality = (Math.sqrt(duration / STEP) * TRUTH.radiusRatio ** 2) / SIGMA;
    expectWithin(sigmas, (duration * Math.sqrt(ingress / duration / 2)) / quality, {
      rel: 0.25,
      unit: 'd',
      why: 'limb darkening softens the slopes and deepens the transit; steps not short against the ingress',
    });
  });

  it('is not given where the points do not bound it', () => {
    // It was clouded from before the first contact on.
    const events = timed([0, 0], SIGMA, (offset) => offset > -0.06);
    expect(events).toHaveLength(2);
    for (const { midTimeDays, lowerDays, upperDays } of events)
      expect([midTimeDays, lowerDays, upperDays]).toEqual([null, null, null]);
  });

  it('is bounded also where the bound lies far out', () => {
    // Errors of ten times as much: bounds at some tenths of a duration, if at all; never outside half a duration.
    for (const { midTimeDays, lowerDays, upperDays, cycle } of timed(shifts.slice(0, 30), 1.2e-2)) {
      if (midTimeDays === null) continue;
      const expected = 1 + cycle * PERIOD;
      expect(lowerDays! - expected).toBeGreaterThanOrEqual(-0.0501);
      expect(upperDays! - expected).toBeLessThanOrEqual(0.0501);
    }
  });
});
