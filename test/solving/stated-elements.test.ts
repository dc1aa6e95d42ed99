/** What a case states about a companion is kept to, and reported as what it is. */
import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import type { Case, CompanionChoice, ElementChoice, ElementName } from '../../src/observations/types.js';
import { solveCase } from '../../src/solving/solve-case.js';
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, OPTIONS, scatteredTimes, simulated } from './helpers.js';
import { expectHonest, oneSignal, ORBIT } from './honest.js';

function withCompanion(
  elements: Partial<Record<ElementName, ElementChoice>>,
  change: Partial<CompanionChoice> = {},
): Case {
  return {
    ...BARE_CASE,
    companions: [{ letter: 'b', circular: 'auto', elements, inclinationDeg: null, ...change }],
  };
}

describe('periods that a case states', () => {
  it('a fixed period stays what it is and has no uncertainty', () => {
    const solved = solveCase(
      withCompanion({ period: { kind: 'fixed', value: 43.1 } }),
      oneSignal(16),
      OPTIONS,
    );
    expectHonest(solved);
    const { period } = solved.record.companions[0]!.elements;
    expect(period).toMatchObject({ sigma: null, lower: null, upper: null, fixed: true });
    expectWithin(period.value!, 43.1, { rel: 1e-14, unit: 'd', why: 'as stated, through a logarithm' });
    expect(solved.record.companions[0]!.elements.semiAmplitude.sigma).toBeGreaterThan(0);
  });

  it('a range holds: of two signals the weaker is taken when the range says so', () => {
    const random = RandomStream.fromSeed(17);
    const weak = {
      ...ORBIT,
      periodDays: 9.1,
      eccentricity: 0,
      argPeriastronStarRad: Math.PI / 2,
      semiAmplitudeMps: 14,
    };
    const set = simulated(random, {
      times: scatteredTimes(random, 60, 400),
      companions: [ORBIT, weak],
      sigmaMps: 2,
    });
    const solved = solveCase(withCompanion({ period: { kind: 'range', low: 5, high: 15 } }), set, OPTIONS);
    expectHonest(solved);
    expect(solved.record.companions).toHaveLength(1);
    expectWithin(solved.record.companions[0]!.elements.period.value!, 9.1, {
      abs: 0.1,
      unit: 'd',
      why: 'the other signal is noise here',
    });
  });

  it("the case's search range is kept", () => {
    const solved = solveCase(
      { ...BARE_CASE, companions: 1, periodRangeDays: { low: 2, high: 20 } },
      oneSignal(18),
      OPTIONS,
    );
    expectHonest(solved);
    const grid = solved.stages[0]!.frequenciesPerDay;
    expectWithin(1 / grid[0]!, 20, { rel: 1e-12, unit: 'd', why: 'as asked' });
    expect(solved.record.companions[0]!.elements.period.value!).toBeLessThan(30);
  });
});

describe('elements that a case states', () => {
  it('a fixed eccentricity and argument stay', () => {
    const theCase = withCompanion(
      { eccentricity: { kind: 'fixed', value: 0.25 }, argumentOfPeriastron: { kind: 'fixed', value: 70 } },
      { circular: false },
    );
    const solved = solveCase(theCase, oneSignal(19), OPTIONS);
    expectHonest(solved);
    const { elements } = solved.record.companions[0]!;
    expectWithin(elements.eccentricity.value!, 0.25, { abs: 1e-12, unit: '1', why: 'fixed' });
    expectWithin(elements.argumentOfPeriastron.value!, 70, { abs: 1e-9, unit: 'deg', why: 'fixed' });
    expect(elements.eccentricity.fixed).toBe(true);
  });

  it('a range that leaves the truth out ends at its edge', () => {
    const theCase = withCompanion(
      { eccentricity: { kind: 'range', low: 0.5, high: 0.7 } },
      { circular: false },
    );
    const solved = solveCase(theCase, oneSignal(20), OPTIONS);
    expectHonest(solved);
    expectWithin(solved.record.companions[0]!.elements.eccentricity.value!, 0.5, {
      abs: 5e-3,
      unit: '1',
      why: 'the nearest allowed',
    });
    expectWithin(solved.record.companions[0]!.elements.period.value!, 43, {
      abs: 0.5,
      unit: 'd',
      why: 'the signal',
    });
  });

  it('a fixed time of conjunction stays, on the passage that was stated', () => {
    const conjunction = 2459025.75;
    const solved = solveCase(
      withCompanion({ timeOfInferiorConjunction: { kind: 'fixed', value: conjunction } }),
      oneSignal(21),
      OPTIONS,
    );
    expectHonest(solved);
    const { elements } = solved.record.companions[0]!;
    const turns = (elements.timeOfInferiorConjunction.value! - conjunction) / elements.period.value!;
    expectWithin(turns - Math.round(turns), 0, { abs: 1e-7, unit: 'revolutions', why: 'fixed' });
  });

  it('circular: true gives e = 0 fixed, argument 90 degrees fixed, both times the same', () => {
    const solved = solveCase({ ...BARE_CASE, circular: true }, oneSignal(22), OPTIONS);
    expectHonest(solved);
    for (const { elements, circular } of solved.record.companions) {
      expect(circular).toBe(true);
      expect(elements.eccentricity).toMatchObject({ value: 0, fixed: true });
      expect(elements.argumentOfPeriastron).toMatchObject({ value: 90, fixed: true });
      expectWithin(elements.timeOfPeriastron.value!, elements.timeOfInferiorConjunction.value!, {
        abs: 1e-6,
        unit: 'd',
        why: 'one passage',
      });
    }
  });
});
