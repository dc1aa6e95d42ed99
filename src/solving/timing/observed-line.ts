/** The straight line through the observed mid-times of one companion. */
import type { InteractionTable } from './interaction-types.js';
import type { LineLikelihood } from './line-likelihood.js';

export interface ObservedLine {
  /** Weighted mean of the cycles (not whole), the time there since the model's epoch, and the period. */
  readonly meanCycle: number;
  readonly timeDays: number;
  readonly periodDays: number;
  /** First whole cycle after the epoch. */
  readonly firstCycle: number;
}

/** @param epochDays - on the axis of the table; the line counts from there */
export function observedLine(
  table: InteractionTable,
  likelihood: LineLikelihood,
  epochDays: number,
): ObservedLine {
  const times = Float64Array.from(table.timesDays, (t) => t - epochDays);
  likelihood.evaluate(times, 0);
  const [timeDays, slope] = likelihood.line as unknown as [number, number];
  const periodDays = slope / likelihood.cycleScale;
  const { meanCycle } = likelihood;
  return { meanCycle, timeDays, periodDays, firstCycle: Math.ceil(meanCycle - timeDays / periodDays) };
}
