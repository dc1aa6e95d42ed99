/**
 * The values that pass from the solver to everything above it. `SolutionRecord` is `solution.json`, version 1:
 * it may grow keys, but the meaning of a key never changes.
 */
import type { TimeScale, VelocitySet } from '../observations/types.js';
import type { VelocityModelPoint } from '../signals/velocity-model.js';
import type { ProvenanceRecord } from './provenance.js';
import type { Quantity } from './quantity.js';
import type {
  PhotometryRecord,
  SolvedPhotometry,
  TransitDerivedKey,
  TransitElementKey,
} from './transit-types.js';

export type { Quantity } from './quantity.js';

/** A period that explains the data nearly as well, refitted. `deltaLogLikelihood` is (rival - reported), usually <= 0. */
export interface Rival {
  readonly period: number; // d
  /** e.g. `sidereal-day alias`, `solar-day alias`, `synodic-month alias`, `year alias`, `half period`, `double period`, `other peak`. */
  readonly kind: string;
  readonly deltaLogLikelihood: number;
  readonly eccentricity: number;
}

export interface Evidence {
  /** ln L gained by adding this companion to the rest of the model (refitted without it). */
  readonly deltaLogLikelihood: number;
  readonly deltaBic: number; // positive favours the companion
  readonly falseAlarmProbability: number;
  /** How the false-alarm probability was obtained, in words. */
  readonly falseAlarmMethod: string;
  /** With against without this companion; `null` with `--quick` or where it could not be computed reliably. */
  readonly marginal: MarginalComparison | null;
  /** Circular against eccentric: ln L and BIC of the eccentric minus the circular fit, and the Lucy-Sweeney probability. */
  readonly eccentricity: {
    readonly deltaLogLikelihood: number;
    readonly deltaBic: number; // BIC(circular) - BIC(eccentric); positive favours e > 0
    readonly lucySweeneyProbability: number | null;
    /** Eccentric against circular; `null` as above. */
    readonly marginal: MarginalComparison | null;
    readonly eccentricFit: {
      readonly eccentricity: Quantity;
      readonly argumentOfPeriastron: Quantity;
    } | null;
  } | null;
}

export type ElementKey =
  | 'period' | 'eccentricity' | 'argumentOfPeriastron' | 'timeOfPeriastron' | 'timeOfInferiorConjunction' | 'semiAmplitude'; // prettier-ignore

/** Keys of `derived`; a quantity that needs an unknown (star mass, radius) is null with a `why`. */
export const DERIVED_KEYS = [
  'semiMajorAxis', // au, relative orbit
  'starOrbitSemiMajorAxis', // au, a_star sin i
  'massFunction', // M_sun
  'minimumMass', // M_jup, m sin i solved exactly with i = 90 deg
  'mass', // M_jup, when the inclination is known
  'periastronDistance', // au
  'apastronDistance', // au
  'periastronSpeed', // km/s, relative orbit
  'apastronSpeed', // km/s
  'nextInferiorConjunction', // BJD_TDB, first after the last observation
  'nextPeriastron', // BJD_TDB
  'transitProbability', // 0..1
  'transitDuration', // h, central transit, first to last contact of the star's disc
  'transitDepth', // ppm, for a body of 1 R_jup
  'astrometricSignature', // microarcsec at 10 pc (scales inversely with distance), minimum
  'equilibriumTemperature', // K, zero albedo, full redistribution, orbit-averaged flux
  'irradiation', // Earth's
  'hillRadius', // au
] as const;
export type DerivedKey = (typeof DERIVED_KEYS)[number];

export interface CompanionRecord {
  readonly letter: string;
  /** Those of a transit only where a light curve shows one. */
  readonly elements: Readonly<Record<ElementKey, Quantity>> &
    Partial<Readonly<Record<TransitElementKey, Quantity>>>;
  readonly derived: Readonly<Record<DerivedKey, Quantity>> &
    Partial<Readonly<Record<TransitDerivedKey, Quantity>>>;
  readonly circular: boolean;
  readonly evidence: Evidence;
  /** Best first; those whose ln L falls short by more than 12 are dismissed. */
  readonly rivals: readonly Rival[];
  /** How many aliases and other peaks were refitted for this companion. */
  readonly rivalsTried?: number;
}

export interface InstrumentRecord {
  readonly name: string;
  readonly count: number;
  readonly zeroPoint: Quantity; // m/s
  readonly jitter: Quantity; // m/s
  readonly rms: number; // m/s, of the residuals
}

/** A signal that clears only the weaker thresholds: reported, not fitted. */
export interface CandidateRecord {
  readonly period: number;
  readonly semiAmplitude: number;
  readonly falseAlarmProbability: number;
  readonly deltaBic: number;
}

/** Two companions side by side. */
export interface NeighbourRecord {
  readonly letters: readonly [string, string];
  readonly periodRatio: number;
  /** e.g. `2:1`, when the ratio is within 1 % of p:q with p, q <= 5; otherwise null. */
  readonly nearRatio: string | null;
  readonly mutualHillSpacing: Quantity; // mutual Hill radii
}

/** ln of the ratio of marginal likelihoods, with the standard error of its own computation. */
export interface MarginalComparison {
  readonly logBayesFactor: number;
  readonly standardError: number;
}

/** One mode of the posterior (a set of periods), sampled on its own and weighted by its marginal likelihood. */
export interface PosteriorMode {
  /** Periods of the companions, d, in the order of `companions`. */
  readonly periods: readonly number[];
  readonly logEvidence: number;
  readonly standardError: number;
  /** Share of the posterior probability among the modes that were sampled, 0..1. */
  readonly weight: number;
}

