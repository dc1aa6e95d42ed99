/**
 * What the readers hand on: tables as read, and the observations of one target put together from them.
 * Plain immutable values; nothing here knows files or the console.
 */

import type { MockPhotometry, MockTransit } from './mock-types.js';

declare const unit: unique symbol;
type Branded<U extends string> = number & { readonly [unit]: U };

/** A time in BJD_TDB, days. Earned in a reader (`asBjdTdb`); a raw number or a UTC date does not compile in its place. */
export type BjdTdb = Branded<'BJD_TDB'>;

/** Time scales that a table may be in. Only `BJD_TDB` is exact for us; the others are carried and warned about. */
export const TIME_SCALES = [
  'BJD_TDB', 'BJD_UTC', 'BJD', 'HJD_UTC', 'HJD_TT', 'HJD', 'JD_UTC', 'JD_TT', 'JD', 'unknown',
] as const; // prettier-ignore
export type TimeScale = (typeof TIME_SCALES)[number];

/** `Q +- sigma` as given by the user. `sigma` is 0 when none was stated. */
export interface Measured {
  readonly value: number;
  readonly sigma: number;
}

/** Something about a table that the user should know but that does not stop the run. */
export interface TableNotice {
  /** e.g. `repeated-time`, `outlier`, `unsorted`, `time-jump`, `mixed-units`, `time-scale`, `flagged-rows`. */
  readonly code: string;
  readonly message: string;
  /** Line numbers in the file (from 1); may be empty. */
  readonly lines: readonly number[];
}

/** What one column of a table was taken for, and why. */
export interface ColumnReading {
  /** 1-based position in the table. */
  readonly position: number;
  /** Label as written in the header, `null` in a headerless table. Untrusted text. */
  readonly label: string | null;
  readonly meaning:
    | 'time' | 'velocity' | 'velocity-error' | 'instrument' | 'quality' | 'kept'
    | 'flux' | 'magnitude' | 'error' | 'exposure' | 'band' | 'regressor'
    | 'cycle' | 'source' | 'kind'; // prettier-ignore
  /** e.g. `BJD_TDB - 2450000 (d)`, `km/s`, `m/s`, `mag`, `min`; empty where there is none. */
  readonly unit: string;
  /** How it is known: `header name`, `header unit`, `--columns`, `position (headerless table)`, `magnitude`. */
  readonly known: string;
}

/** A table of velocities as understood. Arrays hold the used rows only, in file order, all of one length. */
export interface VelocityTable {
  readonly content: 'velocities';
  readonly path: string;
  readonly sha256: string;
  /** Data rows in the file (flagged ones included). */
  readonly rows: number;
  readonly used: number;
  readonly delimiter: 'comma' | 'semicolon' | 'tab' | 'blanks';
  readonly columns: readonly ColumnReading[];
  readonly timeScale: TimeScale;
  /** Days added to the file's numbers to get full Julian dates (0, 2400000.5, 2450000 ...). */
  readonly timeOffsetDays: number;
  readonly velocityUnit: 'm/s' | 'km/s';
  /** Full Julian dates, days, taken as BJD_TDB. */
  readonly timesBjdTdb: Float64Array;
  readonly velocitiesMps: Float64Array;
  readonly sigmasMps: Float64Array;
  /** Index into `instruments` per row. */
  readonly instrumentOf: Uint16Array;
  readonly instruments: readonly string[];
  /** Line in the file per used row. */
  readonly lines: Uint32Array;
  /** Further columns, kept as text, by label; one entry per used row. */
  readonly kept: ReadonlyMap<string, readonly string[]>;
  readonly notices: readonly TableNotice[];
}

/** All velocities of one target, sorted by time. Arrays have length `count`; read, never modified. */
export interface VelocitySet {
  readonly count: number;
  readonly timesBjdTdb: Float64Array;
  readonly velocitiesMps: Float64Array;
  readonly sigmasMps: Float64Array;
  /** Index into `instruments` per row. */
  readonly instrumentOf: Uint16Array;
  readonly instruments: readonly string[];
  /** Index into `tables` per row, and line in that file. */
  readonly tableOf: Uint16Array;
  readonly lines: Uint32Array;
  readonly tables: readonly {
    readonly path: string;
    readonly sha256: string;
    readonly rows: number;
    readonly used: number;
  }[];
  readonly timeScale: TimeScale;
  readonly notices: readonly (TableNotice & { readonly path: string })[];
}

