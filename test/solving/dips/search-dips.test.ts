import { describe, expect, it } from 'vitest';
import { dipDataOf } from '../../../src/solving/dips/dip-data.js';
import { searchDips } from '../../../src/solving/dips/search-dips.js';
import type { LightCurveTable } from '../../../src/observations/photometry-types.js';
import { expectWithin } from '../../support/expect-within.js';
import { lightCurve, offFrom, type LightCurvePlan, type TrueDip } from './simulate.js';

const plan: Omit<LightCurvePlan, 'dips'> = {
  spanDays: 27,
  stepDays: 1 / 48,
  sigma: 1e-3,
  seed: 11,
  trend: (time) => 0.004 * Math.sin(time / 1.3),
};
const near: TrueDip = { periodDays: 3.2, midTimeDays: 1.9, durationDays: 0.15, depth: 0.004 };
const far: TrueDip = { periodDays: 7.9, midTimeDays: 4.1, durationDays: 0.2, depth: 0.0035 };

describe('searchDips on simulated light curves with known truth', () => {
  it('finds two companions one after the other, each with its period, mid-time and depth', () => {
    const found = searchDips(lightCurve({ ...plan, dips: [near, far] }));
    expect(found.candidates.map(({ kind }) => kind)).toEqual(['periodic', 'periodic']);
    for (const [index, truth] of [near, far].entries()) {
      const candidate = found.candidates[index]!;
      const why = 'four standard errors, as stated by the search';
      const { periodDays, periodSigmaDays, midTimeDays, midTimeSigmaDays } = candidate;
      expectWithin(periodDays!, truth.periodDays, { abs: 4 * periodSigmaDays!, unit: 'd', why });
      expectWithin(offFrom(truth, midTimeDays), 0, { abs: 4 * midTimeSigmaDays, unit: 'd', why });
      expectWithin(candidate.depth, truth.depth, { abs: 4 * candidate.depthSigma, unit: '1', why });
      expect(periodSigmaDays).toBeLessThan(0.004);
      expect(candidate.oddEven!.differenceSigmas).toBeLessThan(3.5);
      expect(candidate.signalToNoise).toBeCloseTo(candidate.depth / candidate.depthSigma, 6);
    }
    // 27 d from day 1.9 in steps of 3.2 d: 8 events, all with data.
    expect(found.candidates[0]!.events).toHaveLength(8);
    expect(found.stages.length).toBeGreaterThanOrEqual(3);
    expect(found.stages[0]!.peaks[0]!.kind).toBe('found');
  });

  it('gives the same bytes twice', () => {
    const data = lightCurve({ ...plan, dips: [near] });
    expect(JSON.stringify(searchDips(data))).toBe(JSON.stringify(searchDips(data)));
  });

  it('finds the period itself where a fraction of it stands higher above its neighbours', () => {
    const deep: TrueDip = { periodDays: 7.31, midTimeDays: 3.3, durationDays: 0.15, depth: 0.004 };
    const data = lightCurve({
      ...plan,
      spanDays: 200,
      sigma: 4e-4,
      trend: (time) => 0.002 * Math.sin((2 * Math.PI * time) / 13.7),
      dips: [deep],
    });
    const { candidates } = searchDips(data, { maximumCompanions: 2 });
    expect(candidates).toHaveLength(1);
    const why = 'four standard errors, as stated by the search';
    const { periodDays, periodSigmaDays } = candidates[0]!;
    expectWithin(periodDays!, deep.periodDays, { abs: 4 * periodSigmaDays!, unit: 'd', why });
  });

  it('prefers the period to its half and its double, and lists them', () => {
    const [candidate] = searchDips(lightCurve({ ...plan, dips: [near] }), {
      maximumCompanions: 1,
    }).candidates;
    const kinds = new Map(candidate!.related.map((other) => [other.kind, other.signalToNoise]));
    // Half of the events leave sqrt(1/2); twice as many, every second one empty, that or less (they do not look like dips).
    expectWithin(kinds.get('2P')! / candidate!.signalToNoise, Math.SQRT1_2, {
      abs: 0.12,
      unit: '1',
      why: 'noise of the other half, which the refit follows',
    });
    expect(kinds.get('P/2')! / candidate!.signalToNoise).toBeLessThan(0.8);
  });

  it('tells odd from even depths, and finds the second eclipse of a binary', () => {
    const binary = { periodDays: 2.3, midTimeDays: 0.8, durationDays: 0.16, depth: 0.012, oddDepth: 0.007 };
    const { candidates } = searchDips(lightCurve({ ...plan, dips: [binary] }), { maximumCompanions: 1 });
    const [candidate] = candidates;
    // Either the eclipses are folded together (odd and even differ), or apart (the other one at phase 1/2).
    if (Math.abs(candidate!.periodDays! - 2.3) < 0.01)
      expect(candidate!.oddEven!.differenceSigmas).toBeGreaterThan(5);
    else {
      expectWithin(candidate!.periodDays!, 4.6, { abs: 0.01, unit: 'd', why: 'ten standard errors' });
      expectWithin(candidate!.secondary!.phase, 0.5, { abs: 0.01, unit: 'turns', why: 'a tenth of a dip' });
      expectWithin(candidate!.secondary!.depth, 0.007, { rel: 0.15, unit: '1', why: 'box for trapezoid' });
      expect(candidate!.secondary!.falseAlarmProbability).toBeLessThan(1e-10);
    }
  });

  it('calls the occultation of a found companion its own, not another companion', () => {
    const occultation = { ...near, midTimeDays: near.midTimeDays + 1.6, depth: 0.0015 };
    const found = searchDips(lightCurve({ ...plan, sigma: 5e-4, dips: [near, occultation] }));
    expect(found.candidates).toHaveLength(1);
    expectWithin(found.candidates[0]!.secondary!.phase, 0.5, {
      abs: 0.01,
      unit: 'turns',
      why: 'a fifth of a dip',
    });
    expect(found.rejected.some(({ why }) => why.includes('phase 0.5'))).toBe(true);
  });

  it('reports an event that is seen once as single, without a period but with its lower bound', () => {
    const single = { periodDays: Infinity, midTimeDays: 17.4, durationDays: 0.3, depth: 0.005 };
    const [candidate, ...others] = searchDips(lightCurve({ ...plan, dips: [single] })).candidates;
    expect(others).toEqual([]);
    expect(candidate!.kind).toBe('single');
    expect(candidate!.periodDays).toBeNull();
    expectWithin(candidate!.midTimeDays, 17.4, {
      abs: 4 * candidate!.midTimeSigmaDays,
      unit: 'd',
      why: 'four standard errors',
    });
    // Data without gaps from 0 to 27 d: a second event is outside for periods above 17.4 d (less half a dip).
    expectWithin(candidate!.shortestPeriodDays, 17.4, {
      abs: 0.3,
      unit: 'd',
      why: 'a dip is seen with less than half of it',
    });
  });

  it('finds a companion behind a deep single event', () => {
    const single = { periodDays: Infinity, midTimeDays: 9.2, durationDays: 0.3, depth: 0.05 };
    const { candidates } = searchDips(lightCurve({ ...plan, dips: [near, single] }));
    expect(candidates.map(({ kind }) => kind).sort()).toEqual(['periodic', 'single']);
    expectWithin(candidates.find(({ kind }) => kind === 'periodic')!.periodDays!, 3.2, {
      abs: 0.01,
      unit: 'd',
      why: 'a few standard errors',
    });
  });

  it('distrusts a drop at the edge of a gap', () => {
    const edge = (time: number): number => (time > 13 && time < 13.25 ? -0.006 : 0);
    const found = searchDips(
      lightCurve({ ...plan, dips: [], trend: edge, isObserved: (time) => time < 11 || time > 13 }),
    );
    expect(found.candidates).toEqual([]);
    expect(found.rejected.map(({ why }) => why).join('; ')).toMatch(/edge of|gap/);
  });

  it('does not take a lone point for an event', () => {
    const spoilt = lightCurve({ ...plan, stepDays: 0.3, dips: [] });
    spoilt.flux[40] = 0.9;
    const found = searchDips(spoilt);
    expect(found.candidates).toEqual([]);
    expect(found.rejected.map(({ why }) => why).join('; ')).toContain('a single event of 1 point');
  });

  it('is not led astray by one bad night', () => {
    const bad = (time: number): number => (Math.floor(time) === 8 ? 0.02 * Math.sin(4e4 * time) : 0);
    const found = searchDips(
      lightCurve({ ...plan, stepDays: 1 / 240, dips: [], trend: bad, isObserved: (time) => time % 1 < 0.35 }),
    );
    expect(found.candidates).toEqual([]);
  });

  it('finds the dips through gaps, and says where two periods explain the same events', () => {
    const data = lightCurve({ ...plan, dips: [far], isObserved: (time) => time % 9 < 6.5 });
    const [candidate] = searchDips(data).candidates;
    expectWithin(candidate!.periodDays!, 7.9, { abs: 0.02, unit: 'd', why: 'a few standard errors' });
  });

  it('claims nothing in white noise', () => {
    for (const seed of [101, 102, 103, 104])
      expect(searchDips(lightCurve({ ...plan, seed, dips: [] })).candidates).toEqual([]);
  });

  it('claims nothing in red noise', () => {
    const red = { sigma: 7e-4, scaleDays: 0.15 };
    for (const seed of [201, 202, 203, 204])
      expect(searchDips(lightCurve({ ...plan, seed, red, dips: [] })).candidates).toEqual([]);
  });

  it('says that a single night holds no period, and still finds its dip', () => {
    const transit = { periodDays: Infinity, midTimeDays: 0.12, durationDays: 0.09, depth: 0.02 };
    const found = searchDips(
      lightCurve({
        spanDays: 0.22,
        stepDays: 5e-4,
        sigma: 2e-3,
        seed: 9,
        dips: [transit],
        trend: (time) => 0.02 * time,
      }),
    );
    expect(found.settings[0]).toContain('single events only');
    expect(found.candidates.map(({ kind }) => kind)).toEqual(['single']);
    expectWithin(found.candidates[0]!.midTimeDays, 0.12, {
      abs: 0.002,
      unit: 'd',
      why: 'a few standard errors',
    });
    expect(found.stages).toEqual([]);
  });

  it('asks for points at two times', () => {
    const one = {
      timesDays: Float64Array.of(1, 1),
      flux: Float64Array.of(1, 1),
      sigmas: Float64Array.of(1, 1),
    };
    expect(() => searchDips(one)).toThrow(/two times/);
  });
});

