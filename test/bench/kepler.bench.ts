/**
 * Speed of the Kepler kernel, as a ratio to one Math.sin and one Math.cos of the same angles, measured in the same run.
 * Fresh angles at every call (slices of one long array), since a repeated short array teaches the branch predictor.
 */
import { solveKeplerArray } from '../../src/orbit/index.js';

const POINTS = 100_000;
const ECCENTRICITIES = [0.1, 0.5, 0.9, 0.99];
const ROUNDS = 15;

/** Park-Miller: the angles need to be scattered, not random. */
function scatteredAngles(count: number, fromRad: number, toRad: number): Float64Array {
  let state = 20_240_229;
  return Float64Array.from({ length: count }, () => {
    state = (state * 48_271) % 2_147_483_647;
    return fromRad + ((toRad - fromRad) * state) / 2_147_483_647;
  });
}

/** Nanoseconds per point of the fastest round; rounds of all the contestants take turns. */
function fastestNsPerPoint(contestants: readonly (() => void)[]): number[] {
  const best = contestants.map(() => Infinity);
  for (let round = 0; round < ROUNDS; round++) {
    contestants.forEach((run, i) => {
      const start = performance.now();
      run();
      best[i] = Math.min(best[i]!, ((performance.now() - start) * 1e6) / POINTS);
    });
  }
  return best;
}

/** One line per workload: nanoseconds per point and ratio to sin + cos, for e = 0.1, 0.5, 0.9, 0.99. */
export function benchKepler(): string[] {
  const sinE = new Float64Array(POINTS);
  const cosE = new Float64Array(POINTS);
  const workloads = [
    { title: 'n = 100000, M in [0, 2 pi)', size: POINTS, fromRad: 0, toRad: 2 * Math.PI },
    { title: 'n = 100000, M over 1000 revolutions', size: POINTS, fromRad: -3000, toRad: 3283 },
    { title: 'n = 100, a new e at each call', size: 100, fromRad: 0, toRad: 2 * Math.PI },
    { title: 'n = 60, a new e at each call', size: 60, fromRad: 0, toRad: 2 * Math.PI },
  ];
  return workloads.map(({ title, size, fromRad, toRad }) => {
    const anglesRad = scatteredAngles(POINTS, fromRad, toRad);
    const slices: Float64Array[] = [];
    for (let start = 0; start < POINTS; start += size) slices.push(anglesRad.subarray(start, start + size));
    const trigonometry = (): void => {
      for (const slice of slices) {
        for (let i = 0; i < slice.length; i++) {
          sinE[i] = Math.sin(slice[i]!);
          cosE[i] = Math.cos(slice[i]!);
        }
      }
    };
    const kernels = ECCENTRICITIES.map((eccentricity) => (): void => {
      let fresh = eccentricity;
      for (const slice of slices) {
        fresh += 1e-9;
        solveKeplerArray(slice, fresh, sinE, cosE);
      }
    });
    const [reference, ...times] = fastestNsPerPoint([trigonometry, ...kernels]);
    if (!sinE.every(Number.isFinite) || !cosE.every(Number.isFinite)) throw new Error('non-finite result');
    const cells = times.map(
      (ns, i) => `e=${ECCENTRICITIES[i]!} ${ns.toFixed(1)} ns (${(ns / reference!).toFixed(2)}x)`,
    );
    return `kepler ${title}: sin+cos ${reference!.toFixed(1)} ns; ${cells.join(', ')}`;
  });
}
