/** The velocity model at one point: zero point of the instrument + drift + sum of Keplerians (receding is positive). */
import type { OrbitElements } from '../orbit/elements.js';

/** Enough to evaluate the model anywhere, in the units used inside. */
export interface VelocityModelPoint {
  readonly companions: readonly OrbitElements[];
  readonly letters: readonly string[];
  /** m/s, one per instrument. */
  readonly zeroPointsMps: Float64Array;
  /** m/s, one per instrument. */
  readonly jittersMps: Float64Array;
  /** Zero of slope and curvature. */
  readonly epochBjdTdb: number;
  readonly slopeMpsPerDay: number;
  readonly curvatureMpsPerDay2: number;
}