/** A choice for one element of a companion in a case. Absent means free with its default range. */
export type ElementChoice =
  | { readonly kind: 'fixed'; readonly value: number }
  | { readonly kind: 'range'; readonly low: number; readonly high: number }
  | { readonly kind: 'prior'; readonly value: number; readonly sigma: number };

export const ELEMENT_NAMES = [
  'period', // days
  'eccentricity', // 0 <= e < 1
  'argumentOfPeriastron', // degrees, of the star's orbit
  'timeOfPeriastron', // BJD_TDB, days
  'timeOfInferiorConjunction', // BJD_TDB, days
  'semiAmplitude', // m/s
] as const; // prettier-ignore
export type ElementName = (typeof ELEMENT_NAMES)[number];

export interface CompanionChoice {
  readonly letter: string;
  /** `true` fits a circular orbit, `false` an eccentric one, `auto` lets the evidence decide. */
  readonly circular: boolean | 'auto';
  /** In the units of `ELEMENT_NAMES`. */
  readonly elements: Partial<Readonly<Record<ElementName, ElementChoice>>>;
  /** Degrees; used for the true mass when given. */
  readonly inclinationDeg: Measured | null;
  /** What is stated of its transits; absent where nothing is. */
  readonly transit?: TransitChoice;
}

/** Choices for what a light curve shows of a companion. Absent means free with its default range. */
export interface TransitChoice {
  /** Companion's radius over the star's. */
  readonly radiusRatio?: ElementChoice;
  /** Of the transit, in stellar radii. */
  readonly impactParameter?: ElementChoice;
  /** The light curves hold its occultations too, and their depth is fitted (one per band). */
  readonly occultation?: boolean;
}

/** What a case may say of limb darkening in a band: Gaussian priors (sigma 0 fixes), in place of the triangular sampling. */
export interface BandChoice {
  readonly u1: Measured | null;
  readonly u2: Measured | null;
}

export interface InstrumentChoice {
  /** A zero point cannot be confined to a range. */
  readonly zeroPointMps: Exclude<ElementChoice, { readonly kind: 'range' }> | null;
  readonly jitterMps: ElementChoice | null;
}

export type DriftChoice = 'auto' | 'none' | 'linear' | 'quadratic';

/** Site and its nights, for simulated observations (and later for planning). */
export interface Site {
  readonly name: string;
  readonly latitudeDeg: number;
  readonly longitudeEastDeg: number;
  readonly elevationM: number;
}

/** How `mock` observes a case with one instrument. */
export interface MockInstrument {
  readonly name: string;
  /** File name written, e.g. `north.csv`. */
  readonly table: string;
  readonly unit: 'm/s' | 'km/s';
  readonly count: number;
  readonly zeroPointMps: number;
  readonly jitterMps: number;
  /** Typical formal error and its relative scatter. */
  readonly errorMps: number;
  readonly errorScatter: number;
  /** First and last date, BJD. */
  readonly from: number;
  readonly to: number;
}

export interface MockPlan {
  readonly site: Site;
  readonly target: { readonly rightAscensionDeg: number; readonly declinationDeg: number };
  /** Fraction of nights lost to weather, 0..1. */
  readonly weatherLoss: number;
  readonly maximumAirmass: number;
  readonly twilightDeg: number;
  readonly instruments: readonly MockInstrument[];
  readonly companions: readonly {
    readonly periodDays: number; readonly eccentricity: number; readonly argPeriastronStarDeg: number;
    readonly timePeriastronBjdTdb: number; readonly semiAmplitudeMps: number;
    /** Absent: no transits. */
    readonly transit?: MockTransit;
  }[]; // prettier-ignore
  readonly slopeMpsPerYear: number;
  readonly curvatureMpsPerYear2: number;
  readonly epochBjdTdb: number;
  /** Light curves and mid-times; absent where there are none. */
  readonly photometry?: MockPhotometry;
}

