/** Elements of one companion in the units used inside. */
export interface OrbitElements {
  readonly periodDays: number;
  /** 0 <= e < 1 */
  readonly eccentricity: number;
  /** Argument of periastron of the star's orbit about the barycentre. */
  readonly argPeriastronStarRad: number;
  readonly timePeriastronBjdTdb: number;
  /** Positive when the star recedes. */
  readonly semiAmplitudeMps: number;
}
