/**
 * What `timing` finds for several companions of one star. `TimingSystemRecord` is `timing.json` then, version 1: it may
 * grow keys, but the meaning of a key never changes.
 */
import type { TimeScale } from '../../observations/types.js';
import type { Quantity } from '../types.js';
import type {
  InteractionCompanionRecord,
  InteractionFit,
  InteractionPosterior,
  InteractionRival,
  InteractionTable,
} from './interaction-types.js';
import type { TimingRecord, TimingSolved } from './types.js';

/** A companion by itself, as `timing` describes one. */
export type SystemCompanionRecord = { readonly letter: string } & Omit<
  TimingRecord,
  'schema' | 'version' | 'target' | 'timeScale' | 'provenance'
>;

export type InteractingCompanion = Omit<
  InteractionCompanionRecord,
  'mass' | 'rmsMinutes' | 'points' | 'massRatioRange95'
> & {
  readonly massEarth: Quantity; // M_earth
  readonly massJupiter: Quantity; // M_jup
  /** Central 95 % of the mass ratio. */
  readonly massRatioRange95: { readonly lower: number; readonly upper: number } | null;
  readonly rms: number; // min
  readonly count: number;
};

/** `interaction` of the record: orbits that pull at each other, fitted to all mid-transits together. */
export interface InteractionRecord {
  readonly status: InteractionFit['status'];
  /** Whether masses may be used at all. */
  readonly usable: boolean;
  /** BIC asks for the pull (by 10 or more), and the fit is usable. */
  readonly needed: boolean;
  /** When the osculating elements hold, BJD_TDB. */
  readonly epoch: number;
  readonly companions: readonly InteractingCompanion[];
  /** Neighbours in period. */
  readonly resonances: readonly {
    readonly letters: readonly [string, string];
    /** First order, e.g. `2:1`; `null` where none is near. */
    readonly ratio: string | null;
    /** Ratio of the periods over that of the resonance, minus one. */
    readonly distance: number | null;
    readonly superPeriod: number | null; // d
  }[];
  readonly chiSquare: number;
  readonly chiSquareLines: number;
  readonly degreesOfFreedom: number;
  readonly deltaLogLikelihood: number;
  readonly deltaBic: number;
  /** What comes next, from the integrated orbits. */
  readonly predictions: readonly {
    readonly letter: string;
    readonly cycle: number;
    readonly time: Quantity; // BJD_TDB, d
    /** Against the straight line through the observed times. */
    readonly variation: number; // min
  }[];
  readonly rivals: readonly InteractionRival[];
  readonly modelError: number; // s, of the fast integration against the exact one
  readonly posterior: InteractionPosterior | null;
  /** Of ln mass ratio, companion by companion; `null` where it cannot be had. */
  readonly massCorrelation: readonly (readonly (number | null)[])[];
  readonly assumptions: readonly string[];
  readonly warnings: InteractionFit['warnings'];
}

export interface TimingSystemRecord {
  readonly schema: 'tugline/timing-system';
  readonly version: 1;
  readonly target: string;
  readonly timeScale: TimeScale;
  readonly star: { readonly mass: Quantity }; // M_sun
  readonly companions: readonly SystemCompanionRecord[];
  readonly interaction: InteractionRecord | null;
  /** Why there is no `interaction`; absent where there is one. */
  readonly interactionWhy?: string;
  /** Of the companions together; each has its own as well. */
  readonly warnings: readonly { readonly code: string; readonly message: string }[];
  readonly provenance: TimingRecord['provenance'];
}

/** The record, and what charts and tables need. */
export interface TimingSystemSolved {
  readonly record: TimingSystemRecord;
  /** Each by itself, in the order of `record.companions`. */
  readonly companions: readonly { readonly letter: string; readonly solved: TimingSolved }[];
  readonly interaction: {
    readonly fit: InteractionFit;
    readonly tables: readonly InteractionTable[];
  } | null;
  /** The interaction was tried, and gave nothing that can be used. */
  readonly hasFailed: boolean;
}
