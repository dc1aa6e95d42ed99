/** The arrays about transits that charts and tables need. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import type { LightCurveTable } from '../../observations/photometry-types.js';
import { LightCurveKernel, TRANSIT_COORDINATES } from '../../signals/transit/light-curve-kernel.js';
import type { MidTimeOrigin } from '../timing/timing-data.js';
import type {
  DipVetting,
  FittedLightCurve,
  FittedMidTimes,
  PhotometryRecord,
  SolvedPhotometry,
  TransitCurve,
  WholeLightCurve,
} from '../transit-types.js';
import type { TimedEvent } from './event-times.js';
import type { TransitSearch } from './found-transit.js';
import type { JointSampled } from './joint-sampled.js';

import { CONJUNCTION, LOG_PERIOD } from './natural.js';
import type { SettledJoint } from './settle-joint.js';

const CURVE_POINTS = 301;
/** The model is drawn this many durations to either side of the middle. */
const CURVE_REACH = 1.6;

export function photometryArrays(
  settled: SettledJoint,
  joint: JointSampled,
  events: readonly TimedEvent[],
  search: TransitSearch,
  tables: readonly LightCurveTable[],
  epochBjdTdb: number,
): SolvedPhotometry {
  return {
    fitted: settled.prepared.curves.map((_, i) => fittedCurve(settled, i, epochBjdTdb)),
    whole: wholeCurves(tables, search),
    curves: transitCurves(settled),
    midTimes: fittedMidTimes(settled, joint, events, search, epochBjdTdb),
    spectra: search.dips?.stages ?? [],
    vettings: vettings(settled),
  };
}

function fittedCurve(settled: SettledJoint, curve: number, epochBjdTdb: number): FittedLightCurve {
  const { prepared, fit } = settled;
  const { table, data, windows } = prepared.curves[curve]!;
  const likelihood = fit.density.curves[curve]!;
  const ephemerides = ephemeridesOf(settled);
  return {
    name: table.name,
    band: table.band,
    timesBjdTdb: data.timesDays.map((time) => epochBjdTdb + time),
    flux: data.flux,
    sigmas: likelihood.variances.map(Math.sqrt),
    baseline: likelihood.baseline(),
    transit: Float64Array.from(likelihood.transit),
    segments: windows.map(({ start, end, events }) => ({
      start,
      end,
      events: events.flatMap(({ letter, midTimeDays, durationDays }) => {
        const own = ephemerides.get(letter);
        if (own === undefined) return [];
        const cycle = own.isUnknown ? 0 : Math.round((midTimeDays - own.conjunction) / own.period);
        const expected = own.conjunction + cycle * own.period;
        // What lies far from a transit is an occultation.
        return Math.abs(midTimeDays - expected) < durationDays
          ? [{ letter, cycle, midTimeBjdTdb: epochBjdTdb + expected }]
          : [];
      }),
    })),
  };
}

interface OwnEphemeris {
  readonly period: number;
  readonly conjunction: number;
  readonly isUnknown: boolean;
}

function ephemeridesOf({ fit, companions }: SettledJoint): Map<string, OwnEphemeris> {
  const { index } = fit.density.coordinates;
  return new Map(
    companions.map(({ letter }, c) => [
      letter,
      {
        period: Math.exp(fit.natural[index.companion(c) + LOG_PERIOD]!),
        conjunction: fit.natural[index.companion(c) + CONJUNCTION]!,
        isUnknown: fit.recipe.companions[c]!.isPeriodUnknown,
      },
    ]),
  );
}

/** Whole tables in order of time, with the trend of the search where there was one. */
export function wholeCurves(
  tables: readonly LightCurveTable[],
  { dips, surveyed, searched }: TransitSearch,
): WholeLightCurve[] {
  return tables.map((table) => {
    const place = surveyed.indexOf(table.name);
    const trend = new Float64Array(table.used).fill(1);
    if (dips !== null && searched !== null && place >= 0) {
      dips.trend.forEach((value, i) => {
        if (searched.segmentOf[i] !== place) return;
        const first = searched.firstRow[i]!;
        trend.fill(value, first, first + searched.rowCount[i]!);
      });
    }
    return { name: table.name, timesBjdTdb: table.timesBjdTdb, flux: table.flux, trend };
  });
}

