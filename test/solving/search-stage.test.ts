import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import type { OrbitElements } from '../../src/orbit/elements.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import { Explorer, type PlannedFit } from '../../src/solving/explorer.js';
import { findCompanions } from '../../src/solving/find-companions.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { searchRange } from '../../src/solving/search-range.js';
import { foundStageRecord, reportedPeaks } from '../../src/solving/search-record.js';
import { sinusoidAt } from '../../src/solving/periodogram.js';
import type { VelocitySet } from '../../src/observations/types.js';
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, denseFit, scatteredTimes, simulated } from './helpers.js';

const FIRST: OrbitElements = { periodDays: 97, eccentricity: 0.4, argPeriastronStarRad: 2, timePeriastronBjdTdb: 2459030, semiAmplitudeMps: 40 }; // prettier-ignore
const SECOND: OrbitElements = { periodDays: 11.3, eccentricity: 0, argPeriastronStarRad: Math.PI / 2, timePeriastronBjdTdb: 2459004, semiAmplitudeMps: 12 }; // prettier-ignore

function data(): VelocitySet {
  const random = RandomStream.fromSeed(51);
  return simulated(random, {
    times: scatteredTimes(random, 70, 800),
    companions: [FIRST, SECOND],
    sigmaMps: 2,
    jitterMps: 1.5,
    zeroPointsMps: [0, 55, -700],
    slopeMpsPerDay: 0.04,
    curvatureMpsPerDay2: 3e-4,
  });
}

function withFirstCompanion(): { explorer: Explorer; base: PlannedFit; set: VelocitySet } {
  const set = data();
  const { explorer, epochBjdTdb } = explorerFor({ ...BARE_CASE, drift: 'quadratic' }, set);
  const base = explorer.fit(
    { companions: [{ choice: null, circular: false }], drift: 2 },
    {
      ...explorer.builder.emptyPoint(),
      companions: [{ ...FIRST, timePeriastronDays: FIRST.timePeriastronBjdTdb - epochBjdTdb }],
    },
  );
  return { explorer, base, set };
}

/** Zero points, drift and the five directions of the fitted orbit, by difference quotients of evaluateVelocity. */
function columnsOf(explorer: Explorer, base: PlannedFit, set: VelocitySet): Float64Array[] {
  const times = explorer.builder.data.timesDays;
  const columns = [0, 1, 2].map((g) => times.map((_, i) => (set.instrumentOf[i] === g ? 1 : 0)));
  columns.push(
    Float64Array.from(times),
    times.map((t) => t * t),
  );
  const found = explorer.portable(base).companions[0]!;
  const names = [
    'periodDays',
    'eccentricity',
    'argPeriastronStarRad',
    'timePeriastronDays',
    'semiAmplitudeMps',
  ] as const;
  for (const name of names) {
    const [above, below] = [1e-5, -1e-5].map((by) => {
      const { timePeriastronDays, ...rest } = { ...found, [name]: found[name] + by };
      const companions = [{ ...rest, timePeriastronBjdTdb: timePeriastronDays }];
      const none = new Float64Array(0);
      return evaluateVelocity({ companions, letters: ['b'], zeroPointsMps: none, jittersMps: none, epochBjdTdb: 0, slopeMpsPerDay: 0, curvatureMpsPerDay2: 0 }, times); // prettier-ignore
    });
    columns.push(above!.map((value, i) => (value - below![i]!) / 2e-5));
  }
  return columns;
}

