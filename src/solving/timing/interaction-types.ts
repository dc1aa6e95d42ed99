/** What a fit of interacting companions to their mid-transit times takes and gives. */
import type { Quantity } from '../types.js';

/** Mid-transits of one companion; arrays of one length, read only. */
export interface InteractionTable {
  readonly letter: string;
  /** Whole numbers; rows may be in any order, cycles may be missing or repeated. */
  readonly cycles: ArrayLike<number>;
  /** Any axis, the same for all tables. */
  readonly timesDays: ArrayLike<number>;
  readonly sigmasDays: ArrayLike<number>;
}

export interface InteractionStar {
  /** `null` leaves the masses of the companions unknown; their ratios to the star are not. */
  readonly massSolar: number | null;
  readonly massSolarSigma?: number;
}

export interface InteractionOptions {
  /** Width of the normal prior of e cos omega and of e sin omega; default 0.1. */
  readonly eccentricityScale?: number;
  /** Default 1. */
  readonly seed?: number;
  /** Most evaluations of the posterior density; 0 takes uncertainties from the curvature at the best fit. Default 10000. */
  readonly draws?: number;
  /** Future predictions go on for this share of the span of the data; default 0.25. */
  readonly outlook?: number;
  /** Called now and then with a share 0 .. 1 of the work and a word. */
  readonly onProgress?: (share: number, stage: string) => void;
}

export interface InteractionCompanionRecord {
  readonly letter: string;
  readonly massRatio: Quantity; // companion over star
  readonly mass: Quantity; // M_earth
  /** Mass ratio that holds with 95 % probability: lower and upper end, equal tails. */
  readonly massRatioRange95: readonly [number, number] | null;
  /** The same draws weighted for eccentricities of a third of the prior's width; `null` where too few draws carry it. */
  readonly massRatioLowEccentricity: Quantity;
  /** Correlation of ln(mass ratio) with the free eccentricity |Z| of its tightest pair; `null` away from resonances. */
  readonly massEccentricityCorrelation: number | null;
  readonly eccentricity: Quantity;
  readonly eCosOmega: Quantity;
  readonly eSinOmega: Quantity;
  /** Osculating, at `epochDays`. */
  readonly period: Quantity; // d
  readonly timeOfInferiorConjunction: Quantity; // d, first of the osculating ellipse after the epoch
  /** Of the straight line through the observed times. */
  readonly meanPeriod: Quantity; // d
  readonly jitter: Quantity; // min
  readonly rmsMinutes: number;
  readonly points: number;
}

export interface ResonanceRecord {
  readonly letters: readonly [string, string];
  /** `null` where no first-order resonance is near. */
  readonly j: number | null;
  readonly delta: number | null;
  readonly superPeriodDays: number | null;
}

/** Mid-times that the best model predicts for one companion, observed or not. */
export interface InteractionPrediction {
  readonly letter: string;
  readonly cycles: Int32Array;
  readonly timesDays: Float64Array;
  /** Standard deviation over the draws, days. */
  readonly sigmasDays: Float64Array;
  /** Predicted minus the straight line through the observed times, min. */
  readonly variationMinutes: Float64Array;
  /** Rows of the table: observed minus the same line, and observed minus model, min. */
  readonly observedVariationMinutes: Float64Array;
  readonly residualMinutes: Float64Array;
  /** The line: time of cycle 0 and period, days. */
  readonly lineDays: readonly [number, number];
  /** From the first to the last observed time. */
  readonly observedSpanDays: number;
}

/** Another solution, from another start. */
export interface InteractionRival {
  readonly massRatios: readonly number[];
  readonly eccentricities: readonly number[];
  /** ln of its density minus that of the best, <= 0. */
  readonly deltaLogLikelihood: number;
}

/** Importance sampling: converged with 1200 effective draws, none of which carries more than three, also after wider searches. */
export interface InteractionPosterior {
  /** Evaluations of the density. */
  readonly draws: number;
  readonly effectiveDraws: number;
  /** Share of the posterior that the heaviest draw stands for. */
  readonly largestWeight: number;
  readonly status: 'converged' | 'draw-limit';
}

export interface InteractionFit {
  readonly status: 'converged' | 'iteration-limit' | 'failed';
  readonly usable: boolean;
  /** When the osculating elements hold, on the axis of the tables. */
  readonly epochDays: number;
  readonly companions: readonly InteractionCompanionRecord[];
  readonly resonances: readonly ResonanceRecord[];
  readonly predictions: readonly InteractionPrediction[];
  readonly rivals: readonly InteractionRival[];
  /** With the fitted jitters among the errors. */
  readonly chiSquare: number;
  /** Of straight lines instead, with the same jitters. */
  readonly chiSquareLines: number;
  readonly degreesOfFreedom: number;
  /** ln L gained over straight lines, jitter refitted on both sides; positive favours interaction. */
  readonly deltaLogLikelihood: number;
  readonly deltaBic: number;
  /** Largest difference between the fast integration of the fit and the exact one at the best fit, s. */
  readonly modelErrorSeconds: number;
  readonly posterior: InteractionPosterior | null;
  /** Correlations between the logarithms of the mass ratios, row by row in the order of the companions. */
  readonly massCorrelation: readonly (readonly number[])[];
  readonly assumptions: readonly string[];
  readonly warnings: readonly { readonly code: string; readonly message: string }[];
}
