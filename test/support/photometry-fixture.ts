/** Invented solutions with light curves and mid-times, made by simple formulas: no solver and no exact light curve is involved. */
import type {
  FittedLightCurve,
  FittedMidTimes,
  PhotometryRecord,
  SolvedPhotometry,
  TransitCurve,
  TransitEventRecord,
  WholeLightCurve,
} from '../../src/solving/transit-types.js';
import type { CompanionRecord, PosteriorColumn, Quantity, Solved } from '../../src/solving/types.js';
import { withDraws } from './draws-fixture.js';
import { dipSpectra } from './dip-spectra-fixture.js';
import { makeSolved, randomSource } from './solved-fixture.js';
import { quantity, unknown } from './solved-record-fixture.js';

export const FROM_BJD = 2_459_123;
const HOURS = 24;

/** A transiting companion of the fixture. */
interface Transiting {
  readonly letter: string;
  readonly periodDays: number;
  readonly midTimeBjdTdb: number;
  readonly ratio: number;
  readonly impact: number;
  readonly scaledAxis: number;
  readonly semiAmplitudeMps: number;
}

const COMPANIONS: readonly Transiting[] = [
  { letter: 'b', periodDays: 3.35118, midTimeBjdTdb: FROM_BJD + 1.2345, ratio: 0.095, impact: 0.32, scaledAxis: 9.1, semiAmplitudeMps: 71.2 },
  { letter: 'c', periodDays: 8.71402, midTimeBjdTdb: FROM_BJD + 3.7712, ratio: 0.055, impact: 0.21, scaledAxis: 17.2, semiAmplitudeMps: 12.9 },
]; // prettier-ignore

export interface PhotometryRequest {
  readonly seed?: number;
  readonly target?: string;
  readonly companions?: 1 | 2;
  /** `false`: no velocities at all, semi-amplitudes unknown. Default true. */
  readonly velocities?: boolean;
  readonly draws?: boolean;
  /** Of the survey, min; default 2. */
  readonly cadenceMinutes?: number;
  /** Of the survey, d; default 27. */
  readonly spanDays?: number;
  /** White noise of the survey, ppm; default 900. */
  readonly noisePpm?: number;
  /** Days that the survey paused after its first half; default 1.2. */
  readonly gapDays?: number;
  /** Leaves out the two transits from the ground. */
  readonly surveyOnly?: boolean;
  /** Names of the survey, of the two tables from the ground, and of the source of the old mid-times. */
  readonly names?: readonly [string, string, string, string];
  readonly bands?: readonly [string, string, string];
}

/** First to last contact of a circular orbit, d (Seager & Mallen-Ornelas 2003, ApJ 585, 1038, equation 3). */
function durationDays({ periodDays, ratio, impact, scaledAxis }: Transiting): number {
  const sinI = Math.sqrt(1 - (impact / scaledAxis) ** 2);
  const half = Math.sqrt((1 + ratio) ** 2 - impact ** 2) / (scaledAxis * sinI);
  return (periodDays / Math.PI) * Math.asin(half);
}

/** Roughly the loss of light at a projected distance of `z` stellar radii: limb-darkened inside, a smooth ramp at the edge. */
function loss(z: number, ratio: number, u1: number, u2: number): number {
  if (z >= 1 + ratio) return 0;
  const mu = Math.sqrt(Math.max(0, 1 - Math.min(z, 1 - ratio / 2) ** 2));
  const bright = (1 - u1 * (1 - mu) - u2 * (1 - mu) ** 2) / (1 - u1 / 3 - u2 / 6);
  const share = Math.min(1, Math.max(0, (1 + ratio - z) / (2 * ratio)));
  return ratio * ratio * bright * share * share * (3 - 2 * share);
}

function ownFlux(one: Transiting, daysFromMid: number, u1: number): number {
  const angle = (2 * Math.PI * daysFromMid) / one.periodDays;
  if (Math.cos(angle) < 0) return 1;
  const z = Math.hypot(one.scaledAxis * Math.sin(angle), one.impact * Math.cos(angle));
  return 1 - loss(z, one.ratio, u1, 0.2);
}

function fromMid(one: Transiting, time: number): { cycle: number; days: number } {
  const cycle = Math.round((time - one.midTimeBjdTdb) / one.periodDays) + 0; // no minus zero
  return { cycle, days: time - one.midTimeBjdTdb - cycle * one.periodDays };
}