describe('a stage of the search', () => {
  it('refits zero points, drift and the companion already found at every frequency (dense solve)', () => {
    const { explorer, base, set } = withFirstCompanion();
    const columns = columnsOf(explorer, base, set);
    const search = explorer.search(base, explorer.range, 0);
    const { timesDays, weights, residuals } = search.background;
    weights.forEach((weight, i) => {
      const jitter = base.fit.point.jittersMps[set.instrumentOf[i]!]!;
      expectWithin(weight, 1 / (set.sigmasMps[i]! ** 2 + jitter ** 2), {
        rel: 1e-14,
        unit: '(m/s)^-2',
        why: 'definition',
      });
    });
    const alone = denseFit(columns, residuals, weights).chiSquare;
    for (let j = 5; j < search.grid.count; j += 271) {
      const omega = 2 * Math.PI * (search.grid.startPerDay + j * search.grid.stepPerDay);
      const waves = [timesDays.map((t) => Math.cos(omega * t)), timesDays.map((t) => Math.sin(omega * t))];
      const full = denseFit([...columns, ...waves], residuals, weights).chiSquare;
      expectWithin(search.power[j]!, 1 - full / alone, {
        abs: 1e-6,
        unit: '1',
        why: 'columns by difference quotients',
      });
    }
    expect(search.setting.backgroundCount).toBe(10);
    expect(search.setting.dataCount).toBe(70);
  });

  it('has the second companion as its strongest peak; every peak is a maximum, off the grid, strongest first', () => {
    const { explorer, base } = withFirstCompanion();
    const search = explorer.search(base, explorer.range, 0);
    const [top] = search.peaks;
    expectWithin(1 / top!.frequencyPerDay, 11.3, { abs: 0.05, unit: 'd', why: 'a tenth of 1/span' });
    expectWithin(top!.amplitudeMps, 12, { abs: 2, unit: 'm/s', why: 'about four times sigma sqrt(2/n)' });
    expect(search.peaks).toHaveLength(14);
    search.peaks.forEach((peak, i) => {
      const at = (shift: number): number => sinusoidAt(search.background, peak.frequencyPerDay + shift).power;
      expectWithin(peak.power, at(0), { abs: 1e-12, unit: '1', why: 'the same sums' });
      for (const shift of [-0.02, -0.002, 0.002, 0.02]) {
        expect(at(shift * search.grid.stepPerDay) - peak.power).toBeLessThan(1e-9);
      }
      const near =
        search.power[Math.round((peak.frequencyPerDay - search.grid.startPerDay) / search.grid.stepPerDay)]!;
      expect(near).toBeLessThan(peak.power + 1e-8);
      if (i > 0) expect(peak.power).toBeLessThan(search.peaks[i - 1]!.power + 0.02);
    });
    expect(Math.max(...search.power)).toBeLessThanOrEqual(top!.power + 1e-8);
  });

  it('the start of a peak is the circular orbit that takes exactly its share of chi square away', () => {
    const { explorer, base, set } = withFirstCompanion();
    const search = explorer.search(base, explorer.range, 0);
    const columns = columnsOf(explorer, base, set);
    const { timesDays, weights, residuals, chiSquare } = search.background;
    for (const { start, power } of search.peaks.slice(0, 5)) {
      const none = new Float64Array(0);
      const wave = evaluateVelocity(
        { companions: [{ ...start, timePeriastronBjdTdb: start.timePeriastronDays }], letters: ['b'], zeroPointsMps: none, jittersMps: none, epochBjdTdb: 0, slopeMpsPerDay: 0, curvatureMpsPerDay2: 0 },
        timesDays,
      ); // prettier-ignore
      const left = denseFit(
        columns,
        residuals.map((r, i) => r - wave[i]!),
        weights,
      ).chiSquare;
      expectWithin(left / chiSquare, 1 - power, {
        abs: 1e-6,
        unit: '1',
        why: 'columns by difference quotients',
      });
    }
  });

  it('is reported with ln L gains of a refitted noise level and with levels that fit the stated probabilities', () => {
    const { explorer, set } = withFirstCompanion();
    const { stages } = findCompanions(explorer, () => undefined);
    const record = foundStageRecord(stages[0]!, explorer.range.spanDays);
    expect(record.companionsFitted).toBe(0);
    expect(record.peaks.length).toBeGreaterThan(3);
    for (const peak of record.peaks) {
      // Scaling all errors to the residuals: ln L = -(n/2) ln chi^2 + constant.
      expectWithin(peak.deltaLogLikelihood, -(set.count / 2) * Math.log(1 - peak.power), {
        rel: 1e-12,
        unit: 'ln L',
        why: 'closed form',
      });
    }
    expect(record.peaks[0]!.kind).toBe('strongest');
    expect(record.levels.map(({ falseAlarmProbability }) => falseAlarmProbability)).toEqual([
      0.1, 0.01, 0.001,
    ]);
    const powers = record.levels.map(({ power }) => power);
    expect(powers).toEqual([...powers].sort((a, b) => a - b));
    expect(record.frequenciesPerDay).toHaveLength(record.power.length);
    expectWithin(1 / record.frequenciesPerDay[0]!, 1200, {
      rel: 1e-12,
      unit: 'd',
      why: '1.5 spans of 800 d',
    });
    expect(record.frequenciesPerDay.at(-1)).toBeGreaterThanOrEqual(2);
  });

  it('names an alias among the peaks: nightly data of a 5.3 d orbit show its day alias', () => {
    const random = RandomStream.fromSeed(52);
    const times = Float64Array.from(
      { length: 60 },
      (_, i) => 2459000.5 + Math.floor(i * 2.6 + 2 * random.uniform()) + 0.02 * random.normal(),
    );
    const set = simulated(random, {
      times: times.sort(),
      companions: [{ ...SECOND, periodDays: 5.3 }],
      sigmaMps: 2,
    });
    const { explorer, spanDays } = explorerFor(BARE_CASE, set);
    const base = explorer.fit({ companions: [], drift: 0 }, explorer.builder.emptyPoint());
    const peaks = reportedPeaks(explorer.search(base), spanDays);
    const kinds = peaks.map(({ kind }) => kind);
    expect(kinds[0]).toBe('strongest');
    expect(kinds.some((kind) => kind === 'solar-day alias' || kind === 'sidereal-day alias')).toBe(true);
    const alias = peaks.find(({ kind }) => kind.endsWith('-day alias'))!;
    const daily = [1, -1].map((sign) => Math.abs(1 / alias.periodDays + sign / peaks[0]!.periodDays));
    const off = Math.min(...daily.map((value) => Math.abs(value - 1)));
    expect(off).toBeLessThan(1 / spanDays);
  });
});

