import { beforeAll, describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { solveCase } from '../../../src/solving/solve-case.js';
import { solveWithPosterior, type PosteriorSolveOptions } from '../../../src/solving/solve-with-posterior.js';
import type { Solved } from '../../../src/solving/types.js';
import { buildProgram } from '../../interface/built-program.js';
import { expectWithin } from '../../support/expect-within.js';
import { BARE_CASE, OPTIONS, simulated } from '../helpers.js';

const CHOICES: PosteriorSolveOptions = { ...OPTIONS, quick: false, threads: 0, drawLimit: 10_000 };

/** Nights of one site, `count` of `nights`, at nearly the same hour: daily aliases are strong. */
function nightly(random: RandomStream, count: number, nights: number): Float64Array {
  const chosen = new Set<number>();
  while (chosen.size < count) chosen.add(random.integerBelow(nights));
  return Float64Array.from([...chosen], (night) => 2459000.5 + night + 0.02 * random.normal()).sort();
}

function eccentricSet(): ReturnType<typeof simulated> {
  const random = RandomStream.fromSeed(31);
  const times = Float64Array.from({ length: 60 }, () => 2459000 + random.uniformBetween(0, 700)).sort();
  return simulated(random, {
    times,
    sigmaMps: 3,
    companions: [
      { periodDays: 37.3, eccentricity: 0.4, argPeriastronStarRad: 1.1, timePeriastronBjdTdb: 2459011, semiAmplitudeMps: 40 },
    ],
  }); // prettier-ignore
}

describe('solveWithPosterior', () => {
  it('converges on an ordinary orbit, its intervals near those of the curvature', async () => {
    const velocities = eccentricSet();
    const full = (await solveWithPosterior(BARE_CASE, velocities, CHOICES)).record;
    const quick = solveCase(BARE_CASE, velocities, OPTIONS).record;
    expect(full.posterior).toMatchObject({ status: 'converged', chains: 4, divergences: 0 });
    expect(full.posterior!.rHatMax).toBeLessThan(1.01);
    expect(Math.min(full.posterior!.bulkEssMin, full.posterior!.tailEssMin)).toBeGreaterThan(400);
    expect(full.posterior!.modes).toHaveLength(1);
    for (const key of ['period', 'eccentricity', 'semiAmplitude', 'argumentOfPeriastron'] as const) {
      const sampled = full.companions[0]!.elements[key];
      const curved = quick.companions[0]!.elements[key];
      expect(sampled.value).toBe(curved.value);
      // 60 velocities, K = 13 sigma: the posterior is close to a Gaussian whose jitter is integrated over.
      expectWithin(sampled.sigma! / curved.sigma!, 1.05, {
        abs: 0.15,
        unit: '1',
        why: 'jitter integrated over; 4000 draws',
      });
    }
    // With and without the companion: a gain of ln L this large decides, whatever the priors.
    expect(full.companions[0]!.evidence.marginal!.logBayesFactor).toBeGreaterThan(50);
    expect(full.companions[0]!.evidence.eccentricity!.marginal!.logBayesFactor).toBeGreaterThan(5);
    expect(quick.posterior).toBeNull();
  });

  it('samples aliases as modes of their own and never mixes them into a mean', async () => {
    const random = RandomStream.fromSeed(11);
    const velocities = simulated(random, {
      times: nightly(random, 16, 60),
      sigmaMps: 6,
      companions: [
        { periodDays: 5.3, eccentricity: 0, argPeriastronStarRad: 1.57, timePeriastronBjdTdb: 2459001, semiAmplitudeMps: 25 },
      ],
    }); // prettier-ignore
    const { record, posterior } = await solveWithPosterior(
      { ...BARE_CASE, companions: 1 },
      velocities,
      CHOICES,
    );
    const modes = record.posterior!.modes;
    expect(modes.length).toBeGreaterThan(1);
    expect(modes.reduce((sum, mode) => sum + mode.weight, 0)).toBeCloseTo(1, 12);
    expect([...modes].sort((a, b) => b.weight - a.weight)).toEqual(modes);
    const period = record.companions[0]!.elements.period;
    expectWithin(period.value!, modes[0]!.periods[0]!, {
      rel: 1e-9,
      unit: 'd',
      why: 'the first mode is the reported one',
    });
    const draws = posterior!.columns.find((column) => column.key === 'companions.b.elements.period')!.values;
    // All draws stay within their own mode: the next alias is more than 20 % away.
    expect(Math.max(...draws) / Math.min(...draws)).toBeLessThan(1.1);
    expect(Math.abs(modes[1]!.periods[0]! / period.value! - 1)).toBeGreaterThan(0.2);
  });

  it('samples a partial orbit into its long tail', async () => {
    const random = RandomStream.fromSeed(5);
    const times = Float64Array.from({ length: 60 }, () => 2459000 + random.uniformBetween(0, 1200)).sort();
    const velocities = simulated(random, {
      times,
      sigmaMps: 3,
      companions: [
        { periodDays: 2500, eccentricity: 0.35, argPeriastronStarRad: 1, timePeriastronBjdTdb: 2459500, semiAmplitudeMps: 60 },
      ],
    }); // prettier-ignore
    const { record } = await solveWithPosterior(
      { ...BARE_CASE, companions: 1, drift: 'none' },
      velocities,
      CHOICES,
    );
    const { period, semiAmplitude } = record.companions[0]!.elements;
    expect(record.posterior!.status).toBe('converged');
    expect(period.upper! - period.value!).toBeGreaterThan(period.value! - period.lower!);
    expect(period.lower! - 3 * (period.value! - period.lower!)).toBeLessThan(2500);
    expect(period.upper! + 3 * (period.upper! - period.value!)).toBeGreaterThan(2500);
    expect(semiAmplitude.sigma! / semiAmplitude.value!).toBeLessThan(0.1);
    expect(record.warnings.map((warning) => warning.code)).toContain('period-longer-than-data');
  });

  it('stays inside a stated range of the jitter, also where the data would have it elsewhere', async () => {
    const velocities = eccentricSet();
    const [name] = velocities.instruments as [string];
    for (const [low, high] of [
      [5.1, 7.3],
      [0, 0.05],
      [4, 9],
    ] as const) {
      const instruments = {
        [name]: { zeroPointMps: null, jitterMps: { kind: 'range', low, high } as const },
      };
      const { record } = await solveWithPosterior({ ...BARE_CASE, instruments }, velocities, CHOICES);
      const { jitter } = record.velocity.instruments[0]!;
      expect(record.posterior!.status).toBe('converged');
      expect(jitter.lower!).toBeGreaterThanOrEqual(low);
      expect(jitter.upper!).toBeLessThanOrEqual(high);
      // The data want no jitter: the draws crowd at the lower end, over more than a sliver of the range.
      expect(jitter.upper! - jitter.lower!).toBeGreaterThan(0.05 * (high - low));
    }
  });

  it('stops when it is told to and says so; a limit that is too low is called unconverged', async () => {
    const velocities = eccentricSet();
    const stop = new AbortController();
    let asked = false;
    const stopped = await solveWithPosterior(BARE_CASE, velocities, {
      ...CHOICES,
      signal: stop.signal,
      onProgress: (stage) => {
        if (stage !== 'sampling' || asked) return;
        asked = true;
        stop.abort();
      },
    });
    // Whatever the first batch gave is kept; it may have converged already.
    expect(['converged', 'interrupted']).toContain(stopped.record.posterior!.status);
    expect(stopped.posterior!.drawsPerChain).toBe(1000);
    const small = eccentricSet();
    const few = { ...small, ...cut(small, 9) };
    const limited = await solveWithPosterior({ ...BARE_CASE, companions: 1 }, few, {
      ...CHOICES,
      drawLimit: 1000,
    });
    if (limited.record.posterior!.status !== 'converged') {
      expect(limited.record.posterior!.status).toBe('draw-limit');
      const { rHatMax, bulkEssMin, tailEssMin } = limited.record.posterior!;
      expect(rHatMax >= 1.01 || Math.min(bulkEssMin, tailEssMin) <= 400).toBe(true);
    }
  });
});

function cut(set: ReturnType<typeof simulated>, count: number): Partial<ReturnType<typeof simulated>> {
  return {
    count,
    timesBjdTdb: set.timesBjdTdb.slice(0, count),
    velocitiesMps: set.velocitiesMps.slice(0, count),
    sigmasMps: set.sigmasMps.slice(0, count),
    instrumentOf: set.instrumentOf.slice(0, count),
    tableOf: set.tableOf.slice(0, count),
    lines: set.lines.slice(0, count),
  };
}

describe('threads', () => {
  beforeAll(buildProgram, 60_000);

  it('change nothing in the draws: 0, 1, 2 and 4 of them give the same record', async () => {
    const path = new URL('../../../dist/solving/solve-with-posterior.js', import.meta.url).href;
    const built = (await import(path)) as { solveWithPosterior: typeof solveWithPosterior };
    const velocities = eccentricSet();
    const solve = (threads: number): Promise<Solved> =>
      built.solveWithPosterior(BARE_CASE, velocities, { ...CHOICES, threads });
    const inline = await solve(0);
    for (const threads of [1, 2, 4]) {
      const other = await solve(threads);
      expect(other.record).toEqual(inline.record);
      expect(other.posterior).toEqual(inline.posterior);
    }
  });
});
