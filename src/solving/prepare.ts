/** Puts observations on the solver's time axis and makes an explorer for them. */
import type { Case, VelocitySet } from '../observations/types.js';
import type { VelocityData } from '../signals/velocity-term.js';
import { Explorer } from './explorer.js';

export interface Prepared {
  readonly explorer: Explorer;
  readonly epochBjdTdb: number;
  readonly spanDays: number;
}

/** The middle of the observations rounded to half a day, so that it can be quoted exactly. */
export function epochOf(velocities: VelocitySet): number {
  const times = velocities.timesBjdTdb;
  return Math.round(times[0]! + times[times.length - 1]!) / 2;
}

export function explorerFor(theCase: Case, velocities: VelocitySet): Prepared {
  const times = velocities.timesBjdTdb;
  const first = times[0]!;
  const last = times[times.length - 1]!;
  const epochBjdTdb = epochOf(velocities);
  const data: VelocityData = {
    timesDays: times.map((t) => t - epochBjdTdb),
    velocitiesMps: velocities.velocitiesMps,
    sigmasMps: velocities.sigmasMps,
    instrumentOf: velocities.instrumentOf,
    instrumentCount: velocities.instruments.length,
  };
  const spanDays = last - first;
  return {
    explorer: new Explorer(data, velocities.instruments, theCase, epochBjdTdb, spanDays),
    epochBjdTdb,
    spanDays,
  };
}
