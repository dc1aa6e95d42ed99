/** The velocity model at given times, for charts, tables and simulated observations. */
import { TWO_PI } from '../orbit/constants.js';
import { solveKeplerArray } from '../orbit/kepler-array.js';
import type { OrbitElements } from '../orbit/elements.js';
import type { VelocityModelPoint } from './velocity-model.js';

/**
 * Adds the star's velocity due to one companion, v = K [cos(nu + omega) + e cos omega], to `sumMps`.
 *
 * @param timesBjdTdb - (n), days
 * @param sumMps - (n), m/s, modified: the Keplerian is added
 */
export function addKeplerian(orbit: OrbitElements, timesBjdTdb: Float64Array, sumMps: Float64Array): void {
  const n = timesBjdTdb.length;
  const { eccentricity: e, semiAmplitudeMps } = orbit;
  const meanAnomalies = new Float64Array(n);
  const sinE = new Float64Array(n);
  const cosE = new Float64Array(n);
  const rate = TWO_PI / orbit.periodDays;
  for (let i = 0; i < n; i++) meanAnomalies[i] = rate * (timesBjdTdb[i]! - orbit.timePeriastronBjdTdb);
  solveKeplerArray(meanAnomalies, e, sinE, cosE);
  const eta = Math.sqrt((1 - e) * (1 + e));
  const cosOmega = semiAmplitudeMps * Math.cos(orbit.argPeriastronStarRad);
  const sinOmega = semiAmplitudeMps * Math.sin(orbit.argPeriastronStarRad);
  for (let i = 0; i < n; i++) {
    const inverse = 1 / (1 - e * cosE[i]!);
    const cosNu = (cosE[i]! - e) * inverse;
    const sinNu = eta * sinE[i]! * inverse;
    sumMps[i]! += cosOmega * (cosNu + e) - sinOmega * sinNu;
  }
}

/**
 * Velocity at given times without zero points: drift plus the chosen companions.
 *
 * @param timesBjdTdb - (n), days, any order
 * @param options.companions - indices into `point.companions`; default all of them
 * @param options.drift - include slope and curvature; default true
 * @returns (n), m/s, receding positive
 */
export function evaluateVelocity(
  point: VelocityModelPoint,
  timesBjdTdb: Float64Array,
  options: { readonly companions?: readonly number[]; readonly drift?: boolean } = {},
): Float64Array {
  const sum = new Float64Array(timesBjdTdb.length);
  if (options.drift ?? true) {
    for (let i = 0; i < sum.length; i++) {
      const dt = timesBjdTdb[i]! - point.epochBjdTdb;
      sum[i] = dt * (point.slopeMpsPerDay + 0.5 * point.curvatureMpsPerDay2 * dt);
    }
  }
  const chosen = options.companions ?? point.companions.map((_, index) => index);
  for (const index of chosen) addKeplerian(point.companions[index]!, timesBjdTdb, sum);
  return sum;
}
