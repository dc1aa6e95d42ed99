/** Posterior densities of invented data for these tests. */
import type { RandomStream } from '../../../src/numerics/random.js';
import type { Case, CompanionChoice, InstrumentChoice } from '../../../src/observations/types.js';
import type { DriftDegree, VelocityData } from '../../../src/signals/velocity-term.js';
import { ModelBuilder, type ModelPlan } from '../../../src/solving/model-builder.js';
import { PosteriorDensity } from '../../../src/solving/posterior/posterior-density.js';
import type { PriorScales } from '../../../src/solving/posterior/priors.js';
import { BARE_CASE } from '../helpers.js';

export const EPOCH = 2459000;

export const SCALES: PriorScales = {
  shortestPeriodDays: 2,
  longestPeriodDays: 4000,
  amplitudeScaleMps: 0.2,
  largestAmplitudeMps: 5000,
  jitterScaleMps: 0.2,
  largestJitterMps: 200,
  zeroPointHalfWidthMps: 20_000,
  slopeHalfWidthMpsPerDay: 1,
  curvatureHalfWidthMpsPerDay2: 0.01,
  starRadiusAtOneDay: 0.24,
};

export interface DensityChoices {
  readonly data: VelocityData;
  readonly companions: readonly (Partial<CompanionChoice> & { readonly circular: boolean })[];
  readonly drift?: DriftDegree;
  readonly instruments?: Readonly<Record<string, InstrumentChoice>>;
  readonly scales?: PriorScales;
}

const INSTRUMENTS = ['north', 'south'];

export function densityFor(choices: DensityChoices): PosteriorDensity {
  const { data, drift = 0, instruments = {}, scales = SCALES } = choices;
  const theCase: Case = { ...BARE_CASE, instruments };
  const builder = new ModelBuilder(data, INSTRUMENTS.slice(0, data.instrumentCount), theCase, EPOCH);
  const plan: ModelPlan = {
    drift,
    companions: choices.companions.map(({ circular, elements }) => ({
      circular,
      choice: elements === undefined ? null : { letter: 'b', circular, elements, inclinationDeg: null },
    })),
  };
  return new PosteriorDensity(builder.problem(plan), plan, scales);
}

/** Velocities of an unspecified wiggle: a gradient must be right wherever the model lies. */
export function wiggle(random: RandomStream, count: number, instrumentCount = 1, sigmaMps = 2): VelocityData {
  const timesDays = Float64Array.from({ length: count }, () => random.uniformBetween(-150, 150)).sort();
  return {
    timesDays,
    velocitiesMps: timesDays.map((t) => 12 * Math.cos(t / 3.2) + 5 + 3 * random.normal()),
    sigmasMps: timesDays.map(() => sigmaMps * random.uniformBetween(0.7, 1.4)),
    instrumentOf: Uint16Array.from({ length: count }, (_, i) => i % instrumentCount),
    instrumentCount,
  };
}
