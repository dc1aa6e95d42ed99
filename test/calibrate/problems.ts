/**
 * The problems of the calibration: the priors of the program, windows by which both the truths and the posterior are
 * weighted, and data drawn from them. A proper prior times a window is a proper prior, so the exercise stays exact; the
 * windows keep the signals within reach of 40 velocities and the period within one mode, without walls.
 */
import type { RandomStream } from '../../src/numerics/random.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import type { VelocityData } from '../../src/signals/velocity-term.js';
import type { ModelPlan, PortablePoint } from '../../src/solving/model-builder.js';
import type { PriorScales } from '../../src/solving/posterior/priors.js';
import type { Window } from './windowed-density.js';

const VELOCITIES = 40;
const SPAN_DAYS = 400;
/** Typical measurement error; single ones lie between 0.7 and 1.4 of it. */
const SIGMA_MPS = 2;

/** In the proportions of the default priors, but fixed: priors that look at the data would not be those of the truths. */
const SCALES: PriorScales = {
  shortestPeriodDays: 5,
  longestPeriodDays: 2000,
  amplitudeScaleMps: 0.1 * SIGMA_MPS,
  largestAmplitudeMps: 1e4 * SIGMA_MPS,
  jitterScaleMps: 0.1 * SIGMA_MPS,
  largestJitterMps: 1e3 * SIGMA_MPS,
  zeroPointHalfWidthMps: 1e3,
  slopeHalfWidthMpsPerDay: 1,
  curvatureHalfWidthMpsPerDay2: 0.01,
  // A giant star: the largest eccentricity is about 0.8 at 20 d.
  starRadiusAtOneDay: 1.5,
};

/** Amplitudes: Gaussian window in ln K, 95 % between 5 and 50 measurement errors. */
const LOG_AMPLITUDE = { centre: Math.log(16 * SIGMA_MPS), width: 0.58 };
/** Jitters: Gaussian window in arsinh(s / scale), 95 % below 2.5 measurement errors. */
const JITTER_WIDTH = 2;

export interface CompanionRegion {
  readonly circular: boolean;
  readonly periodDays: number;
  /** Width of the window in ln P: the phase at the ends of the span moves by a tenth of a cycle. */
  readonly logPeriodWidth: number;
}

export interface CalibrationProblem {
  readonly name: string;
  readonly companions: readonly CompanionRegion[];
  readonly scales: PriorScales;
}

function problem(name: string, companions: readonly (readonly [boolean, number])[]): CalibrationProblem {
  return {
    name,
    companions: companions.map(([circular, periodDays]) => ({
      circular,
      periodDays,
      logPeriodWidth: (0.2 * periodDays) / SPAN_DAYS,
    })),
    scales: SCALES,
  };
}

export const PROBLEMS: readonly CalibrationProblem[] = [
  problem('circular', [[true, 20]]),
  problem('eccentric', [[false, 20]]),
  problem('two companions', [
    [false, 11],
    [false, 47],
  ]),
];

export function planOf({ companions }: CalibrationProblem): ModelPlan {
  return { companions: companions.map(({ circular }) => ({ choice: null, circular })), drift: 0 };
}

/** Windows in sampling coordinates: ln P comes first and ln K last in each companion's part, the jitter at the very end. */
export function windowsOf({ companions }: CalibrationProblem): Window[] {
  const windows: Window[] = [];
  let offset = 0;
  for (const { circular, periodDays, logPeriodWidth } of companions) {
    const size = circular ? 3 : 5;
    windows.push({ at: offset, centre: Math.log(periodDays), width: logPeriodWidth });
    windows.push({ at: offset + size - 1, ...LOG_AMPLITUDE });
    offset += size;
  }
  windows.push({ at: offset + 1, centre: 0, width: JITTER_WIDTH });
  return windows;
}

export interface SimulatedSet {
  readonly truth: PortablePoint;
  readonly data: VelocityData;
}

type Elements = PortablePoint['companions'][number];

/** An orbit from prior times windows, by rejection from the windows (and from uniform e, where it would touch the star). */
function drawOrbit(random: RandomStream, region: CompanionRegion, scales: PriorScales): Elements {
  const { circular } = region;
  for (;;) {
    const periodDays = region.periodDays * Math.exp(region.logPeriodWidth * random.normal());
    const semiAmplitudeMps = Math.exp(LOG_AMPLITUDE.centre + LOG_AMPLITUDE.width * random.normal());
    // dK / (K + k0) is K / (K + k0) per d ln K.
    const isKept = random.uniform() < semiAmplitudeMps / (semiAmplitudeMps + scales.amplitudeScaleMps);
    const eccentricity = circular ? 0 : random.uniform();
    const argPeriastronStarRad = circular ? Math.PI / 2 : random.uniformBetween(0, 2 * Math.PI);
    const timePeriastronDays = random.uniformBetween(-0.5, 0.5) * periodDays;
    if (isKept && (circular || eccentricity < 1 - scales.starRadiusAtOneDay / Math.cbrt(periodDays ** 2)))
      return { periodDays, eccentricity, argPeriastronStarRad, timePeriastronDays, semiAmplitudeMps };
  }
}

/** A truth from prior times windows, and velocities from that truth. Time zero is the middle of the span. */
export function simulate({ companions, scales }: CalibrationProblem, random: RandomStream): SimulatedSet {
  const orbits = companions.map((region) => drawOrbit(random, region, scales));
  const zeroPoint = random.uniformBetween(-1, 1) * scales.zeroPointHalfWidthMps;
  const jitter = scales.jitterScaleMps * Math.abs(Math.sinh(JITTER_WIDTH * random.normal()));
  const timesDays = Float64Array.from({ length: VELOCITIES }, () =>
    random.uniformBetween(-SPAN_DAYS / 2, SPAN_DAYS / 2),
  ).sort();
  const sigmasMps = timesDays.map(() => SIGMA_MPS * random.uniformBetween(0.7, 1.4));
  const model = evaluateVelocity(
    {
      companions: orbits.map(({ timePeriastronDays, ...rest }) => ({
        ...rest,
        timePeriastronBjdTdb: timePeriastronDays,
      })),
      letters: [],
      zeroPointsMps: new Float64Array(0),
      jittersMps: new Float64Array(0),
      epochBjdTdb: 0,
      slopeMpsPerDay: 0,
      curvatureMpsPerDay2: 0,
    },
    timesDays,
  );
  return {
    truth: {
      companions: orbits,
      zeroPointsMps: Float64Array.of(zeroPoint),
      drift: [0, 0],
      jittersMps: Float64Array.of(jitter),
    },
    data: {
      timesDays,
      velocitiesMps: model.map((v, i) => v + zeroPoint + Math.hypot(sigmasMps[i]!, jitter) * random.normal()),
      sigmasMps,
      instrumentOf: new Uint16Array(VELOCITIES),
      instrumentCount: 1,
    },
  };
}
