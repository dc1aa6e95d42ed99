/**
 * Everything that a joint fit of velocities, light curves and mid-times needs, as plain data: it crosses threads.
 * Times in days since the solver's epoch.
 */
import type { CompanionChoice, ElementChoice, InstrumentChoice, Measured } from '../../observations/types.js';
import type { DriftDegree, VelocityData } from '../../signals/velocity-term.js';
import type { PriorScales } from '../posterior/priors.js';

/** A run of points of one light curve that share a baseline: the neighbourhood of one event, or a night. */
export interface CurveSegment {
  readonly start: number;
  /** Excluded. */
  readonly end: number;
  /** Row-major (end - start, columns): what the baseline may consist of, the constant first. */
  readonly design: Float64Array;
  readonly columns: number;
}

/** One light-curve table as it enters the fit. Arrays of one length, ascending in time. */
export interface CurveData {
  readonly name: string;
  readonly timesDays: Float64Array;
  readonly flux: Float64Array;
  readonly sigmas: Float64Array;
  /** Exposures in each point: several where points were averaged. The extra scatter of a point falls with their root. */
  readonly averaged: Float64Array;
  /** Length of an exposure; of averaged points the one with their spread in time. */
  readonly exposureDays: number;
  readonly band: number;
  readonly segments: readonly CurveSegment[];
  readonly dilution: Measured;
  readonly jitter: ElementChoice | null;
  readonly noise: 'white' | 'correlated';
  /** Median error of a point and scatter of the flux: what the priors of noise are scaled by. */
  readonly typicalSigma: number;
  readonly scatter: number;
}

/** Mid-times of one companion. `cycles` counts from its reference transit. */
export interface MidTimeData {
  readonly companion: number;
  readonly path: string;
  readonly timesDays: Float64Array;
  readonly sigmasDays: Float64Array;
  readonly cycles: Float64Array;
  readonly isOccultation: Uint8Array;
}

export interface JointCompanion {
  readonly letter: string;
  readonly circular: boolean;
  /** A light curve shows its transits. */
  readonly transits: boolean;
  /** Its pull is fitted to velocities. */
  readonly pulls: boolean;
  readonly occultation: boolean;
  readonly choice: CompanionChoice | null;
  /** Inferior conjunction near the middle of what tells its phase: the fitted one. */
  readonly conjunctionDays: number;
  /** One event is all that is known: the period follows from the shape and its prior alone. */
  readonly isPeriodUnknown: boolean;
  /** Period at which the shape is fitted where one event leaves it open and no density of the star is stated: ln L hardly depends on it. */
  readonly nominalPeriodDays: number | null;
  /** Period range of the prior, days. */
  readonly shortestPeriodDays: number;
  readonly longestPeriodDays: number;
}

export interface BandSetting {
  readonly name: string;
  /** Stated Gaussian priors (sigma 0 fixes); `null` leaves the triangular sampling. */
  readonly u1: Measured | null;
  readonly u2: Measured | null;
}

export interface JointRecipe {
  readonly kind: 'joint';
  readonly epochBjdTdb: number;
  readonly velocities: VelocityData | null;
  readonly drift: DriftDegree;
  readonly zeroPoints: readonly InstrumentChoice['zeroPointMps'][];
  readonly velocityJitters: readonly (ElementChoice | null)[];
  /** Instruments with fewer velocities than this say nothing of their own scatter. */
  readonly velocityCounts: readonly number[];
  readonly curves: readonly CurveData[];
  readonly bands: readonly BandSetting[];
  readonly midTimes: readonly MidTimeData[];
  readonly companions: readonly JointCompanion[];
  /** Mean density of the star, g/cm3, as a prior; `null` leaves it log-uniform. */
  readonly starDensityGcc: Measured | null;
  /** R_star/c in days; 0 where the radius of the star is unknown. */
  readonly starRadiusLightDays: number;
  /** Priors of what velocities constrain; `null` without velocities. */
  readonly scales: PriorScales | null;
}