/** How the posterior was sampled, and whether that can be trusted. */
export interface PosteriorRecord {
  readonly method: string;
  readonly chains: number;
  /** Draws of all chains of the reported mode, after warm-up. */
  readonly draws: number;
  readonly warmup: number;
  readonly rHatMax: number;
  readonly bulkEssMin: number;
  readonly tailEssMin: number;
  readonly ebfmiMin: number;
  readonly divergences: number;
  /** `converged`: R-hat < 1.01 and bulk and tail effective sample sizes > 400 for every element; else why sampling stopped. */
  readonly status: 'converged' | 'draw-limit' | 'interrupted';
  /** Marginal likelihood of the reported model in the reported mode. */
  readonly logEvidence: number;
  readonly logEvidenceError: number;
  /** Best first; the first is the one that is reported. */
  readonly modes: readonly PosteriorMode[];
  /** The priors in sentences. */
  readonly priors: readonly string[];
}

/** One number of every draw. */
export interface PosteriorColumn {
  /** Path of the quantity in `solution.json`, e.g. `companions.b.elements.period`. */
  readonly key: string;
  readonly unit: string;
  /** (chains x drawsPerChain), chain after chain, in the order of drawing. */
  readonly values: Float64Array;
  /** 360 for angles, else 0: values are unwrapped to within half a cycle of the reported value. */
  readonly cycle: number;
}

/** The draws of the reported mode, in the units of `solution.json`. */
export interface PosteriorDraws {
  readonly chains: number;
  readonly drawsPerChain: number;
  readonly columns: readonly PosteriorColumn[];
  /** (chains x drawsPerChain), ln of the posterior density in the sampler's coordinates. */
  readonly logDensity: Float64Array;
}

export interface SolutionRecord {
  readonly schema: 'tugline/solution';
  readonly version: 1;
  readonly target: string;
  readonly timeScale: TimeScale;
  readonly epoch: number;
  readonly star: {
    readonly mass: Quantity;
    readonly radius: Quantity;
    readonly effectiveTemperature: Quantity;
  };
  readonly companions: readonly CompanionRecord[];
  readonly candidates: readonly CandidateRecord[];
  readonly neighbours: readonly NeighbourRecord[];
  readonly velocity: {
    readonly instruments: readonly InstrumentRecord[];
    readonly slope: Quantity; // m/s/yr
    readonly curvature: Quantity; // m/s/yr^2
  };
  /** Light curves and mid-times; absent where there are none. */
  readonly photometry?: PhotometryRecord;
  readonly fit: {
    readonly status: 'converged' | 'iteration-limit' | 'failed';
    readonly reason: string;
    readonly usable: boolean;
    readonly logLikelihood: number;
    readonly chiSquare: number;
    readonly degreesOfFreedom: number;
    readonly freeParameters: number;
    readonly bic: number;
    readonly aicc: number | null;
    readonly rms: number;
    readonly covariance: {
      readonly names: readonly string[];
      readonly matrix: readonly (readonly number[])[];
    };
  };
  /** `null` with `--quick`: uncertainties are then from the curvature at the solution. */
  readonly posterior: PosteriorRecord | null;
  /** Sentences: what the numbers assume. */
  readonly assumptions: readonly string[];
  readonly warnings: readonly { readonly code: string; readonly message: string }[];
  readonly provenance: ProvenanceRecord;
}

/** One peak of a periodogram. */
export interface PeriodPeak {
  readonly periodDays: number;
  /** 1 - chi2 / chi2_0, in 0..1. */
  readonly power: number;
  readonly deltaLogLikelihood: number;
  readonly falseAlarmProbability: number;
  readonly semiAmplitudeMps: number;
  /** What the peak is, seen from the strongest one: `strongest`, an alias kind, or `independent`. */
  readonly kind: string;
}

/** The periodogram at one stage of the search: with `companionsFitted` companions, drift and zero points refitted at each frequency. */
export interface SearchStage {
  readonly title: string;
  readonly companionsFitted: number;
  /** Uniform grid, 1/d, ascending. */
  readonly frequenciesPerDay: Float64Array;
  /** Normalised power 0..1 at each frequency. */
  readonly power: Float64Array;
  readonly levels: readonly { readonly falseAlarmProbability: number; readonly power: number }[];
  readonly peaks: readonly PeriodPeak[];
  /** Why the best addition of this stage was not fitted though its evidence looked sufficient. */
  readonly refusal?: string;
  /** Best eccentric shape found by the Keplerian scan at this stage, if it beats the sinusoid. */
  readonly eccentricPeak: { readonly periodDays: number; readonly eccentricity: number; readonly deltaLogLikelihood: number; readonly falseAlarmProbability: number } | null; // prettier-ignore
}

/** Power of the window function |sum w exp(2 pi i f t)|^2 / (sum w)^2 on a grid of its own. */
export interface WindowFunction {
  readonly frequenciesPerDay: Float64Array;
  readonly power: Float64Array;
  readonly peaks: readonly { readonly frequencyPerDay: number; readonly periodDays: number; readonly power: number; readonly name: string | null }[]; // prettier-ignore
}

/** Everything that `solve` found: the record for people and machines, and the arrays that charts and tables need. */
export interface Solved {
  readonly record: SolutionRecord;
  /** `count` is 0 where there are none. */
  readonly velocities: VelocitySet;
  readonly best: VelocityModelPoint;
  /** Observed minus model (zero point, drift, companions), m/s, in the order of `velocities`. */
  readonly residualsMps: Float64Array;
  readonly stages: readonly SearchStage[];
  readonly window: WindowFunction;
  /** `null` with `--quick`. */
  readonly posterior: PosteriorDraws | null;
  /** Light curves, mid-times and the search for dips; absent without light curves and mid-times. */
  readonly photometry?: SolvedPhotometry;
}
