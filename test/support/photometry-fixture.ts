/** Invented solutions with light curves and mid-times, made by simple formulas: no solver and no exact light curve is involved. */
import type { PhotometryRecord, SolvedPhotometry } from '../../src/solving/transit-types.js';
import type { Solved } from '../../src/solving/types.js';
import { dipSpectra } from './dip-spectra-fixture.js';
import { withDraws } from './draws-fixture.js';
import { curveOf, eventsOf, makeTable, type TableRequest } from './light-curve-fixture.js';
import { makeSolved, randomSource } from './solved-fixture.js';
import { quantity } from './solved-record-fixture.js';
import { midTimesOf, transitColumns, transitQuantities } from './transit-record-fixture.js';
import { COMPANIONS, FROM_BJD } from './transiting-companions.js';

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
