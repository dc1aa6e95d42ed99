/** The light curves and mid-times of a plan, simulated. */
import { ModelDomainError, UsageError } from '../errors.js';
import { RandomStream } from '../numerics/random.js';
import type { MockLightCurve, MockPhotometry } from '../observations/mock-types.js';
import type { MockPlan, TableContent } from '../observations/types.js';
import { inferiorConjunctionFromPeriastron } from '../orbit/conversions.js';
import { curveTableText } from './mock-curve-table.js';
import { observeMidTimes } from './mock-mid-times.js';
import { NIGHT_REGRESSORS, nightSpan, observeNight } from './mock-night.js';
import { observeSurvey, surveyTimes } from './mock-survey.js';
import type { TableOrigin } from './mock-table.js';
import { lossOfLight, transitingOrbit, type TransitingOrbit } from './mock-transits.js';

/** Random streams of light curves and of mid-times begin here; those below belong to instruments and weather. */
const FIRST_CURVE_STREAM = 1000;
const FIRST_MID_TIME_STREAM = 2000;

export interface PhotometryTable {
  readonly fileName: string;
  readonly holds: TableContent;
  readonly text: string;
  readonly rows: number;
}

/**
 * Simulates them, in the order of the plan: light curves, then mid-times. Each table has a random stream of its own.
 *
 * @throws UsageError when a band has no limb darkening, a table's companion no transits, or no night or transit is to be had
 * @throws ModelDomainError when a number is out of its range
 */
export function simulatePhotometry(
  plan: MockPlan,
  photometry: MockPhotometry,
  about: TableOrigin,
): PhotometryTable[] {
  photometry.lightCurves.forEach(checkCurve);
  const orbits = transitingOrbits(plan, photometry);
  const all = orbits.filter((orbit) => orbit !== null);
  const curves = photometry.lightCurves.map((curve, index): PhotometryTable => {
    const random = RandomStream.fromSeed(about.seed, FIRST_CURVE_STREAM + index);
    const { rows, regressors } = observeCurve(plan, photometry, curve, orbits, all, random);
    return {
      fileName: curve.table,
      holds: 'light curve',
      text: curveTableText(curve, rows, regressors, about),
      rows: rows.length,
    };
  });
  const midTimes = photometry.midTimes.map((wanted, index): PhotometryTable => {
    const random = RandomStream.fromSeed(about.seed, FIRST_MID_TIME_STREAM + index);
    const orbit = plan.companions[wanted.companion];
    if (orbit === undefined)
      throw new UsageError(`mid-times ${wanted.table}: the plan has no such companion`);
    const shape = { ...orbit, argPeriastronStarRad: (orbit.argPeriastronStarDeg * Math.PI) / 180 };
    const conjunctionBjdTdb = inferiorConjunctionFromPeriastron(shape);
    const made = observeMidTimes(wanted, { periodDays: orbit.periodDays, conjunctionBjdTdb }, random, about);
    return { fileName: wanted.table, holds: 'mid-times', ...made };
  });
  return [...curves, ...midTimes];
}

function observeCurve(
  plan: MockPlan,
  { bands, star }: MockPhotometry,
  curve: MockLightCurve,
  orbits: readonly (TransitingOrbit | null)[],
  all: readonly TransitingOrbit[],
  random: RandomStream,
): { rows: ReturnType<typeof observeSurvey>; regressors: readonly string[] } {
  const limb = Object.hasOwn(bands, curve.band) ? bands[curve.band] : undefined;
  if (limb === undefined && all.length > 0)
    throw new UsageError(`light curve ${curve.table}: the band "${curve.band}" has no limb darkening`, {
      hint: 'add the band with its u1 and u2',
    });
  const lossAt = (timesBjdTdb: Float64Array): Float64Array =>
    lossOfLight(
      all,
      limb ?? { u1: 0, u2: 0 },
      { timesBjdTdb, exposureDays: curve.exposureDays },
      star?.radiusSolar ?? 0,
    );
  if (curve.kind === 'survey') {
    const times = surveyTimes(curve);
    return { rows: observeSurvey(curve, times, lossAt(times), random), regressors: [] };
  }
  const orbit = orbits[curve.companion] ?? null;
  if (orbit === null || orbit.durationDays === 0)
    throw new UsageError(`light curve ${curve.table}: its companion does not transit`, {
      hint: 'give the companion a radius-ratio and an impact-parameter below 1 + radius-ratio',
    });
  const span = nightSpan(plan, curve, orbit);
  return { rows: observeNight(curve, span, lossAt(span.timesBjdTdb), random), regressors: NIGHT_REGRESSORS };
}

/** Per companion of the plan; `null` where nothing is said of transits. */
function transitingOrbits(plan: MockPlan, { star }: MockPhotometry): (TransitingOrbit | null)[] {
  return plan.companions.map(({ argPeriastronStarDeg, transit, ...orbit }) => {
    if (transit === undefined) return null;
    if (star === null)
      throw new UsageError('transits need the mass and the radius of the star', {
        hint: 'add star: { mass: ..., radius: ... } to the case',
      });
    return transitingOrbit(
      { ...orbit, argPeriastronStarRad: (argPeriastronStarDeg * Math.PI) / 180 },
      transit,
      star,
    );
  });
}

function checkCurve(curve: MockLightCurve): void {
  const refuse = (what: string, found: number, allowed: string): never => {
    throw new ModelDomainError(`${what} of light curve ${curve.table}`, found, allowed);
  };
  if (!(curve.noise > 0 && curve.noise < Infinity)) refuse('noise', curve.noise, '(0, infinity)');
  if (!(curve.cadenceDays > 0)) refuse('cadence', curve.cadenceDays, '(0, infinity) d');
  if (!(curve.exposureDays >= 0 && curve.exposureDays <= curve.cadenceDays * (1 + 1e-9)))
    refuse('exposure', curve.exposureDays, `[0, ${curve.cadenceDays}] d, the cadence`);
}
