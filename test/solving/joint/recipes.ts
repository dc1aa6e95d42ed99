/** Recipes of the joint model with everything it may consist of, and a point of each. */
import { RandomStream } from '../../../src/numerics/random.js';
import type { CompanionChoice } from '../../../src/observations/types.js';
import type { VelocityData } from '../../../src/signals/velocity-term.js';
import type {
  CurveData,
  JointCompanion,
  JointRecipe,
  MidTimeData,
} from '../../../src/solving/joint/joint-data.js';
import { JointCoordinates } from '../../../src/solving/joint/joint-coordinates.js';
import {
  AMPLITUDE,
  CONJUNCTION,
  LOG_PERIOD,
  NaturalIndex,
  RADIUS_RATIO,
  RELATIVE_IMPACT,
  SHAPE,
} from '../../../src/solving/joint/natural.js';
import type { PriorScales } from '../../../src/solving/posterior/priors.js';

export const EPOCH = 2_459_100;
export const PERIODS: readonly number[] = [3.3, 7.9];
const CONJUNCTIONS: readonly number[] = [0.02, 1.13];

export const SCALES: PriorScales = {
  shortestPeriodDays: 0.5,
  longestPeriodDays: 200,
  amplitudeScaleMps: 0.3,
  largestAmplitudeMps: 1e4,
  jitterScaleMps: 0.9,
  largestJitterMps: 1e3,
  zeroPointHalfWidthMps: 1e4,
  slopeHalfWidthMpsPerDay: 5,
  curvatureHalfWidthMpsPerDay2: 0.5,
  starRadiusAtOneDay: 0.2,
};

/** Two events of the first companion, one of which shows the second one too. A straight line stands under each. */
export function curve(random: RandomStream, more: Partial<CurveData> = {}): CurveData {
  const centres = [0, 1.08, 6.62];
  const each = 60;
  const timesDays = Float64Array.from(
    centres.flatMap((centre) => Array.from({ length: each }, (_, i) => centre + 0.0045 * (i - 29.3))),
  );
  const rows = timesDays.length;
  return {
    name: 'survey',
    timesDays,
    flux: timesDays.map(
      (time, i) => 1 - (Math.abs(time - centres[Math.floor(i / each)]!) < 0.06 ? 0.01 : 0) + 8e-4 * random.normal(),
    ),
    sigmas: new Float64Array(rows).fill(7e-4),
    averaged: timesDays.map((_, i) => 1 + (i % 2)),
    exposureDays: 0,
    band: 0,
    segments: centres.map((_, s) => ({
      start: s * each,
      end: (s + 1) * each,
      columns: 2,
      design: Float64Array.from({ length: 2 * each }, (__, j) => (j % 2 === 0 ? 1 : (j - each) / each)),
    })),
    dilution: { value: 0, sigma: 0 },
    jitter: null,
    noise: 'white',
    typicalSigma: 7e-4,
    scatter: 4e-3,
    ...more,
  };
} // prettier-ignore

export function velocities(random: RandomStream, instruments = 2): VelocityData {
  const timesDays = Float64Array.from({ length: 30 }, (_, i) => -40 + 2.77 * i + random.uniform());
  return {
    timesDays,
    velocitiesMps: timesDays.map((time) => 20 * Math.sin(1.9 * time) + 5 * random.normal()),
    sigmasMps: timesDays.map(() => 2 + random.uniform()),
    instrumentOf: Uint16Array.from(timesDays, (_, i) => i % instruments),
    instrumentCount: instruments,
  };
}

export function midTimes(random: RandomStream, withOccultations: boolean, companion = 0): MidTimeData {
  const cycles = Float64Array.from({ length: 9 }, (_, i) => 5 * i - 17);
  const isOccultation = Uint8Array.from(cycles, (_, i) => (withOccultations && i % 3 === 1 ? 1 : 0));
  return {
    companion,
    path: 'mid-times.csv',
    cycles,
    isOccultation,
    timesDays: cycles.map(
      (cycle, i) =>
        CONJUNCTIONS[companion]! + PERIODS[companion]! * (cycle + 0.55 * isOccultation[i]!) + 2e-3 * random.normal(),
    ),
    sigmasDays: cycles.map(() => 1.5e-3),
  };
} // prettier-ignore

