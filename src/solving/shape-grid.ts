/** The grid of the shape scan: which eccentricities, periods and phases are tried, and the tabulated shapes. */
import { DAYS_PER_YEAR, TWO_PI } from '../orbit/constants.js';
import { solveKeplerArray } from '../orbit/kepler-array.js';

/** Trial eccentricities; between neighbours the shapes overlap enough for the nonlinear fit to walk across. */
export const TRIAL_ECCENTRICITIES: readonly number[] = [0.45, 0.65, 0.8, 0.89, 0.94, 0.97];

/** Above this eccentricity phases are tried only where a strongly deviating point would sit in the periastron swing. */
export const ANCHORED_FROM = 0.85;
export const ANCHORS = 5;
const ANCHOR_TRUE_ANOMALIES_RAD = [-2, -1, 0, 1, 2] as const;

/**
 * Shortest period searched at an eccentricity: the periastron distance of an orbit about one solar mass stays above
 * 0.01 au (two solar radii), P = 365.25 d (0.01/(1 - e))^1.5.
 */
export function shortestPeriodDays(eccentricity: number): number {
  return DAYS_PER_YEAR * (0.01 / (1 - eccentricity)) ** 1.5;
}

/** Width of the periastron swing as a fraction of the period: 1 / (2 dnu/dM at periastron / pi). */
export function swingWidth(eccentricity: number): number {
  return Math.min(0.5, (1.6 * ((1 - eccentricity) * (1 - eccentricity ** 2) ** 0.5)) / (1 + eccentricity));
}

export interface ShapeTable {
  readonly size: number;
  readonly cosNu: Float64Array;
  readonly sinNu: Float64Array;
}

const tables = new Map<number, ShapeTable>();

/** cos nu and sin nu on a uniform grid of the mean anomaly over one revolution. */
export function shapeTable(eccentricity: number): ShapeTable {
  const known = tables.get(eccentricity);
  if (known !== undefined) return known;
  const size = eccentricity > 0.9 ? 16384 : 4096;
  const meanAnomalies = Float64Array.from({ length: size }, (_, i) => (TWO_PI * (i + 0.5)) / size);
  const sinE = new Float64Array(size);
  const cosE = new Float64Array(size);
  solveKeplerArray(meanAnomalies, eccentricity, sinE, cosE);
  const eta = Math.sqrt(1 - eccentricity ** 2);
  const cosNu = new Float64Array(size);
  const sinNu = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    const inverse = 1 / (1 - eccentricity * cosE[i]!);
    cosNu[i] = (cosE[i]! - eccentricity) * inverse;
    sinNu[i] = eta * sinE[i]! * inverse;
  }
  const table = { size, cosNu, sinNu };
  tables.set(eccentricity, table);
  return table;
}

/** Fractions of a revolution: mean anomalies at which the anchors' trial true anomalies lie. */
export function anchorOffsets(eccentricity: number): number[] {
  return ANCHOR_TRUE_ANOMALIES_RAD.map((nu) => {
    const half = Math.sqrt((1 - eccentricity) / (1 + eccentricity)) * Math.tan(nu / 2);
    const eccentric = 2 * Math.atan(half);
    return (eccentric - eccentricity * Math.sin(eccentric)) / TWO_PI;
  });
}
