/** Simulated velocities for the benches: one companion, nightly sampling with gaps, seeded. */
import { RandomStream } from '../../src/numerics/random.js';
import type { VelocitySet } from '../../src/observations/types.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';

const FIRST_NIGHT = 2460000;
const SEED = 20261201;

/** @param count - velocities, at most one a night over `spanDays` */
export function simulatedVelocities(count: number, spanDays: number): VelocitySet {
  const random = RandomStream.fromSeed(SEED);
  const nights = new Set<number>([0, spanDays - 1]);
  while (nights.size < count) nights.add(random.integerBelow(spanDays));
  const timesBjdTdb = Float64Array.from(
    nights,
    (night) => FIRST_NIGHT + night + 0.5 + 0.1 * random.normal(),
  ).sort();
  const periodDays = 41.6;
  const companion = {
    periodDays,
    eccentricity: 0.35,
    argPeriastronStarRad: 2.2,
    timePeriastronBjdTdb: FIRST_NIGHT + 0.3 * periodDays,
    semiAmplitudeMps: 25,
  };
  const model = evaluateVelocity(
    {
      companions: [companion],
      letters: ['b'],
      zeroPointsMps: new Float64Array(1),
      jittersMps: new Float64Array(1),
      epochBjdTdb: FIRST_NIGHT,
      slopeMpsPerDay: 0,
      curvatureMpsPerDay2: 0,
    },
    timesBjdTdb,
  );
  const sigmasMps = Float64Array.from({ length: count }, () => 3 * Math.exp(0.2 * random.normal()));
  return {
    count,
    timesBjdTdb,
    velocitiesMps: model.map((velocity, i) => velocity + 7 + sigmasMps[i]! * random.normal()),
    sigmasMps,
    instrumentOf: new Uint16Array(count),
    instruments: ['bench'],
    tableOf: new Uint16Array(count),
    lines: Uint32Array.from({ length: count }, (_, i) => i + 2),
    tables: [{ path: 'bench.csv', sha256: '', rows: count, used: count }],
    timeScale: 'BJD_TDB',
    notices: [],
  };
}

/** The same as the text of a table. */
export function tableText(velocities: VelocitySet): string {
  const rows = Array.from(
    velocities.timesBjdTdb,
    (time, i) => `${time},${velocities.velocitiesMps[i]!},${velocities.sigmasMps[i]!}`,
  );
  return ['BJD_TDB,RV (m/s),RV error (m/s)', ...rows, ''].join('\n');
}