describe('dipDataOf', () => {
  const table = (times: number[], flux: number[]): LightCurveTable =>
    ({
      timesBjdTdb: Float64Array.from(times),
      flux: Float64Array.from(flux),
      sigmas: Float64Array.from(flux, () => 0.01),
    }) as unknown as LightCurveTable;

  it('joins tables in order of time and remembers which is which', () => {
    const data = dipDataOf([table([2460001, 2460004], [1, 4]), table([2460002, 2460003], [2, 3])], 2460000);
    expect([...data.timesDays]).toEqual([1, 2, 3, 4]);
    expect([...data.flux]).toEqual([1, 2, 3, 4]);
    expect([...data.segmentOf]).toEqual([0, 1, 1, 0]);
  });

  it('tables of different levels are brought to one', () => {
    const all = lightCurve({ ...plan, dips: [near] });
    const half = (first: boolean): LightCurveTable => {
      const rows = Array.from(all.timesDays.keys()).filter((i) => all.timesDays[i]! < 13.5 === first);
      return table(rows.map((i) => 2460000 + all.timesDays[i]!), rows.map((i) => all.flux[i]! * (first ? 1 : 1.3)));
    };
    const data = dipDataOf([half(true), half(false)], 2460000);
    const [candidate] = searchDips(data, { maximumCompanions: 1 }).candidates;
    expectWithin(candidate!.periodDays!, 3.2, { abs: 0.01, unit: 'd', why: 'a few standard errors' });
    expect(candidate!.events).toHaveLength(8);
  });
}); // prettier-ignore
