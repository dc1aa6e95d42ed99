/** What the data cannot tell must be said, and nothing must break. */
import { describe, expect, it } from 'vitest';
import { InputDataError } from '../../src/errors.js';
import { RandomStream } from '../../src/numerics/random.js';
import { solveCase } from '../../src/solving/solve-case.js';
import { DERIVED_KEYS } from '../../src/solving/types.js';
import { expectWithin } from '../support/expect-within.js';
import { BARE_CASE, OPTIONS, scatteredTimes, simulated, velocitySet } from './helpers.js';
import { codes, expectHonest, oneSignal, ORBIT } from './honest.js';

describe('too little to solve', () => {
  it('fewer than four velocities, or all at one time, are refused with a hint', () => {
    const three = velocitySet({ times: [1, 2, 3], velocities: [1, 2, 3], sigmas: [1, 1, 1] });
    expect(() => solveCase(BARE_CASE, three, OPTIONS)).toThrow(InputDataError);
    expect(() => solveCase(BARE_CASE, three, OPTIONS)).toThrow(/3 velocities/);
    const still = velocitySet({
      times: [5, 5, 5, 5, 5],
      velocities: [1, 2, 3, 4, 5],
      sigmas: [1, 1, 1, 1, 1],
    });
    expect(() => solveCase(BARE_CASE, still, OPTIONS)).toThrow(/one time/);
  });

  it('four velocities: an answer without a companion, and a warning', () => {
    for (const companions of ['auto', 1, 3] as const) {
      const set = velocitySet({
        times: [2459000.5, 2459003.1, 2459017.7, 2459040.2],
        velocities: [10, -40, 35, 3],
        sigmas: [2, 2, 2, 2],
      });
      const solved = solveCase({ ...BARE_CASE, companions }, set, OPTIONS);
      expectHonest(solved);
      expect(codes(solved)).toContain('few-data');
      if (companions === 'auto') {
        expect(solved.record.companions).toEqual([]);
        expect(solved.record.fit.usable).toBe(false);
      }
    }
  });

  it('five to nine velocities never break it, one or two instruments, any choice of companions', () => {
    for (let count = 5; count < 10; count++) {
      const random = RandomStream.fromSeed(60 + count);
      const set = simulated(random, {
        times: scatteredTimes(random, count, 100),
        companions: [ORBIT],
        sigmaMps: 3,
        zeroPointsMps: count % 2 === 0 ? [0] : [0, 9],
      });
      for (const companions of ['auto', 1, 2] as const)
        expectHonest(solveCase({ ...BARE_CASE, companions }, set, OPTIONS));
    }
  });

  it('velocities that are all equal give no companion', () => {
    const times = scatteredTimes(RandomStream.fromSeed(1), 20, 100);
    const solved = solveCase(
      BARE_CASE,
      velocitySet({ times, velocities: times.map(() => -13250), sigmas: times.map(() => 2) }),
      OPTIONS,
    );
    expectHonest(solved);
    expect(solved.record.companions).toEqual([]);
    expectWithin(solved.record.velocity.instruments[0]!.zeroPoint.value!, -13250, {
      abs: 1e-9,
      unit: 'm/s',
      why: 'a mean',
    });
  });

  it('exact velocities of an orbit (no noise at all) are solved and honest', () => {
    const random = RandomStream.fromSeed(2);
    const set = simulated(random, {
      times: scatteredTimes(random, 40, 400),
      companions: [ORBIT],
      sigmaMps: 1e-3,
      noise: 0,
    });
    const solved = solveCase(BARE_CASE, set, OPTIONS);
    expectHonest(solved);
    expect(solved.record.companions).toHaveLength(1);
    expectWithin(solved.record.companions[0]!.elements.period.value!, 43, {
      abs: 1e-5,
      unit: 'd',
      why: 'velocities are exact',
    });
  });
});

describe('instruments', () => {
  it('one with a single velocity: its zero point absorbs it and the orbit does not move', () => {
    const set = oneSignal(11);
    const alone = solveCase(BARE_CASE, set, OPTIONS);
    const rows = {
      times: [...set.timesBjdTdb, set.timesBjdTdb.at(-1)! - 0.125].sort((a, b) => a - b),
      velocities: [...set.velocitiesMps.slice(0, -1), 5000, set.velocitiesMps.at(-1)!],
      sigmas: new Array<number>(41).fill(2),
      instruments: [...new Array<number>(39).fill(0), 1, 0],
    };
    const solved = solveCase(BARE_CASE, velocitySet(rows), OPTIONS);
    expectHonest(solved);
    expect(codes(solved)).toContain('one-velocity-instrument');
    const instrument = solved.record.velocity.instruments[1]!;
    expect(instrument.count).toBe(1);
    expect(instrument.jitter).toMatchObject({ value: 0, fixed: true });
    expectWithin(instrument.rms, 0, { abs: 1e-6, unit: 'm/s', why: 'the zero point absorbs it' });
    for (const key of ['period', 'eccentricity', 'semiAmplitude'] as const) {
      const [before, after] = [alone, solved].map(({ record }) => record.companions[0]!.elements[key]);
      expectWithin((after!.value! - before!.value!) / before!.sigma!, 0, {
        abs: 1e-3,
        unit: 'sigma',
        why: 'one datum, one parameter',
      });
    }
  });

  it('equal errors, in any unit: errors scaled by 1000 with the velocities scale the answer', () => {
    const set = oneSignal(12);
    const big = {
      ...set,
      velocitiesMps: set.velocitiesMps.map((v) => 1000 * v),
      sigmasMps: set.sigmasMps.map((s) => 1000 * s),
    };
    const [small, large] = [set, big].map(
      (one) => solveCase(BARE_CASE, one, OPTIONS).record.companions[0]!.elements,
    );
    expectWithin(large!.semiAmplitude.value!, 1000 * small!.semiAmplitude.value!, {
      rel: 1e-5,
      unit: 'm/s',
      why: 'the same maximum',
    });
    expectWithin(large!.period.value!, small!.period.value!, {
      rel: 1e-6,
      unit: 'd',
      why: 'the same maximum',
    });
  });
});

