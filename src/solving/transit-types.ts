/** What a solution with transits adds to the record and to what charts and tables need. */
import type { Quantity } from './quantity.js';

/** Elements that only a light curve gives. Keys of `companions[].elements`, present for transiting companions only. */
export const TRANSIT_ELEMENT_UNITS = {
  inclination: 'deg',
  radiusRatio: '',
  scaledSemiMajorAxis: '', // a/R_star
  impactParameter: '', // of the transit, in stellar radii
} as const;
export type TransitElementKey = keyof typeof TRANSIT_ELEMENT_UNITS;

/** Keys of `companions[].derived` that only a light curve gives, with their units. */
export const TRANSIT_DERIVED_UNITS = {
  radius: 'R_jup',
  meanDensity: 'g/cm3',
  surfaceGravity: 'm/s2', // from K, R/a and i alone
  totalDuration: 'h', // first to last contact
  fullDuration: 'h', // second to third contact; null when grazing
  midTransitDepth: 'ppm', // loss of light in the middle of the transit, in the first band
  timeOfOccultation: 'd', // superior conjunction following the reported inferior conjunction, light time included
  scaleHeight: 'km', // atmosphere of mean molecular weight 2.3 at the equilibrium temperature
  rossiterMcLaughlin: 'm/s', // per km/s of projected stellar rotation
} as const;
export type TransitDerivedKey = keyof typeof TRANSIT_DERIVED_UNITS;

/** One light-curve table in the solution. */
export interface LightCurveRecord {
  readonly name: string;
  readonly path: string;
  readonly band: string;
  /** Points in the fit (neighbourhood of transits), of so many used rows of the table. */
  readonly count: number;
  readonly rows: number;
  /** Neighbouring rows per fitted point. */
  readonly averaged: number;
  readonly exposure: number; // d, of a fitted point
  readonly jitter: Quantity; // ppm
  readonly rms: number; // ppm, of the residuals
  readonly dilution: Quantity;
  /** Terms of the baseline, e.g. `constant`, `time`, `airmass`; every transit has its own where `perEvent`. */
  readonly baseline: readonly string[];
  readonly perEvent: boolean;
  readonly correlatedNoise: {
    readonly amplitude: Quantity /* ppm */;
    readonly timescale: Quantity; /* d */
  } | null;
  /** One sentence: which points entered the fit. */
  readonly selection: string;
}

export interface BandRecord {
  readonly name: string;
  readonly u1: Quantity;
  readonly u2: Quantity;
  /** `triangular` (uniform over all physical pairs), or `stated` by the case. */
  readonly prior: 'triangular' | 'stated';
  /** By letter, of companions whose occultations are fitted; ppm. */
  readonly occultationDepths?: Readonly<Record<string, Quantity>>;
}

/** How a companion was found in the light curves. */
export interface DetectionRecord {
  readonly letter: string;
  /** Where its ephemeris came from before the fit. */
  readonly how: 'search' | 'mid-times' | 'case' | 'velocities' | 'one event';
  readonly signalToNoise: number | null;
  readonly efficiency: number | null;
  readonly falseAlarmProbability: number | null;
  /** Transits with data. */
  readonly events: number;
}

/** One transit in one table, with its own mid-time (shape as in the solution). */
export interface TransitEventRecord {
  readonly letter: string;
  readonly table: string;
  readonly cycle: number;
  readonly points: number;
  readonly midTime: Quantity; // BJD_TDB, d
  readonly oMinusC: Quantity; // min, against the reported ephemeris
}

export interface MidTimeRecord {
  readonly letter: string;
  readonly path: string;
  readonly count: number;
  readonly jitter: Quantity; // min
  readonly rms: number; // min
}

/** What the pull of the transiting companions at each other should do to their mid-times, from the masses of this solution. */
export interface PredictedInteractionRecord {
  /** Companions that were integrated together. */
  readonly letters: readonly string[];
  /** The two that are nearest to a resonance of first order, e.g. `2:1`, and how far from it; `null` where none is near. */
  readonly nearResonance: {
    readonly letters: readonly [string, string];
    readonly ratio: string;
    readonly distance: number;
  } | null;
  readonly superPeriod: number | null; // d
  /** Half of the swing of O-C about a straight line over the span of the data, min, by letter. */
  readonly predictedAmplitudeMinutes: Readonly<Record<string, Quantity>>;
  /** Amplitude over a whole super-period by the near-resonant formula, min; letters near a resonance only. */
  readonly superPeriodAmplitudeMinutes: Readonly<Record<string, number>>;
  /** What an eccentricity of 0.01 more may add to or take from that amplitude, min. */
  readonly eccentricityLeverMinutes: Readonly<Record<string, number>>;
  /** Observed mid-transits against a straight line, and against the predicted variation on one; errors as stated. */
  readonly comparisons: Readonly<
    Record<
      string,
      {
        readonly count: number;
        readonly medianErrorMinutes: number;
        readonly chiSquareLine: number;
        readonly chiSquare: number;
      }
    >
  >;
}

