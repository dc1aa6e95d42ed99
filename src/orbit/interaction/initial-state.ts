/** Where interacting companions are and how they move at the epoch of their elements. */
import { meanFromTrueAnomaly } from '../anomalies.js';
import { AU_M, GM_SUN_M3_S2, SECONDS_PER_DAY, TWO_PI } from '../constants.js';
import { requireEccentricity, requireFinite, requireNotNegative, requirePositive } from '../domain.js';
import { solveKepler } from '../kepler.js';

/** Nominal solar mass parameter, au3/d2. */
export const GM_SUN_AU3_D2: number = (GM_SUN_M3_S2 * SECONDS_PER_DAY ** 2) / AU_M ** 3;

/** Osculating elements of the orbit relative to the star: the ellipse that would follow were there no other companion. */
export interface InteractingCompanion {
  /** Companion over star, >= 0. */
  readonly massRatio: number;
  readonly periodDays: number;
  /** An inferior conjunction of the ellipse, best one near the epoch; days on the axis of the epoch. */
  readonly conjunctionDays: number;
  /** e cos omega and e sin omega, omega that of the star's orbit. */
  readonly eCosOmega: number;
  readonly eSinOmega: number;
  /** 90 deg is edge-on. */
  readonly inclinationRad: number;
  /** Position angle of the line of nodes; only differences between companions matter for times. */
  readonly nodeRad: number;
}

export interface InteractingSystem {
  readonly starMassSolar: number;
  /** When the elements hold. */
  readonly epochDays: number;
  readonly companions: readonly InteractingCompanion[];
}

/** Relative to the star: x, y in the sky plane, z towards the observer; (x, y, z) of companion after companion, au, au/d. */
export interface RelativeState {
  readonly positions: Float64Array;
  readonly velocities: Float64Array;
}

/**
 * State at the epoch. In the sky frame a companion with inclination 90 deg and node 0 moves from +x to +z: its position is
 * r (cos(nu + omega), 0, sin(nu + omega)), in front of the star where nu + omega = 90 deg.
 *
 * @throws ModelDomainError for elements outside their ranges
 */
export function initialState(system: InteractingSystem): RelativeState {
  requirePositive('mass of the star (solar)', system.starMassSolar);
  requireFinite('epoch (d)', system.epochDays);
  const positions = new Float64Array(3 * system.companions.length);
  const velocities = new Float64Array(3 * system.companions.length);
  const plane = new Float64Array(4);
  system.companions.forEach((companion, index) => {
    requireFinite('inclination (rad)', companion.inclinationRad);
    requireFinite('position angle of the node (rad)', companion.nodeRad);
    planeState(companion, system.starMassSolar, system.epochDays, plane);
    const [along, forward, alongRate, forwardRate] = plane as unknown as [number, number, number, number];
    const cosNode = Math.cos(companion.nodeRad);
    const sinNode = Math.sin(companion.nodeRad);
    const cosTilt = Math.cos(companion.inclinationRad);
    const sinTilt = Math.sin(companion.inclinationRad);
    positions.set(
      [
        cosNode * along - sinNode * cosTilt * forward,
        sinNode * along + cosNode * cosTilt * forward,
        sinTilt * forward,
      ],
      3 * index,
    );
    velocities.set(
      [
        cosNode * alongRate - sinNode * cosTilt * forwardRate,
        sinNode * alongRate + cosNode * cosTilt * forwardRate,
        sinTilt * forwardRate,
      ],
      3 * index,
    );
  });
  return { positions, velocities };
}

/**
 * Position and velocity in the orbital plane: first axis along the node (nu + omega = 0), second where nu + omega = 90 deg.
 *
 * @param out - (x, z, dx/dt, dz/dt), au and au/d, overwritten
 * @throws ModelDomainError for elements outside their ranges
 */
export function planeState(
  companion: Pick<
    InteractingCompanion,
    'massRatio' | 'periodDays' | 'conjunctionDays' | 'eCosOmega' | 'eSinOmega'
  >,
  starMassSolar: number,
  epochDays: number,
  out: Float64Array,
): void {
  const { massRatio, periodDays, conjunctionDays, eCosOmega, eSinOmega } = companion;
  requireNotNegative('mass ratio', massRatio);
  requirePositive('period (d)', periodDays);
  requireFinite('time of conjunction (d)', conjunctionDays);
  const eccentricity = Math.hypot(eCosOmega, eSinOmega);
  requireEccentricity(eccentricity);
  const omega = eccentricity === 0 ? 0 : Math.atan2(eSinOmega, eCosOmega);
  const gm = GM_SUN_AU3_D2 * starMassSolar * (1 + massRatio);
  const axis = Math.cbrt(gm * (periodDays / TWO_PI) ** 2);
  const meanMotion = TWO_PI / periodDays;
  const atConjunction = meanFromTrueAnomaly(Math.PI / 2 - omega, eccentricity);
  const anomaly = solveKepler(atConjunction + meanMotion * (epochDays - conjunctionDays), eccentricity);
  const cosE = Math.cos(anomaly);
  const sinE = Math.sin(anomaly);
  const flattening = Math.sqrt((1 - eccentricity) * (1 + eccentricity));
  const rate = (meanMotion * axis) / (1 - eccentricity * cosE);
  const cosOmega = Math.cos(omega);
  const sinOmega = Math.sin(omega);
  const x = axis * (cosE - eccentricity);
  const y = axis * flattening * sinE;
  const u = -rate * sinE;
  const v = rate * flattening * cosE;
  out[0] = cosOmega * x - sinOmega * y;
  out[1] = sinOmega * x + cosOmega * y;
  out[2] = cosOmega * u - sinOmega * v;
  out[3] = sinOmega * u + cosOmega * v;
}