describe('periods', () => {
  it('longer than the observations: said so, and no false precision', () => {
    const solved = solveCase(
      { ...BARE_CASE, companions: 1 },
      oneSignal(13, 40, { ...ORBIT, periodDays: 700, eccentricity: 0.1, semiAmplitudeMps: 60 }),
      OPTIONS,
    );
    expectHonest(solved);
    const { elements } = solved.record.companions[0]!;
    if (elements.period.value! > 400) expect(codes(solved)).toContain('period-longer-than-data');
    expect(
      codes(solved).some((code) =>
        ['period-longer-than-data', 'hardly-one-revolution', 'uncertainty-unknown'].includes(code),
      ),
    ).toBe(true);
    if (elements.period.sigma !== null)
      expect(Math.abs(elements.period.value! - 700) / elements.period.sigma).toBeLessThan(5);
  });

  it('two companions asked for where there is one signal: the second is not supported, and that is said', () => {
    const solved = solveCase({ ...BARE_CASE, companions: 2 }, oneSignal(14), OPTIONS);
    expectHonest(solved);
    expect(solved.record.companions).toHaveLength(2);
    expect(codes(solved)).toContain('companion-not-supported');
    const near = solved.record.companions.filter(
      ({ elements }) => Math.abs(elements.period.value! - 43) < 0.5,
    );
    expect(near).toHaveLength(1);
  });

  it('companions: 0 fits zero points and drift only', () => {
    const solved = solveCase({ ...BARE_CASE, companions: 0 }, oneSignal(15), OPTIONS);
    expectHonest(solved);
    expect(solved.record.companions).toEqual([]);
    expect(solved.stages).toHaveLength(1);
    expect(solved.record.fit.usable).toBe(false);
  });
});

describe('a stellar companion', () => {
  it('has a date of conjunction known to a tenth of a second, which is not mistaken for a fixed one', () => {
    const random = RandomStream.fromSeed(24);
    const binary = {
      ...ORBIT,
      periodDays: 0.83,
      eccentricity: 0,
      argPeriastronStarRad: Math.PI / 2,
      semiAmplitudeMps: 150_000,
    };
    const set = simulated(random, {
      times: scatteredTimes(random, 80, 60),
      companions: [binary],
      sigmaMps: 2,
    });
    const solved = solveCase({ ...BARE_CASE, circular: true }, set, OPTIONS);
    expectHonest(solved);
    expect(solved.record.companions).toHaveLength(1);
    const { timeOfInferiorConjunction: conjunction, period } = solved.record.companions[0]!.elements;
    expectWithin(period.value!, 0.83, { abs: 5 * period.sigma!, unit: 'd', why: 'five sigma' });
    expect(conjunction.fixed).toBeUndefined();
    // sigma_t = sqrt(2/n) (sigma/K) P/(2 pi) for even phase coverage.
    expectWithin(conjunction.sigma!, (Math.sqrt(2 / 80) * (2 / 150_000) * 0.83) / (2 * Math.PI), {
      rel: 0.35,
      unit: 'd',
      why: 'the jitter is fitted and phases are scattered',
    });
  });
});

describe('derived quantities that cannot be had', () => {
  it('say which number is missing, and the others are there', () => {
    const solved = solveCase(BARE_CASE, oneSignal(23), OPTIONS);
    const { derived } = solved.record.companions[0]!;
    for (const key of DERIVED_KEYS) {
      const quantity = derived[key];
      if (quantity.value === null) expect(quantity.why).toMatch(/is not given|is not known/);
      else expect(quantity.sigma).toBeGreaterThan(0);
    }
    expect(derived.minimumMass.why).toMatch(/mass of the star/);
    expect(derived.transitDepth.why).toMatch(/radius of the star/);
    expect(derived.mass.why).toMatch(/inclination/);
    expect(derived.massFunction.value).toBeGreaterThan(0);
    expect(derived.nextPeriastron.value).toBeGreaterThan(solved.velocities.timesBjdTdb.at(-1)!);
  });
});
