/** The part of the record that light curves and mid-times fill. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import { rootMeanSquare } from '../../numerics/summary.js';
import type { Case } from '../../observations/types.js';
import { meanDensityGramsPerCm3 } from '../../orbit/star-density.js';
import { centralInterval, fixedQuantity, unknownQuantity } from '../quantities.js';
import type {
  BandRecord,
  DetectionRecord,
  LightCurveRecord,
  MidTimeRecord,
  PhotometryRecord,
  TransitEventRecord,
} from '../transit-types.js';
import type { Quantity } from '../types.js';
import type { TransitSearch } from './found-transit.js';
import type { TimedEvent } from './event-times.js';
import type { JointSampled } from './joint-sampled.js';
import type { JointValues } from './joint-values.js';
import { CONJUNCTION, LOG_PERIOD } from './natural.js';
import { refusedDips } from './photometry-arrays.js';
import type { SettledJoint } from './settle-joint.js';

export function photometryRecord(
  theCase: Case,
  settled: SettledJoint,
  joint: JointSampled,
  events: readonly TimedEvent[],
  search: TransitSearch,
  epochBjdTdb: number,
): PhotometryRecord {
  const { density, recipe } = settled.fit;
  const { index } = density.coordinates;
  const quantity = (unit: string, read: (values: JointValues) => number): Quantity =>
    varyingQuantity(joint, unit, read);
  const natural = (unit: string, at: number, scale = 1): Quantity =>
    quantity(unit, (values) => scale * values.natural[at]!);
  const lightCurves = settled.prepared.curves.map((curve, i): LightCurveRecord => {
    const { table, data, averaged } = curve;
    const residuals = residualsOf(settled, i);
    return {
      name: table.name,
      path: table.path,
      band: table.band,
      count: data.timesDays.length,
      rows: table.used,
      averaged,
      exposure: data.exposureDays,
      jitter: natural('ppm', index.curveJitter(i), 1e6),
      rms: 1e6 * rootMeanSquare(residuals),
      dilution: natural('', index.dilution(i)),
      baseline: ['constant', ...curve.terms],
      perEvent: curve.windows.length > 1,
      correlatedNoise:
        data.noise === 'correlated'
          ? {
              amplitude: natural('ppm', index.correlatedNoise(i), 1e6),
              timescale: natural('d', index.correlatedNoise(i) + 1),
            }
          : null,
      selection: curve.selection,
    };
  });
  const bands = recipe.bands.map(({ name, u1, u2 }, b): BandRecord => ({
    name,
    u1: natural('', index.band(b)),
    u2: natural('', index.band(b) + 1),
    prior: u1 === null && u2 === null ? 'triangular' : 'stated',
    occultationDepths: Object.fromEntries(
      recipe.companions.flatMap((companion, c) =>
        companion.occultation ? [[companion.letter, natural('ppm', index.occultationDepth(c, b), 1e6)]] : [],
      ),
    ),
  }));
  const midTimes = recipe.midTimes.map((set, i): MidTimeRecord => {
    const residuals = set.timesDays.map(
      (time, row) => MINUTES_PER_DAY * (time - density.midTimes[i]!.predictionDays[row]!),
    );
    return {
      letter: recipe.companions[set.companion]!.letter,
      path: set.path,
      count: set.timesDays.length,
      jitter: natural('min', index.midTimeJitter(i), MINUTES_PER_DAY),
      rms: rootMeanSquare(residuals),
    };
  });
  const hasTransits = recipe.companions.some(({ transits, isPeriodUnknown }) => transits && !isPeriodUnknown);
  const starDensity = hasTransits
    ? quantity('g/cm3', (values) => Math.exp(values.natural[index.logStarDensity]!))
    : unknownQuantity('g/cm3', 'no transit with a known period tells it');
  const starDensityGiven = givenDensity(theCase, joint);
  return {
    detections: detectionRecords(settled, events),
    refused: refusedDips(search),
    lightCurves,
    bands,
    events: events.map((event) => eventRecord(event, settled, joint, epochBjdTdb)),
    midTimes,
    starDensity,
    starDensityGiven,
    starDensityTension: tension(starDensity, starDensityGiven),
  };
}

/** Relative residuals: observed over baseline and transit, minus 1. */
export function residualsOf(settled: SettledJoint, curve: number): Float64Array {
  const likelihood = settled.fit.density.curves[curve]!;
  const baseline = likelihood.baseline();
  return likelihood.curve.flux.map((flux, i) => flux / baseline[i]! - likelihood.transit[i]!);
}

