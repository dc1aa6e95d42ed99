/**
 * How the free parameters of one companion map to the orbit coordinates of the velocity term
 * (ln P, mean longitude at the epoch, k = e cos omega, h = e sin omega, K). A private matter of the solver:
 * results and priors are stated in the trade's elements.
 */
import type { OrbitElements } from '../../orbit/elements.js';

/** Elements on the solver's time axis: times in days since the epoch. */
export type RelativeElements = Omit<OrbitElements, 'timePeriastronBjdTdb'> & {
  readonly timePeriastronDays: number;
};

export interface Parametrisation {
  /** Number of free parameters. */
  readonly size: number;
  /** `true` when e = 0 is imposed. */
  readonly circular: boolean;
  /** For each free parameter the coordinate that it is, when the parameters are coordinates themselves; null otherwise. */
  readonly coordinateOf: readonly number[] | null;
  /** Number of prior rows (Gaussian priors stated by the user). */
  readonly priorCount: number;
  /**
   * @param free - parameter vector, this companion's part starting at `offset`
   * @param coordinates - (5), overwritten
   * @param jacobian - row-major (5, size), overwritten, or null
   * @returns false outside the domain
   */
  toCoordinates(
    free: Float64Array,
    offset: number,
    coordinates: Float64Array,
    jacobian: Float64Array | null,
  ): boolean;
  /**
   * Prior rows (parameter - centre)/sigma and their derivatives by this companion's free parameters.
   *
   * @param rows - (priorCount), overwritten
   * @param jacobian - row-major (priorCount, size), overwritten, or null
   */
  priors(free: Float64Array, offset: number, rows: Float64Array, jacobian: Float64Array | null): void;
  /**
   * ln of the slopes d element / d parameter, summed over the free elements: what turns a density stated in the elements
   * into one of the parameters. 0 where the parameters are coordinates and no element is stated.
   */
  logSlopes(free: Float64Array, offset: number): number;
  /** Writes the free parameters nearest to the given elements. */
  fromElements(elements: RelativeElements, free: Float64Array, offset: number): void;
}

const LARGEST_ECCENTRICITY = 0.99999;

/** Coordinates to elements; periastron is the passage nearest to the epoch. */
export function coordinatesToElements(coordinates: Float64Array, offset = 0): RelativeElements {
  const periodDays = Math.exp(coordinates[offset]!);
  let k = coordinates[offset + 2]!;
  let h = coordinates[offset + 3]!;
  let longitude = coordinates[offset + 1]!;
  let amplitude = coordinates[offset + 4]!;
  // A difference quotient or a draw may step across e = 1, where there is no ellipse to convert to.
  const eccentricity = Math.min(Math.hypot(k, h), LARGEST_ECCENTRICITY);
  if (amplitude < 0) {
    // A negative amplitude is the same orbit turned by half a revolution.
    if (eccentricity > 0) {
      k = -k;
      h = -h;
    }
    longitude += Math.PI;
    amplitude = -amplitude;
    if (eccentricity > 0) return turned(periodDays, eccentricity, Math.atan2(h, k), longitude, amplitude);
  }
  // For a circular orbit the argument is 90 degrees, so that periastron and inferior conjunction coincide.
  const omega = eccentricity > 0 ? Math.atan2(h, k) : Math.PI / 2;
  return turned(periodDays, eccentricity, omega, longitude, amplitude);
}

function turned(
  periodDays: number,
  eccentricity: number,
  omega: number,
  longitude: number,
  semiAmplitudeMps: number,
): RelativeElements {
  const turns = (longitude - omega) / (2 * Math.PI);
  return {
    periodDays,
    eccentricity,
    argPeriastronStarRad: omega < 0 ? omega + 2 * Math.PI : omega,
    timePeriastronDays: -(turns - Math.round(turns)) * periodDays,
    semiAmplitudeMps,
  };
}