/** `photometry` of `solution.json`; present when light curves or mid-times were given. */
export interface PhotometryRecord {
  readonly detections: readonly DetectionRecord[];
  /** Dips that were looked at and not taken, with the reason. */
  readonly refused: readonly {
    readonly period: number | null;
    readonly depth: number /* ppm */;
    readonly why: string;
  }[];
  readonly lightCurves: readonly LightCurveRecord[];
  readonly bands: readonly BandRecord[];
  readonly events: readonly TransitEventRecord[];
  readonly midTimes: readonly MidTimeRecord[];
  /** Stellar density from the shape of the transits, g/cm3; from the star's given mass and radius; their difference in sigma. */
  readonly starDensity: Quantity;
  readonly starDensityGiven: Quantity;
  readonly starDensityTension: number | null;
  /** Present where two or more transiting companions have masses. */
  readonly interaction?: PredictedInteractionRecord;
}

/** A light curve as it was fitted: the points of the fit, table order of time. Arrays of one length. */
export interface FittedLightCurve {
  readonly name: string;
  readonly band: string;
  readonly timesBjdTdb: Float64Array;
  readonly flux: Float64Array;
  /** Standard errors with the fitted jitter included. */
  readonly sigmas: Float64Array;
  /** Baseline: constant, trend, regressors, correlated noise. Model flux = baseline * transit. */
  readonly baseline: Float64Array;
  /** Relative flux of all companions together, 1 outside transit. */
  readonly transit: Float64Array;
  /** Runs of points that belong to one event: rows `start` to `end` (excluded). */
  readonly segments: readonly {
    readonly start: number;
    readonly end: number;
    /** Letters of the companions in transit here, with the cycle and the mid-time of each. */
    readonly events: readonly {
      readonly letter: string;
      readonly cycle: number;
      readonly midTimeBjdTdb: number;
    }[];
  }[];
}

/** The whole of a light curve with the slow trend that the search removed. */
export interface WholeLightCurve {
  readonly name: string;
  readonly timesBjdTdb: Float64Array;
  readonly flux: Float64Array;
  /** Slow trend; 1 everywhere where none was removed. */
  readonly trend: Float64Array;
}

/** The model of one companion in one band around mid-transit, densely sampled, exposure included. */
export interface TransitCurve {
  readonly letter: string;
  readonly band: string;
  readonly hoursFromMidTransit: Float64Array;
  readonly flux: Float64Array;
}

/** Observed mid-times of one companion beside the reported ephemeris. */
export interface FittedMidTimes {
  readonly letter: string;
  /** Where each comes from: a mid-time table, or a transit of a light curve. */
  readonly sources: readonly string[];
  readonly cycles: Int32Array;
  readonly timesBjdTdb: Float64Array;
  readonly sigmasDays: Float64Array;
  readonly oMinusCMinutes: Float64Array;
  /** 1 sigma of the ephemeris at these cycles, min. */
  readonly ephemerisSigmaMinutes: Float64Array;
  readonly isOccultation: Uint8Array;
}

/** Spectrum of one stage of the search for dips. */
export interface DipSpectrum {
  readonly title: string;
  readonly periodsDays: Float64Array;
  /** Signal detection efficiency at each period. */
  readonly efficiency: Float64Array;
  readonly peaks: readonly {
    readonly periodDays: number;
    readonly efficiency: number;
    readonly kind: string;
  }[];
}

/** Depth of the odd and of the even transits, and what stands at the opposite phase. */
export interface DipVetting {
  readonly letter: string;
  readonly oddDepthPpm: number;
  readonly oddDepthSigmaPpm: number;
  readonly evenDepthPpm: number;
  readonly evenDepthSigmaPpm: number;
  readonly secondary: { readonly phase: number; readonly depthPpm: number; readonly sigmaPpm: number } | null;
}

/** Everything about transits that charts and tables need. */
export interface SolvedPhotometry {
  readonly fitted: readonly FittedLightCurve[];
  readonly whole: readonly WholeLightCurve[];
  readonly curves: readonly TransitCurve[];
  readonly midTimes: readonly FittedMidTimes[];
  readonly spectra: readonly DipSpectrum[];
  readonly vettings: readonly DipVetting[];
}
