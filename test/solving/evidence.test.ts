import { beforeAll, describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import { fSurvival } from '../../src/numerics/special-functions.js';
import type { Case, VelocitySet } from '../../src/observations/types.js';
import { powerOfGain } from '../../src/solving/false-alarm.js';
import { findCompanions } from '../../src/solving/find-companions.js';
import { ACCEPTED, CANDIDATE, clears } from '../../src/solving/addition.js';
import { permutationFalseAlarm, permutedMaxima } from '../../src/solving/permutations.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { searchPeriods } from '../../src/solving/search-periods.js';
import { solveCase } from '../../src/solving/solve-case.js';
import type { Solved } from '../../src/solving/types.js';
import fits from '../reference/fits/fits.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, OPTIONS, scatteredTimes, simulated } from './helpers.js';

const CASE: Case = { ...BARE_CASE, drift: 'none' };

function data(seed: number, eccentricity: number, semiAmplitudeMps: number): VelocitySet {
  const random = RandomStream.fromSeed(seed);
  return simulated(random, {
    times: scatteredTimes(random, 50, 400),
    companions: [{ periodDays: 38, eccentricity, argPeriastronStarRad: 1, timePeriastronBjdTdb: 2459010, semiAmplitudeMps }],
    sigmaMps: 2,
    zeroPointsMps: [0, 30],
  }); // prettier-ignore
}

describe('evidence of a companion', () => {
  let solved: Solved;
  let set: VelocitySet;
  beforeAll(() => {
    set = data(81, 0.12, 12);
    solved = solveCase(CASE, set, OPTIONS);
  });

  it('is the difference of two solutions of the same data, with and without it', () => {
    const without = solveCase({ ...CASE, companions: 0 }, set, OPTIONS).record.fit;
    const { evidence } = solved.record.companions[0]!;
    const limit = { abs: 1e-4, unit: 'ln L', why: 'each fit ends within 1e-6' };
    expectWithin(evidence.deltaLogLikelihood, solved.record.fit.logLikelihood - without.logLikelihood, limit);
    expectWithin(evidence.deltaBic, without.bic - solved.record.fit.bic, limit);
    expect(evidence.deltaBic).toBeGreaterThan(10);
    expect(evidence.falseAlarmProbability).toBeLessThan(1e-3);
  });

  it('circular against eccentric: the difference of two solutions, both in the record', () => {
    const [circular, eccentric] = [true, false].map(
      (shape) => solveCase({ ...CASE, companions: 1, circular: shape }, set, OPTIONS).record,
    );
    const versus = solved.record.companions[0]!.evidence.eccentricity!;
    const limit = { abs: 1e-4, unit: 'ln L', why: 'each fit ends within 1e-6' };
    expectWithin(
      versus.deltaLogLikelihood,
      eccentric!.fit.logLikelihood - circular!.fit.logLikelihood,
      limit,
    );
    expectWithin(versus.deltaBic, circular!.fit.bic - eccentric!.fit.bic, limit);
    expect(solved.record.companions[0]!.circular).toBe(versus.deltaBic <= 0);
    if (versus.eccentricFit !== null) {
      const other = eccentric!.companions[0]!.elements.eccentricity;
      expectWithin((versus.eccentricFit.eccentricity.value! - other.value!) / other.sigma!, 0, {
        abs: 1e-2,
        unit: 'sigma',
        why: 'the same fit',
      });
    }
  });

  it('the probability of Lucy & Sweeney is that of F(2, n - M)', () => {
    const { chiSquareRatio, dataCount, parameterCount, probability } = fits.lucySweeney;
    const identity = (ratio: number, n: number, m: number): number =>
      fSurvival((n - m) * (1 / ratio - 1) * 0.5, 2, n - m);
    // First the identity itself against scipy's F distribution, then what the record says.
    expectWithin(identity(chiSquareRatio, dataCount, parameterCount), probability, {
      rel: 1e-10,
      unit: '1',
      why: 'fits.json, scipy.stats.f',
    });
    const { deltaLogLikelihood, lucySweeneyProbability } =
      solved.record.companions[0]!.evidence.eccentricity!;
    const n = set.count;
    // Two zero points and five elements; with errors scaled to the residuals chi^2 falls by exp(-2 gain/n).
    expectWithin(lucySweeneyProbability!, identity(Math.exp((-2 * deltaLogLikelihood) / n), n, 7), {
      rel: 1e-9,
      unit: '1',
      why: 'the same statistic',
    });
  });

  it('a plainly eccentric orbit is called so, a circular one is not', () => {
    const plain = solveCase(CASE, data(82, 0.5, 30), OPTIONS).record.companions[0]!;
    expect(plain.circular).toBe(false);
    expect(plain.evidence.eccentricity!.lucySweeneyProbability).toBeLessThan(1e-6);
    const round = solveCase(CASE, data(83, 0, 30), OPTIONS).record.companions[0]!;
    expect(round.circular).toBe(true);
    expect(round.evidence.eccentricity!.lucySweeneyProbability).toBeGreaterThan(0.01);
    expect(round.evidence.eccentricity!.eccentricFit!.eccentricity.value).toBeLessThan(0.1);
  });
});

describe('the thresholds', () => {
  it('ask for both a false-alarm probability and a BIC', () => {
    const { explorer } = explorerFor(CASE, data(81, 0.12, 12));
    const { addition } = findCompanions(explorer, () => undefined).stages[0]!;
    const base = explorer.fit({ companions: [], drift: 0 }, explorer.builder.emptyPoint());
    expectWithin(addition!.deltaBic, base.fit.bic - addition!.planned.fit.bic, {
      abs: 1e-4,
      unit: '1',
      why: 'each fit ends within 1e-6',
    });
    const both = { ...addition!, falseAlarmProbability: 9e-4, deltaBic: 10.1 };
    expect(clears(both, ACCEPTED)).toBe(true);
    expect(clears({ ...both, deltaBic: 9.9 }, ACCEPTED)).toBe(false);
    expect(clears({ ...both, falseAlarmProbability: 1.1e-3 }, ACCEPTED)).toBe(false);
    const weak = { ...addition!, falseAlarmProbability: 9e-3, deltaBic: 5.1 };
    expect(clears(weak, ACCEPTED)).toBe(false);
    expect(clears(weak, CANDIDATE)).toBe(true);
    expect(clears({ ...weak, deltaBic: 4.9 }, CANDIDATE)).toBe(false);
  });
});

describe('rivals', () => {
  /** Thirty nights at nearly one hour: a period of 3.7 d and its day aliases can hardly be told apart. */
  function nightly(seed: number): VelocitySet {
    const random = RandomStream.fromSeed(seed);
    const times = Float64Array.from(
      { length: 30 },
      (_, i) => 2459000.5 + 2 * i + random.integerBelow(2) + 0.01 * random.normal(),
    );
    const orbit = {
      periodDays: 3.7,
      eccentricity: 0,
      argPeriastronStarRad: Math.PI / 2,
      timePeriastronBjdTdb: 2459001,
      semiAmplitudeMps: 12,
    };
    return simulated(random, { times: times.sort(), companions: [orbit], sigmaMps: 3 });
  }
  const circular: Case = { ...CASE, circular: true, companions: 1 };

  it('are what a solution confined to their period reaches, and none beats the reported one', () => {
    const set = nightly(93);
    const { record } = solveCase(circular, set, OPTIONS);
    const { rivals } = record.companions[0]!;
    expectWithin(record.companions[0]!.elements.period.value!, 3.7, {
      abs: 0.03,
      unit: 'd',
      why: 'about P^2/(10 span)',
    });
    expect(rivals.map(({ kind }) => kind).some((kind) => kind.includes('-day alias'))).toBe(true);
    const drops = rivals.map(({ deltaLogLikelihood }) => deltaLogLikelihood);
    expect(drops).toEqual([...drops].sort((a, b) => b - a));
    let compared = 0;
    for (const { period, deltaLogLikelihood } of rivals) {
      expect(deltaLogLikelihood).toBeLessThan(1e-3);
      if (period < 0.6) continue;
      const half = 0.3 / 60;
      const range = { low: 1 / (1 / period + half), high: 1 / (1 / period - half) };
      const confined = solveCase({ ...circular, periodRangeDays: range }, set, OPTIONS).record;
      expectWithin(confined.companions[0]!.elements.period.value!, period, {
        rel: 1e-4,
        unit: 'd',
        why: 'the same maximum',
      });
      expectWithin(confined.fit.logLikelihood - record.fit.logLikelihood, deltaLogLikelihood, {
        abs: 1e-3,
        unit: 'ln L',
        why: 'each fit ends within 1e-6',
      });
      compared++;
    }
    expect(compared).toBeGreaterThan(1);
  });

  it('outside the range that is searched never become the solution, however well they fit', () => {
    for (const low of [null, 2]) {
      const { record } = solveCase(
        { ...circular, periodRangeDays: { low, high: null } },
        nightly(89),
        OPTIONS,
      );
      const { elements, rivals } = record.companions[0]!;
      expect(elements.period.value).toBeGreaterThanOrEqual(low ?? 0.5);
      // Periods of 0.3 d and less fit these nights as well: they are told.
      expect(rivals.some(({ period }) => period < 0.5)).toBe(true);
    }
  });
});

describe('false-alarm probability by permutation', () => {
  const narrow: Case = { ...CASE, periodRangeDays: { low: 2, high: 200 } };

  it('is (exceeding + 1)/(count + 1): small for a signal, 1 for no power, never 0', () => {
    const maxima = Float64Array.of(0.1, 0.4, 0.3, 0.2);
    expect(permutationFalseAlarm(maxima, 0.25)).toEqual({ probability: 3 / 5, count: 4, exceeding: 2 });
    expect(permutationFalseAlarm(maxima, 0.4)).toMatchObject({ probability: 2 / 5 });
    expect(permutationFalseAlarm(maxima, 0.41)).toMatchObject({ probability: 1 / 5 });
    expect(permutationFalseAlarm(maxima, 0)).toMatchObject({ probability: 1 });
    const { explorer } = explorerFor(narrow, data(84, 0, 15));
    const base = explorer.fit({ companions: [], drift: 0 }, explorer.builder.emptyPoint());
    const { power } = explorer.search(base, explorer.range, 0).peaks[0]!;
    expect(permutationFalseAlarm(permutedMaxima(explorer, base, 60, 5), power)).toMatchObject({
      exceeding: 0,
    });
  });

  it('draws are fixed by the seed', () => {
    const { explorer } = explorerFor(narrow, data(84, 0, 15));
    const base = explorer.fit({ companions: [], drift: 0 }, explorer.builder.emptyPoint());
    const first = permutedMaxima(explorer, base, 10, 5);
    expect(permutedMaxima(explorer, base, 10, 5)).toEqual(first);
    expect(permutedMaxima(explorer, base, 10, 6)).not.toEqual(first);
  });

  it('exchanges residuals in units of their errors: one poor velocity does not spoil it', () => {
    const random = RandomStream.fromSeed(90);
    const plain = simulated(random, { times: scatteredTimes(random, 60, 300), companions: [], sigmaMps: 1 });
    const factor = (i: number): number => (i === 30 ? 1000 : 1);
    const mixed = {
      ...plain,
      velocitiesMps: plain.velocitiesMps.map((v, i) => v * factor(i)),
      sigmasMps: plain.sigmasMps.map((s, i) => s * factor(i)),
    };
    const { explorer } = explorerFor(narrow, mixed);
    const base = explorer.fit({ companions: [], drift: 0 }, explorer.builder.emptyPoint());
    const { levels } = searchPeriods(narrow, mixed, { seed: 1, permutations: 0 }).stage;
    const { probability } = permutationFalseAlarm(permutedMaxima(explorer, base, 200, 6), levels[0]!.power);
    expect(probability).toBeLessThan(0.1 + 3 * Math.sqrt((0.1 * 0.9) / 200));
    // Carried about in m/s, its residual would be one spike that no sinusoid fits, and every maximum would be low.
    expect(probability).toBeGreaterThan(0.02);
  });

  it('agrees with the analytic bound on noise, which is not below it by more than the counting error', () => {
    const random = RandomStream.fromSeed(85);
    const noise = simulated(random, {
      times: scatteredTimes(random, 60, 300),
      companions: [],
      sigmaMps: 3,
      zeroPointsMps: [0, 20],
    });
    const { explorer } = explorerFor(narrow, noise);
    const base = explorer.fit({ companions: [], drift: 0 }, explorer.builder.emptyPoint());
    const { levels } = searchPeriods(narrow, noise, { seed: 1, permutations: 0 }).stage;
    expect(levels[0]!.falseAlarmProbability).toBe(0.1);
    const count = 400;
    const { probability } = permutationFalseAlarm(permutedMaxima(explorer, base, count, 6), levels[0]!.power);
    // 400 permutations: 0.1 +- 0.015; the bound counts every up-crossing, so that it may only be above.
    expect(probability).toBeLessThan(0.1 + 3 * Math.sqrt((0.1 * 0.9) / count));
    expect(probability).toBeGreaterThan(0.02);
  });
});

describe('searchPeriods', () => {
  it('finds the period of a signal, with its alias named, and none in noise', () => {
    const report = searchPeriods(CASE, data(86, 0, 20), { seed: 1, permutations: 0 });
    const [top] = report.stage.peaks;
    expectWithin(top!.periodDays, 38, { abs: 0.5, unit: 'd', why: 'P^2/(10 span)' });
    expect(top!.falseAlarmProbability).toBeLessThan(1e-6);
    expectWithin(top!.semiAmplitudeMps, 20, { abs: 2, unit: 'm/s', why: 'five times sigma sqrt(2/n)' });
    expectWithin(powerOfGain(top!.deltaLogLikelihood, 50), top!.power, {
      rel: 1e-10,
      unit: '1',
      why: 'closed form',
    });
    expect(report.method).toMatch(/Baluev 2008/);
    const random = RandomStream.fromSeed(87);
    const noise = simulated(random, { times: scatteredTimes(random, 50, 400), companions: [], sigmaMps: 3 });
    const none = searchPeriods(CASE, noise, { seed: 1, permutations: 20 });
    expect(none.stage.peaks[0]!.falseAlarmProbability).toBeGreaterThan(0.01);
    expect(none.method).toMatch(/20 permutations/);
    expect(none.window.power).toHaveLength(none.window.frequenciesPerDay.length);
  });

  it('shows an eccentric shape where it beats the sinusoid', () => {
    const { stage } = searchPeriods(CASE, data(88, 0.85, 60), { seed: 1, permutations: 0 });
    expect(stage.eccentricPeak).not.toBeNull();
    expectWithin(stage.eccentricPeak!.periodDays, 38, { abs: 0.1, unit: 'd', why: 'the orbit' });
    expectWithin(stage.eccentricPeak!.eccentricity, 0.85, { abs: 0.05, unit: '1', why: 'the orbit' });
    expect(stage.eccentricPeak!.deltaLogLikelihood).toBeGreaterThan(stage.peaks[0]!.deltaLogLikelihood);
  });
});
