/**
 * Orbits laid out in their plane, star at the origin, for drawing. The observer is far away towards negative y: with the
 * argument of periastron omega of the star's orbit, the companion at true anomaly nu lies at the angle nu + omega + 180 deg,
 * so at inferior conjunction (nu + omega = 90 deg) it is straight below the star, between star and observer.
 */
import { eccentricFromTrueAnomaly } from '../../orbit/anomalies.js';
import type { OrbitElements } from '../../orbit/elements.js';
import { equalTimeSectors, positionInOrbit } from '../../orbit/geometry.js';
import type { PlanePoint } from '../../orbit/geometry.js';
import type { Solved } from '../../solving/types.js';

export const SECTOR_COUNT = 12;
const POINTS_PER_ORBIT = 360;
const ARC_POINTS_PER_SECTOR = 40;

/** One companion's path about its star. */
export interface PlannedOrbit {
  readonly letter: string;
  readonly circular: boolean;
  /** In the unit of the plan. */
  readonly semiMajorAxis: number;
  /** Closed path in the direction of motion, beginning at periastron; the last point repeats the first. */
  readonly path: readonly PlanePoint[];
  /** Outlines swept in equal times, each from the star along the path and back; first one begins at periastron. */
  readonly sectors: readonly (readonly PlanePoint[])[];
  readonly periastron: PlanePoint;
  readonly inferiorConjunction: PlanePoint;
}

export interface OrbitPlan {
  readonly orbits: readonly PlannedOrbit[];
  /** `au`, or in words what one stands for. */
  readonly unit: string;
}

/**
 * Lays out all orbits to one scale.
 *
 * @param reference - index of the companion whose semi-major axis is the unit where sizes in au are not known
 */
export function planOrbits(solved: Solved, reference: number): OrbitPlan {
  const { best, record } = solved;
  const known = best.companions.map(
    (_, index) => record.companions[index]?.derived.semiMajorAxis.value ?? null,
  );
  const inAu = known.every((value) => value !== null && value > 0 && Number.isFinite(value));
  const referencePeriod = best.companions[reference]?.periodDays ?? 1;
  const orbits = best.companions.map((orbit, index) => {
    // Kepler's third law gives the ratio of sizes when the star's mass, and so their scale, is unknown.
    const size = inAu ? known[index]! : (orbit.periodDays / referencePeriod) ** (2 / 3);
    return planOrbit(orbit, best.letters[index] ?? '', size, record.companions[index]?.circular === true);
  });
  const unit = inAu ? 'au' : `semi-major axes of ${best.letters[reference] ?? 'the companion'}`;
  return { orbits, unit };
}

/** Lays out one orbit of the given semi-major axis. */
export function planOrbit(
  orbit: OrbitElements,
  letter: string,
  semiMajorAxis: number,
  circular: boolean,
): PlannedOrbit {
  const e = orbit.eccentricity;
  const cos = -Math.cos(orbit.argPeriastronStarRad) * semiMajorAxis;
  const sin = -Math.sin(orbit.argPeriastronStarRad) * semiMajorAxis;
  const place = (eccentricAnomalyRad: number): PlanePoint => {
    const { x, y } = positionInOrbit(eccentricAnomalyRad, e);
    return { x: x * cos - y * sin, y: x * sin + y * cos };
  };
  const along = (from: number, to: number, steps: number): PlanePoint[] =>
    Array.from({ length: steps + 1 }, (_, step) => place(from + ((to - from) * step) / steps));
  const limits = equalTimeSectors(e, SECTOR_COUNT);
  const conjunction = eccentricFromTrueAnomaly(Math.PI / 2 - orbit.argPeriastronStarRad, e);
  return {
    letter,
    circular,
    semiMajorAxis,
    path: along(0, 2 * Math.PI, POINTS_PER_ORBIT),
    sectors: Array.from({ length: SECTOR_COUNT }, (_, sector) => [
      { x: 0, y: 0 },
      ...along(limits[sector]!, limits[sector + 1]!, ARC_POINTS_PER_SECTOR),
    ]),
    periastron: place(0),
    inferiorConjunction: place(conjunction),
  };
}

/** The square that holds the chosen orbits and the star, with a margin. */
export function squareView(orbits: readonly PlannedOrbit[]): {
  x: { min: number; max: number };
  y: { min: number; max: number };
} {
  let [left, right, bottom, top] = [0, 0, 0, 0];
  for (const { path } of orbits) {
    for (const { x, y } of path) {
      left = Math.min(left, x);
      right = Math.max(right, x);
      bottom = Math.min(bottom, y);
      top = Math.max(top, y);
    }
  }
  const half = 0.58 * Math.max(right - left, top - bottom, 1e-12);
  const [x, y] = [(left + right) / 2, (bottom + top) / 2];
  return { x: { min: x - half, max: x + half }, y: { min: y - half, max: y + half } };
}
