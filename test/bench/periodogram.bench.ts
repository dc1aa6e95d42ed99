/**
 * Speed of the periodogram (floating mean, plan creation included) against that of astropy, its fast method told that the
 * grid is regular: same data, same grid, each in a process of its own and timed inside it, in turns.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { median, outputOf, outputOfScript, ROOT, verdict } from './measure.js';
import { simulatedVelocities } from './simulated.js';

export interface PeriodogramInput {
  readonly timesDays: readonly number[];
  readonly velocitiesMps: readonly number[];
  readonly sigmasMps: readonly number[];
  readonly startPerDay: number;
  readonly stepPerDay: number;
  readonly count: number;
  /** Every so many frequencies the exact power is computed too. */
  readonly stride: number;
}

interface PeerResult {
  readonly timesMs: readonly number[];
  readonly version: string;
  readonly sampled: readonly number[];
}

const PEER = join(ROOT, 'test/bench/peers/periodogram.py');
const ROUNDS = 5;
const REPEATS = 9;
const WANTED_RATIO = 3;
/** With many points the spreading of points, which both do, outweighs the transforms. */
const WANTED_RATIO_MANY = 2;
const MANY_POINTS = 10_000;
/** Ours promises 1e-11 of the sum of the amplitudes; powers of this data are ratios of such sums. */
const EXACT_WITHIN = 1e-8;
/** The peer's fast method approximates: differences of a few 1e-3 were seen. */
const FAST_WITHIN = 0.05;

/** An interpreter that has the peer, or `null`. */
function interpreter(): string | null {
  const candidates = ['python3', '/usr/bin/python3', 'python'];
  const works = (name: string): boolean =>
    spawnSync(name, ['-c', 'from astropy.timeseries import LombScargle'], { stdio: 'ignore' }).status === 0;
  return candidates.find(works) ?? null;
}

function inputFor(points: number, count: number): PeriodogramInput {
  // At most one velocity a night.
  const spanDays = Math.max(2000, 2 * points);
  const velocities = simulatedVelocities(points, spanDays);
  return {
    timesDays: Array.from(velocities.timesBjdTdb, (time) => time - velocities.timesBjdTdb[0]!),
    velocitiesMps: Array.from(velocities.velocitiesMps),
    sigmasMps: Array.from(velocities.sigmasMps),
    startPerDay: 1 / (1.5 * spanDays),
    stepPerDay: 2 / count,
    count,
    stride: 97,
  };
}

function readPowers(path: string): Float64Array {
  const bytes = readFileSync(path);
  return new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));
}

function largestDifference(a: readonly number[] | Float64Array, b: readonly number[] | Float64Array): number {
  if (a.length !== b.length) throw new Error(`${a.length} powers against ${b.length}`);
  let largest = 0;
  for (let i = 0; i < a.length; i++) largest = Math.max(largest, Math.abs(a[i]! - b[i]!));
  return largest;
}

function compare(python: string, folder: string, points: number, count: number): string {
  const given = inputFor(points, count);
  const input = join(folder, `${points}-${count}.json`);
  writeFileSync(input, JSON.stringify(given));
  const paths = { ours: join(folder, 'ours.f64'), theirs: join(folder, 'theirs.f64') };
  outputOfScript('periodogram-process.ts', input, '1', paths.ours);
  const check = JSON.parse(outputOf(python, [PEER, input, '1', paths.theirs])) as PeerResult;
  const powers = readPowers(paths.ours);
  const exact = largestDifference(
    powers.filter((_, j) => j % given.stride === 0),
    check.sampled,
  );
  const fast = largestDifference(powers, readPowers(paths.theirs));
  // Written so that a NaN is a disagreement.
  if (!(exact <= EXACT_WITHIN && fast <= FAST_WITHIN))
    throw new Error(`powers disagree: by ${exact} with direct sums, by ${fast} with the fast method`);

  const ours: (readonly number[])[] = [];
  const theirs: (readonly number[])[] = [];
  for (let round = 0; round < ROUNDS; round++) {
    const mine = outputOfScript('periodogram-process.ts', input, String(REPEATS));
    ours.push((JSON.parse(mine) as { timesMs: number[] }).timesMs);
    theirs.push((JSON.parse(outputOf(python, [PEER, input, String(REPEATS)])) as PeerResult).timesMs);
  }
  const warm = (runs: typeof ours): number => median(runs.map((times) => median(times.slice(1))));
  const cold = (runs: typeof ours): number => median(runs.map((times) => times[0]!));
  return (
    `periodogram ${points} points x ${count} frequencies: ${warm(ours).toFixed(1)} ms, astropy ${check.version} ` +
    `${warm(theirs).toFixed(1)} ms, ratio ${verdict(warm(theirs) / warm(ours), points < MANY_POINTS ? WANTED_RATIO : WANTED_RATIO_MANY, 'higher')}; first call ` +
    `${cold(ours).toFixed(1)} against ${cold(theirs).toFixed(1)} ms (${(cold(theirs) / cold(ours)).toFixed(2)}); ` +
    `largest difference of powers ${exact.toExponential(1)} from direct sums, ${fast.toExponential(1)} from its fast method`
  );
}

/** One line per size; a line that says so where the peer is not installed. */
export function benchPeriodogram(): string[] {
  const python = interpreter();
  if (python === null) return ['periodogram: skipped, no Python interpreter with astropy was found'];
  const folder = mkdtempSync(join(tmpdir(), 'tugline-bench-'));
  try {
    return [100, 1000, 20_000].map((points) => compare(python, folder, points, 100_000));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
