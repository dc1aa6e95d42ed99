/** Invented light curves with dips whose truth is known. */
import { RandomStream } from '../../../src/numerics/random.js';
import type { DipData } from '../../../src/solving/dips/types.js';

export interface TrueDip {
  /** `Infinity`: once. */
  readonly periodDays: number;
  readonly midTimeDays: number;
  /** First to last contact. */
  readonly durationDays: number;
  readonly depth: number;
  /** Of every second event, where it differs. */
  readonly oddDepth?: number;
}

export interface LightCurvePlan {
  readonly spanDays: number;
  readonly stepDays: number;
  readonly sigma: number;
  readonly seed: number;
  readonly dips: readonly TrueDip[];
  /** Added to 1; the noise comes on top. */
  readonly trend?: (timeDays: number) => number;
  /** Damped red noise: its scatter, and its time scale. */
  readonly red?: { readonly sigma: number; readonly scaleDays: number };
  /** Whether there is a point. */
  readonly isObserved?: (timeDays: number) => boolean;
}

/** Loss of light of all dips, slopes an eighth of their duration. */
export function lossAt(dips: readonly TrueDip[], timeDays: number): number {
  let loss = 0;
  for (const dip of dips) {
    const cycle = dip.periodDays === Infinity ? 0 : Math.round((timeDays - dip.midTimeDays) / dip.periodDays);
    const middle = cycle === 0 ? dip.midTimeDays : dip.midTimeDays + cycle * dip.periodDays;
    const inside = 0.5 * dip.durationDays - Math.abs(timeDays - middle);
    if (inside <= 0) continue;
    const depth = cycle % 2 === 0 ? dip.depth : (dip.oddDepth ?? dip.depth);
    loss += depth * Math.min(1, (8 * inside) / dip.durationDays);
  }
  return loss;
}

export function lightCurve(plan: LightCurvePlan): DipData {
  const random = RandomStream.fromSeed(plan.seed);
  const times: number[] = [];
  const flux: number[] = [];
  const memory = plan.red === undefined ? 0 : Math.exp(-plan.stepDays / plan.red.scaleDays);
  let red = random.normal();
  for (let i = 0; i * plan.stepDays < plan.spanDays; i++) {
    const time = i * plan.stepDays;
    const white = random.normal();
    red = memory * red + Math.sqrt(1 - memory * memory) * random.normal();
    if (plan.isObserved !== undefined && !plan.isObserved(time)) continue;
    times.push(time);
    flux.push(
      (1 + (plan.trend?.(time) ?? 0)) * (1 - lossAt(plan.dips, time)) +
        plan.sigma * white +
        (plan.red?.sigma ?? 0) * red,
    );
  }
  return {
    timesDays: Float64Array.from(times),
    flux: Float64Array.from(flux),
    sigmas: new Float64Array(times.length).fill(plan.sigma),
  };
}

/** Distance of a time from the nearest true dip, in days, with its sign. */
export function offFrom(dip: TrueDip, timeDays: number): number {
  const turns = (timeDays - dip.midTimeDays) / dip.periodDays;
  return (turns - Math.round(turns)) * dip.periodDays;
}