interface TableRequest {
  readonly name: string;
  readonly band: string;
  readonly u1: number;
  readonly times: Float64Array;
  readonly noisePpm: number;
  readonly baseline: (time: number) => number;
  readonly trended: boolean;
}

interface MadeTable {
  readonly fitted: FittedLightCurve;
  readonly whole: WholeLightCurve;
  readonly rmsPpm: number;
}

function makeTable(
  request: TableRequest,
  companions: readonly Transiting[],
  random: { gauss(): number },
): MadeTable {
  const { times } = request;
  const transit = times.map((time) =>
    companions.reduce((all, one) => all + ownFlux(one, fromMid(one, time).days, request.u1) - 1, 1),
  );
  const baseline = times.map(request.baseline);
  const noise = times.map(() => 1e-6 * request.noisePpm * random.gauss());
  const flux = times.map((_, i) => baseline[i]! * (transit[i]! + noise[i]!));
  const kept: number[] = [];
  const segments: { start: number; end: number; events: { letter: string; cycle: number; midTimeBjdTdb: number }[] }[] = []; // prettier-ignore
  let open = '';
  times.forEach((time, row) => {
    const near = companions.flatMap((one) => {
      const { cycle, days } = fromMid(one, time);
      const within = Math.abs(days) < 1.5 * durationDays(one) || !request.trended;
      return within && Math.abs(days) < 0.25
        ? [
            {
              letter: one.letter,
              cycle,
              midTimeBjdTdb: one.midTimeBjdTdb + cycle * one.periodDays,
            },
          ]
        : [];
    });
    if (near.length === 0) {
      open = '';
      return;
    }
    const name = near.map(({ letter, cycle }) => `${letter}${cycle}`).join(' ');
    const last = segments.at(-1);
    if (
      last !== undefined &&
      open !== '' &&
      (open === name || last.events.some((e) => name.includes(`${e.letter}${e.cycle}`)))
    ) {
      // prettier-ignore
      last.end = kept.length + 1;
      for (const event of near)
        if (!last.events.some((e) => e.letter === event.letter && e.cycle === event.cycle))
          last.events.push(event);
    } else segments.push({ start: kept.length, end: kept.length + 1, events: near });
    open = name;
    kept.push(row);
  });
  const pick = (values: Float64Array): Float64Array => Float64Array.from(kept, (row) => values[row]!);
  const ownNoise = pick(noise);
  return {
    fitted: {
      name: request.name,
      band: request.band,
      timesBjdTdb: pick(times),
      flux: pick(flux),
      sigmas: Float64Array.from(kept, () => 1e-6 * request.noisePpm),
      baseline: pick(baseline),
      transit: pick(transit),
      segments,
    },
    whole: {
      name: request.name,
      timesBjdTdb: times,
      flux,
      trend: request.trended ? baseline : baseline.map(() => 1),
    },
    rmsPpm: 1e6 * Math.sqrt(ownNoise.reduce((sum, value) => sum + value * value, 0) / ownNoise.length),
  };
}

function curveOf(one: Transiting, band: string, u1: number): TransitCurve {
  const half = 1.6 * durationDays(one);
  const hours = Float64Array.from({ length: 801 }, (_, i) => HOURS * half * (i / 400 - 1));
  return {
    letter: one.letter,
    band,
    hoursFromMidTransit: hours,
    flux: hours.map((value) => ownFlux(one, value / HOURS, u1)),
  };
}

