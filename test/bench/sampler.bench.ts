/**
 * Effective samples per second of the posterior of one companion (60 velocities, jitter and zero point free) against a
 * general ensemble sampler with a numpy model: same posterior, same run, smallest effective number over the elements.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { RandomStream } from '../../src/numerics/random.js';
import { bulkEss } from '../../src/numerics/sampling/diagnostics.js';
import { NutsChain } from '../../src/numerics/sampling/nuts.js';
import { densityOf, type DensityRecipe } from '../../src/solving/posterior/chain-job.js';
import { curvatureOfDensity } from '../../src/solving/posterior/density-curvature.js';
import { scalesOf } from '../../src/solving/posterior/sample-posterior.js';
import { settleCase } from '../../src/solving/settle.js';
import { BARE_CASE } from '../challenge/evaluate.js';
import { median, outputOf, ROOT, verdict } from './measure.js';
import { simulatedVelocities } from './simulated.js';

const PEER = join(ROOT, 'test/bench/peers/ensemble.py');
const WANTED_RATIO = 30;
const ROUNDS = 3;
const CHAINS = 4;
const DRAWS = 3000;

interface PeerResult {
  readonly effectivePerSecond: number;
  readonly means: readonly number[];
  readonly sigmas: readonly number[];
  readonly version: string;
}

function interpreter(): string | null {
  const works = (name: string): boolean =>
    spawnSync(name, ['-c', 'import emcee'], { stdio: 'ignore' }).status === 0;
  return ['python3', '/usr/bin/python3', 'python'].find(works) ?? null;
}

/** One run of ours: warm-up included in the time, chains one after another in one thread. */
function ours(
  recipe: DensityRecipe,
  start: Float64Array,
  seed: number,
): { perSecond: number; means: number[] } {
  const began = performance.now();
  const density = densityOf(recipe);
  const covariance = curvatureOfDensity(density, start);
  const { size } = density;
  const chains = Array.from({ length: CHAINS }, (_, chain) => {
    const runner = new NutsChain(
      density,
      { start, covariance, warmup: 300 },
      RandomStream.fromSeed(seed, chain),
    );
    runner.warmUp();
    return runner.draw(DRAWS).positions;
  });
  const seconds = (performance.now() - began) / 1000;
  const rows = chains.map((positions) =>
    Array.from({ length: DRAWS }, (_, d) => density.judged(positions.subarray(d * size, (d + 1) * size))),
  );
  const columns = rows[0]![0]!.length;
  let smallest = Infinity;
  for (let k = 0; k < columns; k++) {
    const series = rows.map((own) => Float64Array.from(own, (row) => row[k]!));
    if (series.every((chain) => chain.every((value) => value === series[0]![0]))) continue;
    smallest = Math.min(smallest, bulkEss(series));
  }
  const means = Array.from({ length: size }, (_, j) => {
    let sum = 0;
    for (const positions of chains) for (let d = 0; d < DRAWS; d++) sum += positions[d * size + j]!;
    return sum / (CHAINS * DRAWS);
  });
  return { perSecond: smallest / seconds, means };
}

export function benchSampler(): string[] {
  const velocities = simulatedVelocities(60, 700);
  const settled = settleCase(BARE_CASE, velocities, () => undefined);
  const { explorer, best } = settled;
  const scales = scalesOf(settled, BARE_CASE);
  const recipe: DensityRecipe = {
    kind: 'velocities',
    data: explorer.builder.data,
    instruments: velocities.instruments,
    theCase: BARE_CASE,
    epochBjdTdb: explorer.builder.epochBjdTdb,
    plan: best.plan,
    scales,
  };
  const portable = explorer.portable(best);
  const start = densityOf(recipe).position(portable);
  const python = interpreter();
  const folder = mkdtempSync(join(tmpdir(), 'tugline-bench-'));
  const [companion] = portable.companions;
  const root = Math.sqrt(companion!.eccentricity);
  const omega = companion!.argPeriastronStarRad;
  writeFileSync(
    join(folder, 'problem.json'),
    JSON.stringify({
      timesDays: Array.from(recipe.data.timesDays),
      velocitiesMps: Array.from(recipe.data.velocitiesMps),
      sigmasMps: Array.from(recipe.data.sigmasMps),
      instrumentIndices: Array.from(recipe.data.instrumentOf),
      referenceTimeDays: 0,
      start: [
        start[0],
        root * Math.cos(omega),
        root * Math.sin(omega),
        start[1],
        start[4],
        start[5],
        start[6],
      ],
      startSigmas: [1e-4, 0.01, 0.01, 0.01, 0.01, 0.1, 0.1],
      ranges: {
        logPeriod: [Math.log(scales.shortestPeriodDays), Math.log(scales.longestPeriodDays)],
        logSemiAmplitude: [-20, Math.log(scales.largestAmplitudeMps)],
        zeroPointMps: [-scales.zeroPointHalfWidthMps, scales.zeroPointHalfWidthMps],
        jitterCoordinate: [0, Math.asinh(scales.largestJitterMps / scales.jitterScaleMps)],
      },
      amplitudeScaleMps: scales.amplitudeScaleMps,
      jitterScaleMps: scales.jitterScaleMps,
    }),
  );
  const lines: string[] = [];
  const mine: number[] = [];
  const peers = { walkers: [] as number[], all: [] as number[] };
  let version = '';
  for (let round = 0; round < ROUNDS; round++) {
    mine.push(ours(recipe, start, round + 1).perSecond);
    if (python === null) continue;
    for (const mode of ['walkers', 'all'] as const) {
      const steps = mode === 'all' ? '20000' : '4000';
      const result = JSON.parse(
        outputOf(python, [PEER, join(folder, 'problem.json'), steps, String(round + 1), mode]),
      ) as PeerResult;
      peers[mode].push(result.effectivePerSecond);
      version = result.version;
    }
  }
  rmSync(folder, { recursive: true });
  lines.push(
    `sampler, 60 velocities, 7 coordinates: ${median(mine).toFixed(0)} effective samples/s in one thread, warm-up included`,
  );
  if (python === null) lines.push('  general ensemble sampler: skipped, no Python with emcee here');
  else {
    lines.push(
      `  general ensemble sampler (emcee ${version}), model called per walker: ${median(peers.walkers).toFixed(0)}/s; ratio ${verdict(median(mine) / median(peers.walkers), WANTED_RATIO, 'higher')}`,
      `  the same with all walkers in one call: ${median(peers.all).toFixed(0)}/s; ratio ${(median(mine) / median(peers.all)).toFixed(1)}`,
    );
  }
  return lines;
}
