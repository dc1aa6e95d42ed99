/** What a model consists of, and a point of its parameter space. */
import type { InstrumentChoice } from '../observations/types.js';
import type { DriftDegree } from '../signals/velocity-term.js';
import type { Parametrisation } from './parametrisations/parametrisation.js';

/** Bounds of one instrument's jitter, m/s, and an optional Gaussian prior; equal bounds fix it. */
export interface JitterSetting {
  readonly lowMps: number;
  readonly highMps: number;
  readonly prior: { readonly centre: number; readonly sigma: number } | null;
  /** The case says something about this jitter. */
  readonly isStated: boolean;
}

/** What is fitted: companions (with their parametrisations), drift, zero points and jitters. */
export interface ModelStructure {
  readonly companions: readonly Parametrisation[];
  readonly drift: DriftDegree;
  /** One per instrument; `null` leaves the zero point free. */
  readonly zeroPoints: readonly InstrumentChoice['zeroPointMps'][];
  readonly jitters: readonly JitterSetting[];
}

/** A point of the parameter space: mean-model parameters and one jitter per instrument, m/s. */
export interface ModelPoint {
  readonly parameters: Float64Array;
  readonly jittersMps: Float64Array;
}