/** Old mid-times from tables, one in three an occultation, and those of the light curves. */
function midTimesOf(
  one: Transiting,
  events: readonly TransitEventRecord[],
  source: string,
  random: { gauss(): number },
): FittedMidTimes {
  const old = Array.from({ length: 14 }, (_, i) => ({ cycle: -620 + 41 * i, source: i % 2 === 0 ? source : 'Moor survey', occultation: i % 5 === 3, sigmaMinutes: 0.5 + 0.3 * (i % 3) })); // prettier-ignore
  const own = events.filter(({ letter }) => letter === one.letter).map((event) => ({ cycle: event.cycle, source: event.table, occultation: false, sigmaMinutes: 0.4 })); // prettier-ignore
  const rows = [...old, ...own].sort((a, b) => a.cycle - b.cycle);
  const oMinusC = Float64Array.from(rows, (row) => row.sigmaMinutes * random.gauss());
  return {
    letter: one.letter,
    sources: rows.map((row) => row.source),
    cycles: Int32Array.from(rows, (row) => row.cycle),
    timesBjdTdb: Float64Array.from(rows, (row, i) => one.midTimeBjdTdb + (row.cycle + (row.occultation ? 0.5 : 0)) * one.periodDays + oMinusC[i]! / 1440), // prettier-ignore
    sigmasDays: Float64Array.from(rows, (row) => row.sigmaMinutes / 1440),
    oMinusCMinutes: oMinusC,
    ephemerisSigmaMinutes: Float64Array.from(rows, (row) => Math.hypot(0.12, 0.0006 * (row.cycle + 150))),
    isOccultation: Uint8Array.from(rows, (row) => (row.occultation ? 1 : 0)),
  };
}

function transitQuantities(
  companion: CompanionRecord,
  one: Transiting,
  hasVelocities: boolean,
): CompanionRecord {
  const none = 'there are no velocities';
  const inclination = (Math.acos(one.impact / one.scaledAxis) * 180) / Math.PI;
  const hours = HOURS * durationDays(one);
  const velocityOnly = (value: number, sigma: number, unit: string): Quantity =>
    hasVelocities ? quantity(value, sigma, unit) : unknown(unit, none);
  return {
    ...companion,
    elements: {
      ...companion.elements,
      semiAmplitude: velocityOnly(one.semiAmplitudeMps, 0.9, 'm/s'),
      timeOfInferiorConjunction: quantity(one.midTimeBjdTdb, 0.00012, 'd'),
      period: quantity(one.periodDays, 0.0000031, 'd'),
      inclination: quantity(inclination, 0.31, 'deg'),
      radiusRatio: quantity(one.ratio, 0.0006, ''),
      scaledSemiMajorAxis: quantity(one.scaledAxis, 0.14, ''),
      impactParameter: quantity(one.impact, 0.05, ''),
    },
    derived: {
      ...companion.derived,
      semiMajorAxis: quantity(0.0451, 0.0007, 'au'),
      minimumMass: velocityOnly(0.512, 0.013, 'M_jup'),
      mass: velocityOnly(0.5127, 0.013, 'M_jup'),
      massFunction: velocityOnly(1.2e-10, 0.1e-10, 'M_sun'),
      transitProbability: quantity(0.11, 0.002, ''),
      radius: quantity(9.9 * one.ratio, 0.017, 'R_jup'),
      meanDensity: velocityOnly(0.72, 0.04, 'g/cm3'),
      surfaceGravity: velocityOnly(14.9, 0.6, 'm/s2'),
      totalDuration: quantity(hours, 0.012, 'h'),
      fullDuration: quantity(0.78 * hours, 0.02, 'h'),
      midTransitDepth: quantity(1.14e6 * one.ratio ** 2, 55, 'ppm'),
      timeOfOccultation: quantity(one.midTimeBjdTdb + one.periodDays / 2 + 0.0005, 0.0002, 'd'),
      scaleHeight: velocityOnly(510, 30, 'km'),
      rossiterMcLaughlin: quantity(8.1, 0.2, 'm/s'),
    },
  };
}

function eventsOf(tables: readonly MadeTable[], random: { gauss(): number }): TransitEventRecord[] {
  return tables
    .flatMap(({ fitted }) =>
      fitted.segments.flatMap(({ start, end, events }) =>
        events.map((event): TransitEventRecord => {
          const away = 0.4 * random.gauss();
          return {
            letter: event.letter,
            table: fitted.name,
            cycle: event.cycle,
            points: end - start,
            midTime: quantity(event.midTimeBjdTdb + away / 1440, 0.4 / 1440, 'd'),
            oMinusC: quantity(away, 0.4, 'min'),
          };
        }),
      ),
    )
    .sort((a, b) => a.letter.localeCompare(b.letter) || a.cycle - b.cycle);
}