describe('searchRange', () => {
  it('goes from 1.5 spans down to half a day with at least 8 samples per 1/span', () => {
    for (const span of [3, 80, 2500]) {
      const { grid, longestPeriodDays, shortestPeriodDays, cut } = searchRange(span, {
        low: null,
        high: null,
      });
      expectWithin(longestPeriodDays, 1.5 * span, { rel: 1e-14, unit: 'd', why: 'definition' });
      expect(shortestPeriodDays).toBe(0.5);
      expect(cut).toBe(false);
      expect(grid.stepPerDay * span).toBeLessThanOrEqual(1 / 8);
      expect(grid.startPerDay + (grid.count - 1) * grid.stepPerDay).toBeGreaterThanOrEqual(2);
      expectWithin(grid.startPerDay, 1 / longestPeriodDays, { rel: 1e-14, unit: '1/d', why: 'definition' });
    }
  });

  it('keeps to the wanted range', () => {
    const { grid } = searchRange(400, { low: 3, high: 50 });
    expectWithin(1 / grid.startPerDay, 50, { rel: 1e-14, unit: 'd', why: 'as asked' });
    const last = grid.startPerDay + (grid.count - 1) * grid.stepPerDay;
    expect(last).toBeGreaterThanOrEqual(1 / 3);
    expect(last).toBeLessThan(1 / 3 + grid.stepPerDay);
  });

  it('is bounded for hostile spans, and says so', () => {
    const { grid, cut, shortestPeriodDays } = searchRange(3e6, { low: null, high: null });
    expect(cut).toBe(true);
    expect(grid.count).toBeLessThanOrEqual(1_500_000);
    expectWithin(1 / shortestPeriodDays, grid.startPerDay + (grid.count - 1) * grid.stepPerDay, {
      rel: 1e-12,
      unit: '1/d',
      why: 'the last frequency',
    });
    const tiny = searchRange(0.01, { low: null, high: null });
    expect(tiny.grid.count).toBeGreaterThanOrEqual(1);
    expect(tiny.longestPeriodDays).toBeGreaterThan(tiny.shortestPeriodDays);
  });
});
