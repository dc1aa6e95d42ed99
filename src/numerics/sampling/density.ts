/** What a sampler needs to know of a distribution: the logarithm of its density and the slope of that. */

export interface SmoothDensity {
  /** Number of coordinates, >= 1. */
  readonly size: number;
  /**
   * ln density, up to a constant that is the same everywhere.
   *
   * @param position - length `size`; read, never modified or kept
   * @param gradient - length `size`; overwritten by the partial derivatives of the result
   * @returns the logarithm; -Infinity or NaN outside the domain (`gradient` may then hold anything)
   */
  evaluate(position: Float64Array, gradient: Float64Array): number;
}
