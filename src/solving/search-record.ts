/** Stages of the search as they are reported and drawn. */
import { aliasKind } from './aliases.js';
import { powerAtFalseAlarm, sinusoidFalseAlarm, shapeFalseAlarm } from './false-alarm.js';
import type { FoundStage } from './find-companions.js';
import type { StageSearch } from './search-stage.js';
import type { PeriodPeak, SearchStage } from './types.js';

const LEVELS = [0.1, 0.01, 0.001] as const;
const REPORTED_PEAKS = 10;

/** Peaks of a stage, strongest first, each named as it looks from the strongest. */
export function reportedPeaks(search: StageSearch, spanDays: number): PeriodPeak[] {
  const n = search.setting.dataCount;
  const strongest = search.peaks[0];
  return search.peaks.slice(0, REPORTED_PEAKS).map((peak, index) => ({
    periodDays: 1 / peak.frequencyPerDay,
    power: peak.power,
    deltaLogLikelihood: -0.5 * n * Math.log1p(-Math.min(peak.power, 1 - 1e-15)),
    falseAlarmProbability: sinusoidFalseAlarm(peak.power, search.setting),
    semiAmplitudeMps: peak.amplitudeMps,
    kind:
      index === 0
        ? 'strongest'
        : (aliasKind(peak.frequencyPerDay, strongest!.frequencyPerDay, 1 / spanDays) ?? 'independent'),
  }));
}

/** The best shape of a stage, where it gains more than a sinusoid can with its two parameters fewer. */
export interface BestShape {
  readonly periodDays: number;
  readonly eccentricity: number;
  readonly gain: number;
}

export function stageRecord(
  search: StageSearch,
  companionsFitted: number,
  spanDays: number,
  shape: BestShape | null,
): SearchStage {
  const { grid, setting } = search;
  const peaks = reportedPeaks(search, spanDays);
  // A shape is worth a mark when it gains more than a sinusoid with as many parameters could, and noise seldom does.
  const beats =
    shape !== null &&
    shape.gain > (peaks[0]?.deltaLogLikelihood ?? 0) + Math.log(setting.dataCount) &&
    shapeFalseAlarm(shape.gain, setting) < LEVELS[0];
  return {
    title:
      companionsFitted === 0
        ? 'velocities, zero points and drift refitted'
        : `after ${companionsFitted} companion${companionsFitted === 1 ? '' : 's'}, refitted at each frequency`,
    companionsFitted,
    frequenciesPerDay: Float64Array.from(
      { length: grid.count },
      (_, j) => grid.startPerDay + j * grid.stepPerDay,
    ),
    power: search.power,
    levels: LEVELS.map((falseAlarmProbability) => ({
      falseAlarmProbability,
      power: powerAtFalseAlarm(falseAlarmProbability, setting),
    })),
    peaks,
    eccentricPeak: beats
      ? {
          periodDays: shape.periodDays,
          eccentricity: shape.eccentricity,
          deltaLogLikelihood: shape.gain,
          falseAlarmProbability: shapeFalseAlarm(shape.gain, setting),
        }
      : null,
  };
}

/** Stage of the search for companions as a record. */
export function foundStageRecord(stage: FoundStage, spanDays: number): SearchStage {
  const record = stageRecord(stage.search, stage.companionsFitted, spanDays, stage.bestShape);
  const refusal = stage.addition?.refusal ?? null;
  return refusal === null ? record : { ...record, refusal };
}
