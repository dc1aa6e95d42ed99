/** Search for dips in light curves: what goes in and what comes out. Times are days since an epoch of the caller's choice. */
import type { DipSpectrum } from '../transit-types.js';

/** Light curves of one star, joined. Arrays of one length; read, never modified. */
export interface DipData {
  /** Ascending. */
  readonly timesDays: Float64Array;
  /** Relative flux, about 1. */
  readonly flux: Float64Array;
  /** Standard errors of `flux`, > 0. */
  readonly sigmas: Float64Array;
  /** Index of the table per point; each table has its own trend and noise. Absent: one table. */
  readonly segmentOf?: Uint16Array;
  /** Neighbours that were averaged to one point, at most; 1 unless given. */
  readonly averaged?: number;
}

export interface DipSearchOptions {
  /** Days; 0.5 unless given. */
  readonly shortestPeriodDays?: number | null;
  /** Days; half the span unless given, so that every phase has two events in the span. */
  readonly longestPeriodDays?: number | null;
  /** Mean density of the star, g/cm3, where it is known; else 0.05 to 50 are searched. */
  readonly starDensityGcc?: number | null;
  /** Most candidates that are accepted; 5 unless given. */
  readonly maximumCompanions?: number;
  /** A candidate is accepted below this probability that noise alone gives one like it; 0.001 unless given. */
  readonly falseAlarmThreshold?: number;
  /** Full width of the window of the trend, days; four times the longest duration searched unless given. */
  readonly trendWindowDays?: number | null;
}

export interface OddEven {
  readonly oddDepth: number;
  readonly oddDepthSigma: number;
  readonly evenDepth: number;
  readonly evenDepthSigma: number;
  /** |odd - even| in its own standard errors. */
  readonly differenceSigmas: number;
}

/** Most significant dip at any other phase of the same period, with the duration of the first. */
export interface SecondaryDip {
  /** Phase of its middle, 0..1, the first dip at 0. */
  readonly phase: number;
  readonly depth: number;
  readonly depthSigma: number;
  readonly signalToNoise: number;
  /** That noise gives one as strong at some phase. */
  readonly falseAlarmProbability: number;
}

/** The same dips folded with a related period, refitted. */
export interface RelatedPeriod {
  readonly periodDays: number;
  /** `P/2`, `2P`, `3P/2` ... */
  readonly kind: string;
  readonly signalToNoise: number;
  /** Events with data, of so many inside the span. */
  readonly events: number;
  readonly eventsInSpan: number;
}

export interface DipCandidate {
  /** `single`: seen once, the period is unknown. */
  readonly kind: 'periodic' | 'single';
  readonly periodDays: number | null;
  /** `null` where fewer than two events have data. */
  readonly periodSigmaDays: number | null;
  /** The period itself; of a single event the least period that the data allow: every shorter one would have shown a second event. */
  readonly shortestPeriodDays: number;
  /** Middle of a dip near the middle of its events. */
  readonly midTimeDays: number;
  readonly midTimeSigmaDays: number;
  /** First to last contact of the fitted trapezoid. */
  readonly durationDays: number;
  /** Share of the duration that one slope takes, 0..0.5. */
  readonly slopeShare: number;
  /** Relative loss of light in the middle, > 0, and its standard error with red noise. */
  readonly depth: number;
  readonly depthSigma: number;
  /** depth/depthSigma. */
  readonly signalToNoise: number;
  /** Signal detection efficiency in the spectrum of its stage; `null` for a single event. */
  readonly efficiency: number | null;
  readonly falseAlarmProbability: number;
  /** Mid-times of the events that have data. */
  readonly events: readonly number[];
  /** Depth of each of `events` and its standard error. */
  readonly eventDepths: readonly number[];
  readonly eventDepthSigmas: readonly number[];
  /** Signal to noise that is left without the strongest event; `null` for a single event. */
  readonly signalToNoiseWithoutStrongest: number | null;
  /** `null` where odd or even events are missing. */
  readonly oddEven: OddEven | null;
  /** `null` where no other phase has data. */
  readonly secondary: SecondaryDip | null;
  readonly related: readonly RelatedPeriod[];
  /** Scatter of means over the duration in units of what white noise gives, >= 1 [Pont2006]. */
  readonly redNoiseFactor: number;
}

export interface RejectedDip extends DipCandidate {
  readonly why: string;
}

export interface DipSearch {
  /** Accepted, in the order of finding. */
  readonly candidates: readonly DipCandidate[];
  readonly rejected: readonly RejectedDip[];
  readonly stages: readonly DipSpectrum[];
  /** Slow trend per point; dips of the candidates are masked in it. */
  readonly trend: Float64Array;
  /** 1 where a point was left out of the search as an outlier. */
  readonly isOutlier: Uint8Array;
  /** One sentence each: ranges, grid, trend, noise, thresholds. */
  readonly settings: readonly string[];
}
