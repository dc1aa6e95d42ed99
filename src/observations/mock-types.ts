/** How `mock` observes a target's light: survey light curves, nights around a transit, and tables of mid-times. */

/** Slow change of the star's light: quasi-periodic, with the first overtone. */
export interface MockVariability {
  /** Standard deviation, in units of the flux. */
  readonly size: number;
  readonly periodDays: number;
  /** Its phases drift away within about this time, days. */
  readonly lifetimeDays: number;
}

/** Noise with a memory: covariance size² exp(-Δt/time). */
export interface MockRedNoise {
  /** Standard deviation, in units of the flux. */
  readonly size: number;
  readonly timeDays: number;
}

interface MockCurve {
  /** File name written, e.g. `survey.csv`. */
  readonly table: string;
  /** Names the limb darkening in `MockPlan.bands`. */
  readonly band: string;
  readonly unit: 'relative' | 'counts';
  /** Counts of the undisturbed star; used with `counts` only. */
  readonly level: number;
  /** Distance of mid-exposures, days. */
  readonly cadenceDays: number;
  readonly exposureDays: number;
  /** Standard error of one exposure (at airmass 1), in units of the flux. */
  readonly noise: number;
  readonly redNoise: MockRedNoise | null;
}

/** An uninterrupted watch from space, but for its gaps. */
export interface MockSurvey extends MockCurve {
  readonly kind: 'survey';
  readonly fromBjdTdb: number;
  readonly spanDays: number;
  /** Days since the beginning. */
  readonly gaps: readonly { readonly afterDays: number; readonly lengthDays: number }[];
  readonly variability: MockVariability | null;
  /** Share of the rows that are disturbed and flagged, in short spells, 0..0.5. */
  readonly flagged: number;
}

/** One night at the site of the plan, around the first transit after a date that can be followed there. */
export interface MockNight extends MockCurve {
  readonly kind: 'night';
  /** Index into the companions of the plan. */
  readonly companion: number;
  readonly afterBjdTdb: number;
  /** Wanted before the first and after the last contact, days. */
  readonly marginDays: number;
  /** Change of the flux per unit of airmass, pixel of the position, and pixel of the width of the image. */
  readonly airmassTrend: number;
  readonly positionTrend: number;
  readonly widthTrend: number;
}

export type MockLightCurve = MockSurvey | MockNight;

export interface MockMidTimes {
  /** File name written. */
  readonly table: string;
  /** Index into the companions of the plan. */
  readonly companion: number;
  readonly count: number;
  /** Typical formal error, days, and its relative scatter. */
  readonly errorDays: number;
  readonly errorScatter: number;
  readonly fromBjdTdb: number;
  readonly toBjdTdb: number;
  /** Who observed: one of these at random per row; none leaves the column out. */
  readonly sources: readonly string[];
}

/** What makes a companion's transits; in the plan beside its orbit. */
export interface MockTransit {
  readonly radiusRatio: number;
  /** Impact parameter in stellar radii, or inclination in degrees. */
  readonly path:
    | { readonly kind: 'impact-parameter'; readonly value: number }
    | { readonly kind: 'inclination'; readonly deg: number };
}

/** What a plan needs beside velocities to simulate light curves. */
export interface MockPhotometry {
  readonly star: { readonly massSolar: number; readonly radiusSolar: number } | null;
  /** Quadratic limb darkening by band. */
  readonly bands: Readonly<Record<string, { readonly u1: number; readonly u2: number }>>;
  readonly lightCurves: readonly MockLightCurve[];
  readonly midTimes: readonly MockMidTimes[];
}