/** Columns of the posterior that only light curves give: radius ratio, impact parameter and a/R bend around one another. */
function transitColumns(solved: Solved, seed: number): PosteriorColumn[] {
  const random = randomSource(seed);
  const total = solved.posterior!.chains * solved.posterior!.drawsPerChain;
  const columns: PosteriorColumn[] = [];
  const add = (key: string, make: (index: number) => number, unit = ''): Float64Array => {
    const values = Float64Array.from({ length: total }, (_, index) => make(index));
    columns.push({ key, unit, values, cycle: 0 });
    return values;
  };
  for (const one of solved.record.companions) {
    const { radiusRatio, scaledSemiMajorAxis, impactParameter } = one.elements;
    if (radiusRatio === undefined) continue;
    const start = `companions.${one.letter}.elements.`;
    const b = add(`${start}impactParameter`, () => Math.abs(impactParameter!.value! + 0.08 * random.gauss()));
    add(`${start}radiusRatio`, (i) => radiusRatio.value! * (1 + 0.02 * b[i]! ** 2) + 0.0004 * random.gauss());
    add(`${start}scaledSemiMajorAxis`, (i) => scaledSemiMajorAxis!.value! * (1 - 0.2 * (b[i]! ** 2 - impactParameter!.value! ** 2)) + 0.05 * random.gauss()); // prettier-ignore
    add(`companions.${one.letter}.derived.radius`, () => one.derived.radius!.value! + 0.017 * random.gauss(), 'R_jup'); // prettier-ignore
  }
  for (const { name, u1, u2 } of solved.record.photometry!.bands) {
    const first = add(`photometry.bands.${name}.u1`, () => u1.value! + 0.05 * random.gauss());
    add(`photometry.bands.${name}.u2`, (i) => u2.value! - 0.8 * (first[i]! - u1.value!) + 0.03 * random.gauss()); // prettier-ignore
  }
  for (const { name } of solved.record.photometry!.lightCurves)
    add(`photometry.lightCurves.${name}.jitter`, () => Math.abs(60 * random.gauss()), 'ppm');
  return columns;
}

