/** A density as the chains of a mode need it. */
import type { SmoothDensity } from '../../numerics/sampling/density.js';

export interface SampledDensity extends SmoothDensity {
  /** The mirror image of a position with all mirrored coordinates positive. */
  fold(position: Float64Array): Float64Array;
  /** The same density on one mirror image only. */
  readonly folded: SmoothDensity;
  /** Numbers whose chains are judged: free of wrapping and of mirror images. */
  judged(position: Float64Array): number[];
}
