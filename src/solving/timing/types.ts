/** What `timing` finds. `TimingRecord` is `timing.json`, version 1: it may grow keys, but the meaning of a key never changes. */
import type { TimeScale } from '../../observations/types.js';
import type { ProvenanceRecord } from '../provenance.js';
import type { Quantity } from '../types.js';
import type { TimingModelName } from './model-forms.js';

/** Keys of `parameters` with their units. Which are there depends on the model. */
export const TIMING_PARAMETER_UNITS = {
  time: 'd', // mid-transit at the reference cycle, BJD_TDB
  timeAtZero: 'd', // mid-transit at cycle 0, BJD_TDB
  period: 'd', // at the reference cycle; sidereal where the orbit precesses
  occultationShift: 'min', // occultation minus half a period after the transit, light time included
  eccentricityCosine: '', // e cos w from the shift
  periodChangePerCycle: 'd', // dP/dE
  periodChange: 'ms/yr', // dP/dt
  changeTimescale: 'Myr', // P/|dP/dt|
  tidalQuality: '', // Q' of the star, if tides are the cause
  mimickingAcceleration: 'm/s/yr', // of the system along the line of sight, if that is the cause
  properMotionChange: 'ms/yr', // part of dP/dt that proper motion explains
  modulationPeriod: 'd',
  modulationAmplitude: 'min', // half of the full swing
  modulationPeak: 'd', // latest transit of the cycle nearest to the reference cycle, BJD_TDB
  reflexOrbit: 'au', // a sin i of the motion whose light time this would be
  outerMassFunction: 'M_sun',
  reflexSemiAmplitude: 'm/s',
  eccentricity: '',
  argumentOfPeriastron: 'deg', // of the star's orbit, at the reference cycle
  apsidalRate: 'deg/yr',
  apsidalPeriod: 'yr',
  anomalisticPeriod: 'd',
} as const;
export type TimingParameterKey = keyof typeof TIMING_PARAMETER_UNITS;
export type TimingParameters = Partial<Readonly<Record<TimingParameterKey, Quantity>>>;

export interface TimingModelRecord {
  readonly name: TimingModelName;
  readonly parameters: TimingParameters;
  readonly jitter: Quantity; // min
  readonly logLikelihood: number;
  /** With the jitter among the errors, and with the errors as stated. */
  readonly chiSquare: number;
  readonly chiSquareOfErrors: number;
  readonly degreesOfFreedom: number;
  readonly freeParameters: number;
  readonly bic: number;
  readonly aicc: number | null;
  /** ln of the marginal likelihood minus that of the linear model; `null` where the data do not confine the model. */
  readonly logBayesFactor: number | null;
  readonly rms: number; // min
  /** Periods of the modulation, or of the apsides, that were tried, d; `null` for models without one. */
  readonly searched: {
    readonly shortest: number;
    readonly longest: number;
    readonly trials: number;
  } | null;
  /** Of a sinusoid as good as this somewhere in the range, from noise alone. */
  readonly falseAlarmProbability: number | null;
  /** `closed`: closed form at each node of the jitter; `grid`: also on a grid of the frequency. */
  readonly uncertainties: 'closed' | 'grid';
  /** Correlation of time and period at the reference cycle. */
  readonly correlation: number;
  /** Covariance of time (d), period (d), and the model's own linear coefficients, at the best jitter. */
  readonly covariance: { readonly names: readonly string[]; readonly matrix: readonly (readonly number[])[] };
  /** Why its numbers are not to be used as they stand, e.g. a best frequency at the end of its range. */
  readonly caution: string | null;
}

export interface UntriedModelRecord {
  readonly name: TimingModelName;
  readonly why: string;
}

export interface PredictionRecord {
  readonly cycle: number;
  readonly kind: 'transit' | 'occultation';
  readonly time: Quantity; // BJD_TDB, d
}

export interface TimingRecord {
  readonly schema: 'tugline/timing';
  readonly version: 1;
  readonly target: string;
  readonly timeScale: TimeScale;
  readonly data: {
    readonly count: number;
    readonly transits: number;
    readonly occultations: number;
    readonly firstCycle: number;
    readonly lastCycle: number;
    readonly first: number; // BJD_TDB, d
    readonly last: number;
  };
  readonly numbering: {
    readonly how: 'as written' | 'recovered';
    readonly statement: string;
    readonly rivals: readonly {
      readonly period: number;
      readonly deltaScore: number;
      readonly phaseScatter: number;
    }[];
  };
  readonly referenceCycle: number;
  readonly models: readonly TimingModelRecord[];
  readonly notTried: readonly UntriedModelRecord[];
  readonly preferred: TimingModelName;
  /** Why this model: sentences. */
  readonly reasons: readonly string[];
  readonly predictions: readonly PredictionRecord[];
  readonly outliers: readonly {
    readonly path: string;
    readonly line: number;
    readonly cycle: number;
    readonly residual: number; // min
    readonly deviation: number; // in units of the scatter
  }[];
  readonly assumptions: readonly string[];
  readonly warnings: readonly { readonly code: string; readonly message: string }[];
  readonly provenance: ProvenanceRecord;
}

/** A model along the cycles. Arrays of one length. */
export interface TimingCurve {
  readonly model: TimingModelName;
  readonly kind: 'transit' | 'occultation';
  readonly cycles: Float64Array;
  readonly timesBjdTdb: Float64Array;
  /** Against the linear ephemeris; an occultation half a period after its transit. */
  readonly oMinusCMinutes: Float64Array;
  /** 1 sigma of the prediction; `null` but for the preferred model. */
  readonly sigmaMinutes: Float64Array | null;
}

/** The record, and the arrays that chart and table need. */
export interface TimingSolved {
  readonly record: TimingRecord;
  /** Rows in the order of time. */
  readonly rows: {
    readonly count: number;
    readonly cycles: Int32Array;
    readonly isOccultation: Uint8Array;
    readonly timesBjdTdb: Float64Array;
    readonly sigmasMinutes: Float64Array;
    /** Against the linear ephemeris. */
    readonly oMinusCMinutes: Float64Array;
    /** Observed minus the preferred model. */
    readonly residualsMinutes: Float64Array;
    readonly sources: readonly string[];
    readonly paths: readonly string[];
    readonly lines: Uint32Array;
  };
  readonly curves: readonly TimingCurve[];
}
