/** Two invented transiting companions and their dips, by simple formulas: no exact light curve is involved. */

export const FROM_BJD = 2_459_123;
export const HOURS = 24;

/** A transiting companion of the fixture. */
export interface Transiting {
  readonly letter: string;
  readonly periodDays: number;
  readonly midTimeBjdTdb: number;
  readonly ratio: number;
  readonly impact: number;
  readonly scaledAxis: number;
  readonly semiAmplitudeMps: number;
}

export const COMPANIONS: readonly Transiting[] = [
  { letter: 'b', periodDays: 3.35118, midTimeBjdTdb: FROM_BJD + 1.2345, ratio: 0.095, impact: 0.32, scaledAxis: 9.1, semiAmplitudeMps: 71.2 },
  { letter: 'c', periodDays: 8.71402, midTimeBjdTdb: FROM_BJD + 3.7712, ratio: 0.055, impact: 0.21, scaledAxis: 17.2, semiAmplitudeMps: 12.9 },
]; // prettier-ignore

/** First to last contact of a circular orbit, d (Seager & Mallen-Ornelas 2003, ApJ 585, 1038, equation 3). */
export function durationDays({ periodDays, ratio, impact, scaledAxis }: Transiting): number {
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

export function ownFlux(one: Transiting, daysFromMid: number, u1: number): number {
  const angle = (2 * Math.PI * daysFromMid) / one.periodDays;
  if (Math.cos(angle) < 0) return 1;
  const z = Math.hypot(one.scaledAxis * Math.sin(angle), one.impact * Math.cos(angle));
  return 1 - loss(z, one.ratio, u1, 0.2);
}

export function fromMid(one: Transiting, time: number): { cycle: number; days: number } {
  const cycle = Math.round((time - one.midTimeBjdTdb) / one.periodDays) + 0; // no minus zero
  return { cycle, days: time - one.midTimeBjdTdb - cycle * one.periodDays };
}