/** A case file, validated; or the same made from command-line options and bare tables. */
export interface Case {
  /** Path of the case file, `null` when made from bare tables. */
  readonly path: string | null;
  /** Checksum of the case file, when it was read from one. */
  readonly sha256?: string;
  readonly target: string;
  readonly star: {
    readonly massSolar: Measured | null;
    readonly radiusSolar: Measured | null;
    readonly effectiveTemperatureK: Measured | null;
    /** Mean density, g/cm3: a prior for the shape of transits. */
    readonly densityGcc?: Measured | null;
  };
  readonly tables: readonly TableRequest[];
  /** `auto`: as many as the data pay for; a number: exactly that many; a list: these, searched or started as described. */
  readonly companions: 'auto' | number | readonly CompanionChoice[];
  readonly maximumCompanions: number;
  /** After the listed companions others are searched for; absent, the list is complete. Set by the solver, not by a case. */
  readonly searchFurther?: boolean;
  readonly drift: DriftChoice;
  readonly circular: boolean | 'auto';
  readonly instruments: Readonly<Record<string, InstrumentChoice>>;
  /** Limb darkening, by name of the band. */
  readonly bands?: Readonly<Record<string, BandChoice>>;
  /** Search range in days; `null` leaves it to the data (0.5 d to 1.5 spans). */
  readonly periodRangeDays: { readonly low: number | null; readonly high: number | null };
  readonly mock: MockPlan | null;
}

/** What a column may be declared to be. `error` is that of the flux, the magnitude or the mid-time (or of the velocity). */
export const COLUMN_MEANINGS = [
  'time', 'velocity', 'velocity-error', 'instrument', 'quality',
  'flux', 'magnitude', 'error', 'exposure', 'band', 'cycle', 'source', 'kind',
] as const; // prettier-ignore
export type ColumnMeaning = (typeof COLUMN_MEANINGS)[number];

/** Units that may be declared for the numbers of a light curve. `ppm` are deviations from the usual flux. */
export const FLUX_UNITS = ['relative', 'counts', 'mag', 'ppm'] as const;
/** Units that may be declared for an error column; of a light curve the first ones, of mid-times the last ones. */
export const ERROR_UNITS = ['relative', 'counts', 'percent', 'ppm', 'mag', 'mmag', 'd', 'h', 'min', 's'] as const; // prettier-ignore
export type FluxUnit = (typeof FLUX_UNITS)[number];
export type ErrorUnit = (typeof ERROR_UNITS)[number];

/** What a table holds. */
export const TABLE_CONTENTS = ['velocities', 'light curve', 'mid-times'] as const;
export type TableContent = (typeof TABLE_CONTENTS)[number];

/** One table to read, with what the user declared about it; what is absent or `null` is recognised. */
export interface TableRequest {
  readonly path: string;
  readonly instrument: string | null;
  readonly timeScale: TimeScale | null;
  readonly timeOffsetDays: number | null;
  readonly velocityUnit: 'm/s' | 'km/s' | null;
  /** Column labels or 1-based positions, e.g. `{ time: 'BJD', velocity: '2' }`. */
  readonly columns: Partial<Readonly<Record<ColumnMeaning, string>>>;
  /** What the table holds. */
  readonly holds?: TableContent | null;
  readonly errorUnit?: ErrorUnit | null;
  /** Only for a light curve; a table that holds anything else says in a notice that it is not used. */
  readonly lightCurve?: LightCurveChoice;
  /** Only for mid-times; likewise. */
  readonly midTimes?: MidTimeChoice;
}

/** What a case (or an option) states of a light curve. */
export interface LightCurveChoice {
  readonly fluxUnit?: FluxUnit | null;
  readonly exposureDays?: number | null;
  readonly band?: string | null;
  /** Light of other stars in the aperture over all light. */
  readonly dilution?: Measured | null;
  /** Labels of columns, `time`, `time^2`, `time^3`. */
  readonly baseline?: readonly string[] | 'auto' | null;
  /** In units of the relative flux. */
  readonly jitter?: ElementChoice | null;
  readonly noise?: 'white' | 'correlated' | null;
}

/** What a case states of a table of mid-times. */
export interface MidTimeChoice {
  /** Letter of the companion. */
  readonly companion?: string | null;
  /** What all rows are, where no column says. */
  readonly kind?: 'transit' | 'occultation' | null;
}