/** The invented solution: a survey over 27 d at 2 min with trend and gap, two transits from the ground, old mid-times. */
export function makePhotometrySolved(request: PhotometryRequest = {}): Solved {
  const random = randomSource(request.seed ?? 11);
  const { cadenceMinutes = 2, spanDays = 27, noisePpm = 900, gapDays = 1.2 } = request;
  const hasVelocities = request.velocities ?? true;
  const companions = COMPANIONS.slice(0, request.companions ?? 1);
  const names = request.names ?? ['Moor survey', 'Hill telescope', 'Lake dome', 'old records'];
  const bands = request.bands ?? ['wide', 'r', 'i'];
  const base = makeSolved({
    seed: request.seed ?? 11,
    target: request.target ?? 'Vellamo',
    instruments: hasVelocities ? [{ name: 'North', count: 38, sigmaMps: 3, jitterMps: 2, zeroPointMps: -13_250 }] : [], // prettier-ignore
    companions: companions.map((one) => ({ periodDays: one.periodDays, eccentricity: 0, argPeriastronStarRad: Math.PI / 2, timePeriastronBjdTdb: one.midTimeBjdTdb, semiAmplitudeMps: hasVelocities ? one.semiAmplitudeMps : 0, semiMajorAxisAu: 0.045 })), // prettier-ignore
    fromBjdTdb: FROM_BJD,
    toBjdTdb: FROM_BJD + 140,
  });
  const step = cadenceMinutes / 1440;
  const count = Math.floor(spanDays / step);
  const surveyTimes = Float64Array.from({ length: count }, (_, i) => FROM_BJD + 0.1 + i * step + (i * step > spanDays / 2 ? gapDays : 0)); // prettier-ignore
  const requests: TableRequest[] = [
    {
      name: names[0], band: bands[0], u1: 0.35, times: surveyTimes, noisePpm, trended: true,
      baseline: (t) => 1 + 0.004 * Math.sin((2 * Math.PI * (t - FROM_BJD)) / 9.3) + 0.0001 * (t - FROM_BJD - 14),
    },
  ]; // prettier-ignore
  if (request.surveyOnly !== true) {
    const [first] = companions;
    for (const [index, cycle] of [12, 19].entries()) {
      const middle = first!.midTimeBjdTdb + cycle * first!.periodDays;
      requests.push({
        name: names[index + 1]!, band: bands[index + 1]!, u1: 0.45 - 0.1 * index, trended: false, noisePpm: 1500 + 400 * index,
        times: Float64Array.from({ length: 300 }, (_, i) => middle + (i - 150 + 20 * index) / 1440),
        baseline: (t) => 1.002 - 0.0015 * (t - middle) * 8 + 0.02 * (t - middle) ** 2,
      }); // prettier-ignore
    }
  }
  const tables = requests.map((one) => makeTable(one, companions, random));
  const events = eventsOf(tables, random);
  const midTimes = companions.map((one) => midTimesOf(one, events, names[3], random));
  const photometry: SolvedPhotometry = {
    fitted: tables.map(({ fitted }) => fitted),
    whole: tables.map(({ whole }) => whole),
    curves: companions.flatMap(
      (one) =>
      requests.filter(({ band }, i) => requests.findIndex((other) => other.band === band) === i).map(({ band, u1 }) => curveOf(one, band, u1)), // prettier-ignore
    ),
    midTimes,
    spectra: dipSpectra(companions.map((one) => one.periodDays)),
    vettings: companions.map(({ letter, ratio }) => ({
      letter,
      oddDepthPpm: 1e6 * ratio ** 2 - 60,
      oddDepthSigmaPpm: 90,
      evenDepthPpm: 1e6 * ratio ** 2 + 70,
      evenDepthSigmaPpm: 85,
      secondary: { phase: 0.4971, depthPpm: 41, sigmaPpm: 38 },
    })),
  };
  const record: PhotometryRecord = {
    detections: companions.map(({ letter }) => ({ letter, how: 'search', signalToNoise: 61.2, efficiency: 38, falseAlarmProbability: 1e-40, events: events.filter((event) => event.letter === letter).length })), // prettier-ignore
    refused: [{ period: 0.913, depth: 210, why: 'rests on one night' }],
    lightCurves: tables.map(({ fitted, whole, rmsPpm }, index) => ({
      name: fitted.name,
      path: `${['survey', 'hill', 'lake'][index]!}.csv`,
      band: fitted.band,
      count: fitted.flux.length,
      rows: whole.flux.length,
      averaged: 1,
      exposure: index === 0 ? step : 60 / 86_400,
      jitter: { value: 60, sigma: 60, lower: 12, upper: 130, unit: 'ppm' },
      rms: rmsPpm,
      dilution: { value: 0, sigma: null, lower: null, upper: null, unit: '', fixed: true },
      baseline: index === 0 ? ['constant', 'time'] : ['constant', 'airmass'],
      perEvent: index === 0,
      correlatedNoise: index === 2 ? { amplitude: quantity(310, 60, 'ppm'), timescale: quantity(0.021, 0.006, 'd') } : null, // prettier-ignore
      selection: index === 0 ? 'Points within 1.5 durations of a transit.' : 'All points.',
    })),
    bands: requests.map(({ band, u1 }) => ({ name: band, u1: quantity(u1, 0.05, ''), u2: quantity(0.2, 0.08, ''), prior: 'triangular' })), // prettier-ignore
    events,
    midTimes: companions.map(({ letter }) => ({ letter, path: `old-${letter}.csv`, count: 14, jitter: { value: 0.05, sigma: 0.1, lower: 0.01, upper: 0.2, unit: 'min' }, rms: 0.71 })), // prettier-ignore
    starDensity: quantity(1.27, 0.06, 'g/cm3'),
    starDensityGiven: quantity(1.61, 0.11, 'g/cm3'),
    starDensityTension: 2.7,
  };
  const solved: Solved = {
    ...base,
    stages: hasVelocities ? base.stages : [],
    photometry,
    record: {
      ...base.record,
      star: { ...base.record.star, radius: quantity(1.01, 0.02, 'R_sun') },
      companions: base.record.companions.map((one, i) => transitQuantities(one, companions[i]!, hasVelocities)), // prettier-ignore
      photometry: record,
      fit: { ...base.record.fit, rms: hasVelocities ? base.record.fit.rms : 0 },
    },
  };
  if (request.draws !== true) return solved;
  const drawn = withDraws(solved, { seed: 5 });
  const kept = drawn.posterior!.columns.filter(({ key }) => hasVelocities || !/semiAmplitude|Mass$|slope/.test(key)); // prettier-ignore
  return { ...drawn, posterior: { ...drawn.posterior!, columns: [...kept, ...transitColumns(drawn, 6)] } };
}
