/** Small invented sets of observations of one star with a transiting companion, and the way to their solution. */
import type { LightCurveTable, Observations } from '../../../src/observations/photometry-types.js';
import type { Case, CompanionChoice, ElementChoice } from '../../../src/observations/types.js';
import { solveObservations } from '../../../src/solving/joint/solve-observations.js';
import type { Solved } from '../../../src/solving/types.js';
import { seeded } from './recipes.js';
import {
  cadence,
  caseOf,
  lightCurve,
  midTimeTable,
  observed,
  QUICK,
  STAR_DENSITY,
  START_BJD,
  type CurvePlan,
  type TrueCompanion,
} from './simulate.js';

export const B: TrueCompanion = {
  periodDays: 3.31,
  conjunctionBjdTdb: START_BJD + 1.234,
  radiusRatio: 0.1,
  impactParameter: 0.35,
  semiAmplitudeMps: 60,
};
/** Mass and radius that mean the density of the invented star: 1.41 M/R^3 g/cm3. */
export const STAR: Case['star'] = {
  massSolar: { value: 1, sigma: 0.04 },
  radiusSolar: { value: Math.cbrt(1.41 / STAR_DENSITY), sigma: 0.02 },
  effectiveTemperatureK: { value: 5700, sigma: 80 },
};
const HALF_HOUR = 1 / 48;

export function survey(seed: number, more: Partial<CurvePlan> = {}): LightCurveTable {
  return lightCurve(seeded(seed), {
    name: 'survey',
    timesBjdTdb: cadence(START_BJD, START_BJD + 27, HALF_HOUR),
    exposureDays: HALF_HOUR,
    sigma: 4e-4,
    companions: [B],
    ...more,
  });
}

/** A night on transit `cycle`, through air that dims by 1 % per airmass. */
export function night(
  seed: number,
  cycle: number,
  name: string,
  more: Partial<CurvePlan> = {},
): LightCurveTable {
  const middle = B.conjunctionBjdTdb + cycle * B.periodDays;
  const airmass = (time: number): number => 1.1 + 12 * (time - middle + 0.05) ** 2;
  return lightCurve(seeded(seed), {
    name,
    band: 'R',
    timesBjdTdb: cadence(middle - 0.13, middle + 0.12, 2 / 1440),
    exposureDays: 1.5 / 1440,
    sigma: 1e-3,
    companions: [B],
    airmass,
    baseline: (time) => 1 + 0.01 * airmass(time) + 0.002 * (time - middle),
    ...more,
  });
}

export function midTimes(seed: number, cycles: readonly number[]): ReturnType<typeof midTimeTable> {
  const random = seeded(seed);
  const sigma = 4e-4;
  return midTimeTable(
    cycles.map((cycle) => B.conjunctionBjdTdb + B.periodDays * cycle + sigma * random.normal()),
    sigma,
  );
}

export function stated(elements: Partial<Record<string, ElementChoice>>): readonly CompanionChoice[] {
  return [{ letter: 'b', circular: 'auto', elements, inclinationDeg: null }];
}

export const solve = (observations: Partial<Observations>, theCase: Partial<Case> = {}): Promise<Solved> =>
  solveObservations(caseOf({ star: STAR, ...theCase }), observed(observations), QUICK);
