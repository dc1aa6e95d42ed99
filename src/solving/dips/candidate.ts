/** A refined dip as a candidate: events, significance, uncertainties, and what the folded light curve shows beside it. */
import { eventsInSpan, shortestUnseenPeriod } from './coverage.js';
import { eventDepths, signalToNoiseOf, strongestEvent, type DipEvent } from './events.js';
import { searchFalseAlarm } from './false-alarm.js';
import type { RefinedDip } from './refine.js';
import type { WeightedSeries } from './ticked-series.js';
import { midTimeOf } from './trapezoid.js';
import type { DipCandidate, RelatedPeriod } from './types.js';
import { oddEvenOf, secondaryOf } from './vetting.js';

/** A refined dip with its events and noise. */
export interface WeighedDip {
  readonly refined: RefinedDip;
  readonly redNoise: number;
  readonly events: readonly DipEvent[];
  readonly depth: number;
  readonly depthSigma: number;
  readonly signalToNoise: number;
  readonly eventsInSpan: number;
}

/** @param redNoise - factor on the errors of white noise, >= 1 */
export function weighDip(
  series: WeightedSeries,
  refined: RefinedDip,
  spacingDays: number,
  redNoise: number,
): WeighedDip {
  const { shape } = refined;
  const { events, depth, depthSigma } = eventDepths(series, shape, refined, redNoise, spacingDays);
  return {
    refined,
    redNoise,
    events,
    depth,
    depthSigma,
    signalToNoise: depthSigma === Infinity ? 0 : depth / depthSigma,
    eventsInSpan: shape.periodDays === Infinity ? 1 : eventsInSpan(series.timesDays, shape),
  };
}

/** Signal to noise without the strongest event; 0 for fewer than two. */
export function withoutStrongest({ events }: WeighedDip): number {
  if (events.length < 2) return 0;
  const strongest = strongestEvent(events);
  return signalToNoiseOf(events.filter((event) => event !== strongest));
}

/** Signal to noise of the events that have data on both sides and inside. */
export function wholeSignalToNoise({ events }: WeighedDip): number {
  return signalToNoiseOf(events.filter(({ isWhole }) => isWhole));
}

/**
 * Standard errors of a mid-time and of the period: an edge of length tau and height depth places one event to
 * sigma = (depthSigma/depth) sqrt(tau (T - 4 tau/3)/2) [Carter2008]; events are then a straight line in cycle number.
 */
function timing(
  { refined, events, depth }: WeighedDip,
  spacingDays: number,
): { cycle: number; midTimeSigmaDays: number; periodSigmaDays: number | null } {
  const { durationDays, slopeShare } = refined.shape;
  const slope = Math.max(slopeShare * durationDays, spacingDays);
  const flat = Math.max(durationDays * (1 - (4 / 3) * slopeShare), durationDays / 3);
  let s = 0;
  let se = 0;
  let see = 0;
  const reference = events[0]!.cycle;
  for (const { cycle, depthSigma } of events) {
    const information = (2 * depth * depth) / (depthSigma * depthSigma * slope * flat);
    const e = cycle - reference;
    s += information;
    se += information * e;
    see += information * e * e;
  }
  const centre = se / s;
  const cycle = Math.round(centre);
  const spread = see - se * centre;
  const periodSigmaDays = spread > 0 ? 1 / Math.sqrt(spread) : null;
  return {
    cycle: cycle + reference,
    midTimeSigmaDays: Math.hypot(1 / Math.sqrt(s), (cycle - centre) * (periodSigmaDays ?? 0)),
    periodSigmaDays,
  };
}

function common(
  weighed: WeighedDip,
  volume: number,
): Omit<DipCandidate, 'kind' | 'periodDays' | 'periodSigmaDays' | 'shortestPeriodDays' | 'midTimeDays' | 'midTimeSigmaDays' | 'efficiency' | 'oddEven' | 'secondary' | 'related' | 'signalToNoiseWithoutStrongest'> {
  const { refined, events, depth, depthSigma, signalToNoise, redNoise } = weighed;
  return {
    durationDays: refined.shape.durationDays,
    slopeShare: refined.shape.slopeShare,
    depth,
    depthSigma,
    signalToNoise,
    falseAlarmProbability: searchFalseAlarm(signalToNoise, volume),
    events: events.map(({ midTimeDays }) => midTimeDays),
    eventDepths: events.map((event) => event.depth),
    eventDepthSigmas: events.map((event) => event.depthSigma),
    redNoiseFactor: redNoise,
  };
} // prettier-ignore

export function periodicCandidate(
  series: WeightedSeries,
  weighed: WeighedDip,
  spacingDays: number,
  volume: number,
  efficiency: number,
  related: readonly RelatedPeriod[],
): DipCandidate {
  const { shape } = weighed.refined;
  const { cycle, midTimeSigmaDays, periodSigmaDays } = timing(weighed, spacingDays);
  return {
    kind: 'periodic',
    periodDays: shape.periodDays,
    periodSigmaDays,
    shortestPeriodDays: shape.periodDays,
    midTimeDays: midTimeOf(shape, cycle),
    midTimeSigmaDays,
    efficiency,
    signalToNoiseWithoutStrongest: withoutStrongest(weighed),
    ...common(weighed, volume),
    oddEven: oddEvenOf(weighed.events, cycle),
    secondary: secondaryOf(series, shape, weighed.redNoise),
    related,
  };
}

export function singleCandidate(
  series: WeightedSeries,
  weighed: WeighedDip,
  spacingDays: number,
  volume: number,
): DipCandidate {
  const { shape } = weighed.refined;
  return {
    kind: 'single',
    periodDays: null,
    periodSigmaDays: null,
    shortestPeriodDays: shortestUnseenPeriod(series, shape.midTimeDays, shape.durationDays, spacingDays),
    midTimeDays: shape.midTimeDays,
    midTimeSigmaDays: timing(weighed, spacingDays).midTimeSigmaDays,
    efficiency: null,
    signalToNoiseWithoutStrongest: null,
    ...common(weighed, volume),
    oddEven: null,
    secondary: null,
    related: [],
  };
}
