/**
 * Transits in a light curve, alone and together with velocities and mid-times: a recipe of the joint model with fixed scales,
 * and Gaussian windows on all its coordinates, by which both the truths and the posterior are weighted.
 */
import type {
  CurveData,
  CurveSegment,
  JointRecipe,
  MidTimeData,
} from '../../../src/solving/joint/joint-data.js';
import type { PriorScales } from '../../../src/solving/posterior/priors.js';
import type { VelocityData } from '../../../src/signals/velocity-term.js';
import type { Window } from '../windowed-density.js';

const PERIOD_DAYS = 3.2;
/** Cycles seen by the light curve. */
const CYCLES = [-2, -1, 1, 2];
const CADENCE_DAYS = 10 / 1440;
const HALF_WINDOW_DAYS = 0.2;
/** Standard errors: of a point of the light curve, of a velocity, of a mid-time. */
export const SIGMA = 1.2e-3;
export const SIGMA_MPS = 3;
export const SIGMA_MID_TIME_DAYS = 0.001;
const VELOCITIES = 25;
const MID_TIMES = 8;

export interface TransitProblem {
  readonly name: string;
  readonly recipe: JointRecipe;
  /** One per coordinate, in their order. */
  readonly windows: readonly Window[];
}

function segmentsOf(rows: number): CurveSegment[] {
  const each = rows / CYCLES.length;
  return CYCLES.map((_, s) => ({
    start: s * each,
    end: (s + 1) * each,
    design: new Float64Array(each).fill(1),
    columns: 1,
  }));
}

/** When everything is observed; what is seen then is filled in per set. */
function curveData(): CurveData {
  const perEvent = Math.round((2 * HALF_WINDOW_DAYS) / CADENCE_DAYS);
  const timesDays = Float64Array.from(
    CYCLES.flatMap((cycle) =>
      Array.from(
        { length: perEvent },
        (_, i) => cycle * PERIOD_DAYS - HALF_WINDOW_DAYS + (i + 0.5) * CADENCE_DAYS,
      ),
    ),
  );
  return {
    name: 'survey',
    timesDays,
    flux: new Float64Array(timesDays.length).fill(1),
    sigmas: new Float64Array(timesDays.length).fill(SIGMA),
    averaged: new Float64Array(timesDays.length).fill(1),
    exposureDays: CADENCE_DAYS,
    band: 0,
    segments: segmentsOf(timesDays.length),
    dilution: { value: 0, sigma: 0 },
    jitter: null,
    noise: 'white',
    typicalSigma: SIGMA,
    scatter: 4 * SIGMA,
  };
}

function velocityData(): VelocityData {
  // Spread over all phases of many cycles.
  const timesDays = Float64Array.from(
    { length: VELOCITIES },
    (_, i) => -40 + 3.37 * i + 0.2 * Math.sin(7 * i),
  );
  return {
    timesDays,
    velocitiesMps: new Float64Array(VELOCITIES),
    sigmasMps: new Float64Array(VELOCITIES).fill(SIGMA_MPS),
    instrumentOf: new Uint16Array(VELOCITIES),
    instrumentCount: 1,
  };
}

function midTimeData(): MidTimeData {
  const cycles = Float64Array.from({ length: MID_TIMES }, (_, i) => -60 + 7 * i);
  return {
    companion: 0,
    path: 'mid-times',
    timesDays: cycles.map((cycle) => cycle * PERIOD_DAYS),
    sigmasDays: cycles.map(() => SIGMA_MID_TIME_DAYS),
    cycles,
    isOccultation: new Uint8Array(MID_TIMES),
  };
}

const SCALES: PriorScales = {
  shortestPeriodDays: 1,
  longestPeriodDays: 20,
  amplitudeScaleMps: 0.1 * SIGMA_MPS,
  largestAmplitudeMps: 1e4 * SIGMA_MPS,
  jitterScaleMps: 0.1 * SIGMA_MPS,
  largestJitterMps: 1e3 * SIGMA_MPS,
  zeroPointHalfWidthMps: 1e3,
  slopeHalfWidthMpsPerDay: 1,
  curvatureHalfWidthMpsPerDay2: 0.01,
  starRadiusAtOneDay: 0.2,
};

function recipeOf(together: boolean): JointRecipe {
  return {
    kind: 'joint',
    epochBjdTdb: 0,
    velocities: together ? velocityData() : null,
    drift: 0,
    zeroPoints: together ? [null] : [],
    velocityJitters: together ? [null] : [],
    velocityCounts: together ? [VELOCITIES] : [],
    curves: [curveData()],
    bands: [{ name: 'survey', u1: null, u2: null }],
    midTimes: together ? [midTimeData()] : [],
    companions: [
      {
        letter: 'b',
        circular: !together,
        transits: true,
        pulls: together,
        occultation: false,
        choice: null,
        conjunctionDays: 0,
        isPeriodUnknown: false,
        nominalPeriodDays: null,
        shortestPeriodDays: 2,
        longestPeriodDays: 5,
      },
    ],
    starDensityGcc: null,
    starRadiusLightDays: 0,
    scales: together ? SCALES : null,
  };
}

/** Centre and width per coordinate, in the order of the blocks; coordinates that are mirrored are centred on their mirror. */
function windowsOf(together: boolean): Window[] {
  const list: (readonly [number, number])[] = [
    [Math.log(PERIOD_DAYS), 3e-4], // ln P
    ...(together
      ? ([
          [0, 0.4], // plane of (e, omega): half of the eccentricities below 0.18
          [0, 0.4],
        ] as const)
      : []),
    [0, 0.004], // conjunction, days
    ...(together ? ([[Math.log(12 * SIGMA_MPS), 0.5]] as const) : []), // ln K
    [Math.log(0.1), 0.25], // ln radius ratio
    [0, 0.9], // impact parameter over 1 + ratio, through u/sqrt(1 + u^2)
    [Math.log(1.4), 0.4], // ln of the star's density
    [-0.4, 1.2], // limb darkening, logit of q1 and q2
    [-0.6, 1.2],
    [0, 1.2], // jitter of the light curve, asinh of it over 0.3 errors
    ...(together
      ? ([
          [0, 20], // zero point, m/s
          [0, 2], // jitter of the velocities, asinh of it over 0.1 errors
          [0, 1.2], // jitter of the mid-times, asinh of it over 0.3 errors
        ] as const)
      : []),
  ];
  return list.map(([centre, width], at) => ({ at, centre, width }));
}

export const TRANSIT_PROBLEMS: readonly TransitProblem[] = [
  { name: 'transits', recipe: recipeOf(false), windows: windowsOf(false) },
  { name: 'transits, velocities and mid-times', recipe: recipeOf(true), windows: windowsOf(true) },
];
