/**
 * Speed of the limb-darkened flux with its four derivatives against the same formula vectorised in numpy, with scipy's
 * elliptic integrals: same separations, each in a process of its own and timed inside it, in turns.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { median, outputOf, outputOfScript, ROOT, verdict } from './measure.js';

const PEER = join(ROOT, 'test/bench/peers/transit_flux.py');
const POINTS = 1_000_000;
const ROUNDS = 3;
const REPEATS = 5;
const WANTED_RATIO = 5;
/** Where elliptic integrals of three kinds are subtracted, the peer loses digits that ours keeps. */
const WITHIN = 1e-7;

/** An interpreter that has the peer's libraries, or `null`. */
function interpreter(): string | null {
  const candidates = ['python3', '/usr/bin/python3', 'python'];
  const works = (name: string): boolean =>
    spawnSync(name, ['-c', 'from scipy.special import elliprj'], { stdio: 'ignore' }).status === 0;
  return candidates.find(works) ?? null;
}

function read(path: string): Float64Array {
  const bytes = readFileSync(path);
  return new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));
}

/** Largest difference of flux, and of any derivative. */
function differences(ours: Float64Array, theirs: Float64Array): [flux: number, derivative: number] {
  if (ours.length !== theirs.length) throw new Error(`${ours.length} numbers against ${theirs.length}`);
  let [flux, derivative] = [0, 0];
  ours.forEach((value, i) => {
    const difference = Math.abs(value - theirs[i]!);
    if (Number.isNaN(difference)) flux = NaN;
    else if (i % 5 === 0) flux = Math.max(flux, difference);
    else derivative = Math.max(derivative, difference);
  });
  return [flux, derivative];
}

function compare(python: string, folder: string, radiusRatio: number): string {
  const words = [String(POINTS), String(radiusRatio)];
  const paths = { ours: join(folder, 'ours.f64'), theirs: join(folder, 'theirs.f64') };
  outputOfScript('transit-flux-process.ts', ...words, '1', paths.ours);
  outputOf(python, [PEER, ...words, '1', paths.theirs]);
  const [flux, derivative] = differences(read(paths.ours), read(paths.theirs));
  if (!(flux <= WITHIN && derivative <= WITHIN))
    throw new Error(`the two disagree: flux by ${flux}, derivatives by ${derivative}`);
  const ours: number[] = [];
  const theirs: number[] = [];
  let version = '';
  for (let round = 0; round < ROUNDS; round++) {
    const mine = JSON.parse(outputOfScript('transit-flux-process.ts', ...words, String(REPEATS))) as {
      timesMs: number[];
    };
    const peer = JSON.parse(outputOf(python, [PEER, ...words, String(REPEATS)])) as {
      timesMs: number[];
      version: string;
    };
    version = peer.version;
    ours.push(median(mine.timesMs.slice(1)));
    theirs.push(median(peer.timesMs.slice(1)));
  }
  const nsPerPoint = (timesMs: readonly number[]): number => (median(timesMs) * 1e6) / POINTS;
  const ratio = nsPerPoint(theirs) / nsPerPoint(ours);
  return (
    `transit-flux ${POINTS} points, radius ratio ${radiusRatio}, flux and four derivatives: ${nsPerPoint(ours).toFixed(0)} ns a point, ` +
    `numpy with scipy ${version} ${nsPerPoint(theirs).toFixed(0)} ns, ratio ${verdict(ratio, WANTED_RATIO, 'higher')}; ` +
    `largest difference ${flux.toExponential(1)} in flux, ${derivative.toExponential(1)} in a derivative`
  );
}

/** One line per radius ratio; a line that says so where the peer is not installed. */
export function benchTransitFlux(): string[] {
  const python = interpreter();
  if (python === null) return ['transit-flux: skipped, no Python interpreter with scipy was found'];
  const folder = mkdtempSync(join(tmpdir(), 'tugline-bench-'));
  try {
    return [0.1, 0.4].map((radiusRatio) => compare(python, folder, radiusRatio));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
