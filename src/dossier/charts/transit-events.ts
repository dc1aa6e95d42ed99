/** The transits of one companion as charts show them: light without baseline and without the other companions, about mid-transit. */
import type { SolvedPhotometry, TransitCurve } from '../../solving/transit-types.js';
import type { Solved } from '../../solving/types.js';

const HOURS_PER_DAY = 24;
/** A loss of light below this counts as none. */
const NO_LOSS = 1e-9;
/** Shown on either side, in half durations. */
const SHOWN_HALF_DURATIONS = 2.1;

/** One transit in one table; arrays of one length, ascending in time. */
export interface ShownEvent {
  readonly table: string;
  readonly band: string;
  readonly cycle: number;
  readonly midTimeBjdTdb: number;
  /** From mid-transit. */
  readonly hours: Float64Array;
  /** Relative flux, over the baseline and over the other companions. */
  readonly flux: Float64Array;
  /** This companion alone, relative flux. */
  readonly model: Float64Array;
  /** With jitter, relative flux. */
  readonly sigmas: Float64Array;
}

/** Value of a dense curve, 1 beyond its ends. */
export function curveAt({ hoursFromMidTransit: x, flux: y }: TransitCurve, hours: number): number {
  let [low, high] = [0, x.length - 1];
  if (high < 1 || !(hours >= x[0]!) || !(hours <= x[high]!)) return 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (x[middle]! <= hours) low = middle;
    else high = middle;
  }
  const step = x[high]! - x[low]!;
  return step > 0 ? y[low]! + ((y[high]! - y[low]!) * (hours - x[low]!)) / step : y[low]!;
}

/** Half the time from first to last contact as drawn, h; of the widest of the curves; 0 without a dip. */
export function halfDurationHours(curves: readonly TransitCurve[]): number {
  let half = 0;
  for (const { hoursFromMidTransit, flux } of curves)
    for (let i = 0; i < flux.length; i += 1)
      if (1 - flux[i]! > NO_LOSS) half = Math.max(half, Math.abs(hoursFromMidTransit[i]!));
  return half;
}

export function curvesOf(photometry: SolvedPhotometry, letter: string): TransitCurve[] {
  return photometry.curves.filter((curve) => curve.letter === letter);
}

/** Half the interval about mid-transit that charts of a companion show, h. */
export function shownHours(photometry: SolvedPhotometry, letter: string): number {
  const half = halfDurationHours(curvesOf(photometry, letter));
  return half > 0 ? SHOWN_HALF_DURATIONS * half : 3;
}

/** Largest loss of light of the curves and of the models of the transits, relative flux. */
export function deepestLoss(curves: readonly TransitCurve[], events: readonly ShownEvent[]): number {
  let deepest = 0;
  for (const { flux } of curves) for (const value of flux) deepest = Math.max(deepest, 1 - value);
  if (curves.length === 0)
    for (const { model } of events) for (const value of model) deepest = Math.max(deepest, 1 - value);
  return deepest;
}

/** All transits of a companion with points inside the shown interval, by cycle, tables in their order. */
export function shownEvents({ photometry }: Solved, letter: string): ShownEvent[] {
  if (photometry === undefined) return [];
  const half = shownHours(photometry, letter);
  const found = photometry.fitted.flatMap((table) => {
    const curve = photometry.curves.find((one) => one.letter === letter && one.band === table.band) ?? null;
    return table.segments.flatMap(({ start, end, events }) =>
      events
        .filter((event) => event.letter === letter)
        .flatMap(({ cycle, midTimeBjdTdb }): ShownEvent[] => {
          const hours: number[] = [];
          const flux: number[] = [];
          const model: number[] = [];
          const sigmas: number[] = [];
          for (let row = start; row < end; row += 1) {
            const away = HOURS_PER_DAY * (table.timesBjdTdb[row]! - midTimeBjdTdb);
            if (!(Math.abs(away) <= half)) continue;
            const together = table.transit[row]!;
            const own = curve === null ? together : curveAt(curve, away);
            const relative = table.flux[row]! / table.baseline[row]!;
            if (!Number.isFinite(relative)) continue;
            hours.push(away);
            model.push(own);
            // The residual is set on the model of this companion alone.
            flux.push(own + relative - together);
            sigmas.push(table.sigmas[row]! / table.baseline[row]!);
          }
          if (hours.length === 0) return [];
          return [
            {
              table: table.name,
              band: table.band,
              cycle,
              midTimeBjdTdb,
              hours: Float64Array.from(hours),
              flux: Float64Array.from(flux),
              model: Float64Array.from(model),
              sigmas: Float64Array.from(sigmas),
            },
          ];
        }),
    );
  });
  return found.sort((one, other) => one.cycle - other.cycle);
}

/** Points of several transits put together, in their order. */
export function joined(
  events: readonly ShownEvent[],
): Pick<ShownEvent, 'hours' | 'flux' | 'model' | 'sigmas'> {
  const all = (key: 'hours' | 'flux' | 'model' | 'sigmas'): Float64Array => {
    const total = events.reduce((sum, event) => sum + event[key].length, 0);
    const out = new Float64Array(total);
    let at = 0;
    for (const event of events) {
      out.set(event[key], at);
      at += event[key].length;
    }
    return out;
  };
  return { hours: all('hours'), flux: all('flux'), model: all('model'), sigmas: all('sigmas') };
}

/** Weighted means of residuals in bins of time from mid-transit. */
export interface TransitBin {
  readonly hours: number;
  /** Relative flux. */
  readonly residual: number;
  readonly sigma: number;
  readonly count: number;
}

const FEWEST_IN_A_BIN = 3;

/**
 * Residuals are averaged, not fluxes: a mean over a steep part of the curve would lie beside it. The error is the one that
 * the weights give, or that the scatter within the bin gives where it is larger.
 *
 * @param half - bins reach from -half to half, h
 * @param bins - how many
 * @returns ascending in time; bins of fewer than 3 points are left out
 */
export function binTransit(
  { hours, flux, model, sigmas }: Pick<ShownEvent, 'hours' | 'flux' | 'model' | 'sigmas'>,
  half: number,
  bins: number,
): TransitBin[] {
  const sums = Array.from({ length: bins }, () => ({
    weight: 0,
    hours: 0,
    residual: 0,
    square: 0,
    count: 0,
  }));
  for (let i = 0; i < hours.length; i += 1) {
    const bin = sums[Math.floor(((hours[i]! + half) / (2 * half)) * bins)];
    const weight = 1 / sigmas[i]! ** 2;
    if (bin === undefined || !Number.isFinite(weight)) continue;
    const residual = flux[i]! - model[i]!;
    bin.weight += weight;
    bin.hours += weight * hours[i]!;
    bin.residual += weight * residual;
    bin.square += weight * residual * residual;
    bin.count += 1;
  }
  return sums
    .filter(({ count, weight }) => count >= FEWEST_IN_A_BIN && weight > 0)
    .map(({ weight, hours: sum, residual, square, count }) => {
      const mean = residual / weight;
      const scatter = Math.sqrt(Math.max(0, square / weight - mean * mean) / (count - 1));
      return { hours: sum / weight, residual: mean, sigma: Math.max(1 / Math.sqrt(weight), scatter), count };
    });
}
