/** A simulated watch from space: even cadence, gaps, a star that is not quite constant, some flagged rows. */
import { UsageError } from '../errors.js';
import type { RandomStream } from '../numerics/random.js';
import type { MockSurvey } from '../observations/mock-types.js';
import { quasiPeriodic, redNoise } from './mock-noise.js';
import type { CurveRow } from './mock-curve-table.js';

const TIME_DECIMALS = 5;
/** Rows of a flagged spell, on the average. */
const SPELL_ROWS = 6;
/** Size of what disturbs flagged rows, in standard errors. */
const DISTURBANCE = 15;

/** Mid-exposures of a survey as printed, gaps left out. */
export function surveyTimes(survey: MockSurvey): Float64Array {
  const { fromBjdTdb, spanDays, cadenceDays, gaps } = survey;
  const rows = Math.floor(spanDays / cadenceDays + 1e-9);
  const inGap = (days: number): boolean =>
    gaps.some(({ afterDays, lengthDays }) => days >= afterDays && days < afterDays + lengthDays);
  const times = Array.from({ length: rows }, (_, row) => (row + 0.5) * cadenceDays)
    .filter((days) => !inGap(days))
    .map((days) => Number((fromBjdTdb + days).toFixed(TIME_DECIMALS)));
  if (times.length === 0)
    throw new UsageError(`light curve ${survey.table}: its gaps leave nothing`, {
      hint: 'shorten the gaps or lengthen the span',
    });
  return Float64Array.from(times);
}

/**
 * @param loss - (n) loss of light at `surveyTimes`
 * @returns rows in order of time, in units of the flux
 */
export function observeSurvey(
  survey: MockSurvey,
  timesBjdTdb: Float64Array,
  loss: Float64Array,
  random: RandomStream,
): CurveRow[] {
  const days = timesBjdTdb.map((time) => time - survey.fromBjdTdb);
  const still = new Float64Array(days.length);
  const slow = survey.variability === null ? still : quasiPeriodic(survey.variability, days, random);
  const red = survey.redNoise === null ? still : redNoise(survey.redNoise, days, random);
  const flags = flaggedSpells(days.length, survey.flagged, random);
  return Array.from(days, (_, i) => {
    const isFlagged = flags[i] === 1;
    const disturbance = isFlagged ? DISTURBANCE * survey.noise * random.normal() : 0;
    const light = (1 - loss[i]!) * (1 + slow[i]!);
    return {
      timeBjdTdb: timesBjdTdb[i]!,
      flux: light + red[i]! + survey.noise * random.normal() + disturbance,
      sigma: survey.noise,
      quality: isFlagged ? 1 : 0,
      regressors: [],
    };
  });
}

/** 1 where a row is flagged: spells of a few rows, together about `share` of all. */
function flaggedSpells(count: number, share: number, random: RandomStream): Uint8Array {
  const flags = new Uint8Array(count);
  if (share === 0) return flags;
  const chance = share / SPELL_ROWS / (1 - share);
  let inSpell = false;
  for (let row = 0; row < count; row++) {
    const draw = random.uniform();
    inSpell = inSpell ? draw >= 1 / SPELL_ROWS : draw < chance;
    flags[row] = inSpell ? 1 : 0;
  }
  return flags;
}