function varyingQuantity(joint: JointSampled, unit: string, read: (values: JointValues) => number): Quantity {
  const best = read(joint.best);
  const draws = Float64Array.from(joint.draws, read);
  return draws.length > 0 && draws.every((value) => value === draws[0])
    ? fixedQuantity(best, unit)
    : centralInterval(best, draws, unit);
}

/** Density that the given mass and radius of the star mean. */
function givenDensity(theCase: Case, joint: JointSampled): Quantity {
  const { massSolar, radiusSolar } = theCase.star;
  if (massSolar === null || radiusSolar === null)
    return unknownQuantity('g/cm3', 'mass and radius of the star are not both given');
  return centralInterval(
    meanDensityGramsPerCm3(massSolar.value, radiusSolar.value),
    Float64Array.from(joint.sampled.stars, (star) =>
      meanDensityGramsPerCm3(star.massSolar!, star.radiusSolar!),
    ),
    'g/cm3',
  );
}

/** Difference of two densities over their common error, each on the side that faces the other. */
function tension(a: Quantity, b: Quantity): number | null {
  if (a.value === null || b.value === null || a.lower === null || b.lower === null) return null;
  const [low, high] = a.value < b.value ? [a, b] : [b, a];
  const up = low.upper! - low.value!;
  const down = high.value! - high.lower!;
  const sigma = Math.hypot(up, down);
  return sigma > 0 ? (high.value! - low.value!) / sigma : null;
}

function eventRecord(
  { curve, companion, cycle, points, midTimeDays, lowerDays, upperDays }: TimedEvent,
  settled: SettledJoint,
  joint: JointSampled,
  epochBjdTdb: number,
): TransitEventRecord {
  const { recipe, density } = settled.fit;
  const base = density.coordinates.index.companion(companion);
  const expected = (values: JointValues): number =>
    values.natural[base + CONJUNCTION]! + cycle * Math.exp(values.natural[base + LOG_PERIOD]!);
  const shared = {
    letter: recipe.companions[companion]!.letter,
    table: recipe.curves[curve]!.name,
    cycle,
    points,
  };
  if (midTimeDays === null || lowerDays === null || upperDays === null) {
    const why = 'too little of this transit was observed to time it by itself';
    return { ...shared, midTime: unknownQuantity('d', why), oMinusC: unknownQuantity('min', why) };
  }
  const sigma = 0.5 * (upperDays - lowerDays);
  const off = MINUTES_PER_DAY * (midTimeDays - expected(joint.best));
  return {
    ...shared,
    midTime: {
      value: epochBjdTdb + midTimeDays,
      sigma,
      lower: epochBjdTdb + lowerDays,
      upper: epochBjdTdb + upperDays,
      unit: 'd',
    },
    oMinusC: {
      value: off,
      sigma: MINUTES_PER_DAY * sigma,
      lower: off - MINUTES_PER_DAY * (midTimeDays - lowerDays),
      upper: off + MINUTES_PER_DAY * (upperDays - midTimeDays),
      unit: 'min',
    },
  };
}

function detectionRecords({ companions }: SettledJoint, events: readonly TimedEvent[]): DetectionRecord[] {
  return companions.flatMap(({ letter, found }, c) => {
    if (found === null || !found.isSeen) return [];
    const { candidate, how } = found;
    return [
      {
        letter,
        how,
        signalToNoise: candidate?.signalToNoise ?? null,
        efficiency: candidate?.efficiency ?? null,
        falseAlarmProbability: candidate?.falseAlarmProbability ?? null,
        events: new Set(events.filter(({ companion }) => companion === c).map(({ cycle }) => cycle)).size,
      },
    ];
  });
}
