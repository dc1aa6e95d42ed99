/**
 * Light curves and mid-times as understood, and everything observed of one target. Plain immutable values.
 * Arrays hold the used rows only, all of one length per table; read, never modified.
 */
import type { ColumnReading, ElementChoice, Measured, TableNotice, TimeScale, VelocitySet } from './types.js';

/** What is common to tables of every content. */
export interface TableHead {
  readonly path: string;
  readonly sha256: string;
  /** Data rows in the file (flagged ones included). */
  readonly rows: number;
  readonly used: number;
  readonly columns: readonly ColumnReading[];
  readonly timeScale: TimeScale;
  /** Days added to the file's numbers to get full Julian dates. */
  readonly timeOffsetDays: number;
  /** Line in the file per used row. */
  readonly lines: Uint32Array;
  readonly notices: readonly TableNotice[];
}

export interface LightCurveTable extends TableHead {
  readonly content: 'light curve';
  /** Name of the instrument or of the file without its ending; unique among the tables of a case. Untrusted text. */
  readonly name: string;
  /** Passband; tables of one band share their limb darkening. The name of the table where none is stated. */
  readonly band: string;
  /** As written in the file: relative flux, counts of some kind, or magnitudes. */
  readonly fluxUnit: 'relative' | 'counts' | 'magnitude';
  /** Mid-exposure, BJD_TDB, ascending. */
  readonly timesBjdTdb: Float64Array;
  /** Relative flux: divided by `normalisation`. */
  readonly flux: Float64Array;
  /** Standard errors of `flux`. */
  readonly sigmas: Float64Array;
  /** `scatter`: the table has none, and the point-to-point scatter stands for them. */
  readonly sigmasKnown: 'column' | 'scatter';
  /** Median flux of the file (for magnitudes: flux at the median magnitude) that `flux` was divided by, in the file's unit. */
  readonly normalisation: number;
  /** Length of an exposure, days; 0 takes it as instantaneous. */
  readonly exposureDays: number;
  /** `spacing`: none stated, the usual distance of rows stands for it; `none`: none stated and no spacing to be had. */
  readonly exposureKnown: 'stated' | 'column' | 'header' | 'spacing' | 'none';
  /** Numeric columns that a baseline may use (airmass, position, sky, width ...), by label; not centred or scaled. */
  readonly regressors: ReadonlyMap<string, Float64Array>;
  /** Light of other stars in the aperture over all light, 0 <= dilution < 1; 0 where the case does not say. */
  readonly dilution: Measured;
  /** Terms of the baseline beside a constant: labels of regressors, `time`, `time^2`, `time^3`; `auto` lets the evidence choose. */
  readonly baseline: readonly string[] | 'auto';
  /** Extra scatter in units of the flux, as stated; `null` leaves it free. */
  readonly jitter: ElementChoice | null;
  /** `correlated` adds a damped-oscillator Gaussian process. */
  readonly noise: 'white' | 'correlated';
}

export interface MidTimeTable extends TableHead {
  readonly content: 'mid-times';
  /** BJD_TDB, in file order. */
  readonly timesBjdTdb: Float64Array;
  readonly sigmasDays: Float64Array;
  /** Cycle numbers as written; `null` where the table has none. */
  readonly cycles: Int32Array | null;
  /** Per row: a mid-transit or a mid-occultation. */
  readonly isOccultation: Uint8Array;
  /** Per row: who measured it, empty where not said. Untrusted text. */
  readonly sources: readonly string[];
  /** Letter of the companion that the times belong to; `null` means the only (or the first) one. */
  readonly companion: string | null;
}

/** Everything observed of one target; each part may be empty, but not all of them. */
export interface Observations {
  readonly velocities: VelocitySet | null;
  readonly lightCurves: readonly LightCurveTable[];
  readonly midTimes: readonly MidTimeTable[];
}