export function companion(place: 0 | 1, more: Partial<JointCompanion> = {}): JointCompanion {
  return {
    letter: 'bc'[place]!,
    circular: true,
    transits: true,
    pulls: false,
    occultation: false,
    choice: null,
    conjunctionDays: CONJUNCTIONS[place]!,
    isPeriodUnknown: false,
    nominalPeriodDays: null,
    shortestPeriodDays: PERIODS[place]! / 1.5,
    longestPeriodDays: PERIODS[place]! * 1.5,
    ...more,
  };
}

/** What a case states of a companion. */
export function stated(
  elements: CompanionChoice['elements'],
  transit: NonNullable<CompanionChoice['transit']> = {},
): CompanionChoice {
  return { letter: 'b', circular: false, elements, inclinationDeg: null, transit };
}

export function recipe(parts: Partial<JointRecipe>): JointRecipe {
  const instruments = parts.velocities?.instrumentCount ?? 0;
  return {
    kind: 'joint',
    epochBjdTdb: EPOCH,
    velocities: null,
    drift: 0,
    zeroPoints: new Array<null>(instruments).fill(null),
    velocityJitters: new Array<null>(instruments).fill(null),
    velocityCounts: new Array<number>(instruments).fill(15),
    curves: [],
    bands: parts.curves === undefined ? [] : [{ name: 'V', u1: null, u2: null }],
    midTimes: [],
    companions: [companion(0)],
    starDensityGcc: null,
    starRadiusLightDays: 2.7e-5,
    scales: parts.velocities == null ? null : SCALES,
    ...parts,
  };
}

/** Natural parameters near what the data were made from, none of them at a special place. */
export function naturalPoint(of: JointRecipe): Float64Array {
  const index = new NaturalIndex(of);
  const natural = new Float64Array(index.size);
  of.companions.forEach(({ circular }, c) => {
    const base = index.companion(c);
    natural[base + LOG_PERIOD] = Math.log(PERIODS[c]! + 2e-4);
    natural[base + CONJUNCTION] = CONJUNCTIONS[c]! + 1e-3;
    natural[base + SHAPE] = circular ? 0 : 0.11;
    natural[base + SHAPE + 1] = circular ? 0 : -0.07;
    natural[base + AMPLITUDE] = 18;
    natural[base + RADIUS_RATIO] = 0.1 - 0.02 * c;
    natural[base + RELATIVE_IMPACT] = 0.4 + 0.1 * c;
  });
  natural[index.logStarDensity] = Math.log(1.1);
  of.bands.forEach((_, b) => {
    natural[index.band(b)] = 0.4;
    natural[index.band(b) + 1] = 0.15;
    of.companions.forEach((__, c) => (natural[index.occultationDepth(c, b)] = 4e-4));
  });
  of.curves.forEach(({ dilution }, i) => {
    natural[index.curveJitter(i)] = 4e-4;
    natural[index.dilution(i)] = dilution.value + 0.02;
    natural[index.correlatedNoise(i)] = 5e-4;
    natural[index.correlatedNoise(i) + 1] = 0.06;
  });
  for (let i = 0; i < (of.velocities?.instrumentCount ?? 0); i++) {
    natural[index.zeroPoint(i)] = 1.5 - i;
    natural[index.velocityJitter(i)] = 2.2 + i;
  }
  natural[index.drift] = 0.02;
  natural[index.drift + 1] = -0.001;
  of.midTimes.forEach((_, i) => (natural[index.midTimeJitter(i)] = 8e-4));
  return natural;
}

/** The same as a position of the density's coordinates. */
export function positionOf(of: JointRecipe): Float64Array {
  return new JointCoordinates(of, 'all').position(naturalPoint(of));
}

export const seeded = (seed: number): RandomStream => RandomStream.fromSeed(seed);