/** Model of each companion in each band, with the exposure of the band's first table. */
function transitCurves({ fit, companions }: SettledJoint): TransitCurve[] {
  const { density, recipe } = fit;
  density.coordinates.read(fit.maximum.position);
  const { natural, transit, index } = density.coordinates;
  return recipe.companions.flatMap((companion, c) => {
    const own = companions[c]!.start.transit;
    if (!companion.transits || own === null) return [];
    const conjunction = natural[index.companion(c) + CONJUNCTION]!;
    return recipe.bands.flatMap((band, b): TransitCurve[] => {
      const table = recipe.curves.find((curve) => curve.band === b);
      if (table === undefined) return [];
      const hours = Float64Array.from(
        { length: CURVE_POINTS },
        (_, i) => 24 * own.durationDays * CURVE_REACH * ((2 * i) / (CURVE_POINTS - 1) - 1),
      );
      const kernel = new LightCurveKernel({
        timesDays: hours.map((hour) => conjunction + hour / 24),
        exposureDays: table.exposureDays,
        starRadiusLightDays: recipe.starRadiusLightDays,
      });
      const limb = index.band(b);
      kernel.evaluate(transit, c * TRANSIT_COORDINATES, natural[limb]!, natural[limb + 1]!, 0, false);
      const flux = new Float64Array(CURVE_POINTS).fill(1);
      for (let m = 0; m < kernel.touchedCount; m++) flux[kernel.touched[m]!] = 1 - kernel.loss[m]!;
      return [{ letter: companion.letter, band: band.name, hoursFromMidTransit: hours, flux }];
    });
  });
}

function fittedMidTimes(
  settled: SettledJoint,
  joint: JointSampled,
  events: readonly TimedEvent[],
  { sets }: TransitSearch,
  epochBjdTdb: number,
): FittedMidTimes[] {
  const { recipe, density } = settled.fit;
  return recipe.companions.flatMap((companion, c): FittedMidTimes[] => {
    const rows: {
      cycle: number;
      time: number;
      sigma: number;
      behind: number;
      source: string;
      expected: number;
    }[] = [];
    recipe.midTimes.forEach((set, i) => {
      if (set.companion !== c) return;
      const origins = sets.find(({ letter }) => letter === companion.letter)?.times.origins ?? [];
      set.timesDays.forEach((time, row) => {
        rows.push({
          cycle: set.cycles[row]!,
          time,
          sigma: set.sigmasDays[row]!,
          behind: set.isOccultation[row]!,
          source: sourceOf(origins[row]),
          expected: density.midTimes[i]!.predictionDays[row]!,
        });
      });
    });
    const base = density.coordinates.index.companion(c);
    const expectedAt = (natural: Float64Array, cycle: number): number =>
      natural[base + CONJUNCTION]! + cycle * Math.exp(natural[base + LOG_PERIOD]!);
    for (const event of events) {
      if (event.companion !== c || event.midTimeDays === null) continue;
      rows.push({
        cycle: event.cycle,
        time: event.midTimeDays,
        sigma: 0.5 * (event.upperDays! - event.lowerDays!),
        behind: 0,
        source: recipe.curves[event.curve]!.name,
        expected: expectedAt(settled.fit.natural, event.cycle),
      });
    }
    if (rows.length === 0) return [];
    rows.sort((a, b) => a.time - b.time);
    return [
      {
        letter: companion.letter,
        sources: rows.map(({ source }) => source),
        cycles: Int32Array.from(rows, ({ cycle }) => cycle),
        timesBjdTdb: Float64Array.from(rows, ({ time }) => epochBjdTdb + time),
        sigmasDays: Float64Array.from(rows, ({ sigma }) => sigma),
        oMinusCMinutes: Float64Array.from(rows, ({ time, expected }) => MINUTES_PER_DAY * (time - expected)),
        ephemerisSigmaMinutes: Float64Array.from(rows, ({ cycle }) => {
          let square = 0;
          const centre = expectedAt(joint.best.natural, cycle);
          for (const draw of joint.draws) square += (expectedAt(draw.natural, cycle) - centre) ** 2;
          return MINUTES_PER_DAY * Math.sqrt(square / Math.max(1, joint.draws.length));
        }),
        isOccultation: Uint8Array.from(rows, ({ behind }) => behind),
      },
    ];
  });
}

/** Who measured a mid-time, or the file it stands in. */
function sourceOf(origin: MidTimeOrigin | undefined): string {
  if (origin === undefined) return '';
  return origin.source === '' ? origin.path : origin.source;
}

function vettings({ companions }: SettledJoint): DipVetting[] {
  return companions.flatMap(({ letter, found }): DipVetting[] => {
    const oddEven = found?.candidate?.oddEven ?? null;
    if (oddEven === null) return [];
    const secondary = found?.candidate?.secondary ?? null;
    return [
      {
        letter,
        oddDepthPpm: 1e6 * oddEven.oddDepth,
        oddDepthSigmaPpm: 1e6 * oddEven.oddDepthSigma,
        evenDepthPpm: 1e6 * oddEven.evenDepth,
        evenDepthSigmaPpm: 1e6 * oddEven.evenDepthSigma,
        secondary:
          secondary === null
            ? null
            : {
                phase: secondary.phase,
                depthPpm: 1e6 * secondary.depth,
                sigmaPpm: 1e6 * secondary.depthSigma,
              },
      },
    ];
  });
}

/** Dips of the search that were looked at and not taken. */
export function refusedDips({ dips }: TransitSearch): PhotometryRecord['refused'] {
  return (dips?.rejected ?? []).map(({ periodDays, depth, why }) => ({
    period: periodDays,
    depth: 1e6 * depth,
    why,
  }));
}
