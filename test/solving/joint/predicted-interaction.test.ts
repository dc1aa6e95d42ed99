import { beforeAll, describe, expect, it } from 'vitest';

import { RandomStream } from '../../../src/numerics/random.js';
import type { CompanionChoice } from '../../../src/observations/types.js';
import { semiAmplitudeMps } from '../../../src/orbit/masses.js';
import { conjunctionTimes } from '../../../src/orbit/interaction/conjunctions.js';
import { superPeriodDays } from '../../../src/orbit/interaction/near-resonance.js';
import { departuresOf, followed, shifted } from '../../../src/solving/joint/integrated-orbits.js';
import { solveObservations } from '../../../src/solving/joint/solve-observations.js';
import type { PredictedCompanion } from '../../../src/solving/timing/interaction-predict.js';
import type { Solved } from '../../../src/solving/types.js';
import { midTimes as section } from '../../../src/dossier/sections/mid-times.js';
import { expectWithin } from '../../support/expect-within.js';
import { caseOf, midTimeTable, observed, QUICK, START_BJD, velocitiesOf } from './simulate.js';

const STAR_SOLAR = 1;
const SPAN_DAYS = 600;
const SIGMA_DAYS = 0.0004;

interface Pair {
  readonly periods: readonly [number, number];
  readonly massRatios: readonly [number, number];
}
/** 1.5 % outside of 2:1. */
const RESONANT: Pair = { periods: [8, 16.24], massRatios: [6e-5, 9e-5] };
const APART: Pair = { periods: [8, 29.3], massRatios: [6e-5, 9e-5] };
const CONJUNCTIONS = [START_BJD + 2.1, START_BJD + 7.4] as const;

/** True mid-times of orbits that pull at each other and are circular in the middle of the data. */
function truth({ periods, massRatios }: Pair): readonly Float64Array[] {
  const found = conjunctionTimes(
    {
      starMassSolar: STAR_SOLAR,
      epochDays: START_BJD + SPAN_DAYS / 2,
      companions: periods.map((periodDays, i) => ({
        massRatio: massRatios[i]!,
        periodDays,
        conjunctionDays: CONJUNCTIONS[i]!,
        eCosOmega: 0,
        eSinOmega: 0,
        inclinationRad: Math.PI / 2,
        nodeRad: 0,
      })),
    },
    START_BJD,
    START_BJD + SPAN_DAYS,
  );
  return found.map(({ transits }) => transits);
}

function meanPeriods(pair: Pair): [number, number] {
  const [b, c] = truth(pair).map((times) => (times.at(-1)! - times[0]!) / (times.length - 1));
  return [b!, c!];
}

/** Straight line of least squares in the running number. */
function lineOf(times: Float64Array): { readonly level: number; readonly slope: number } {
  const middle = 0.5 * (times.length - 1);
  let [mean, slope, norm] = [0, 0, 0];
  times.forEach((t, k) => {
    mean += (t - times[0]!) / times.length;
    slope += (k - middle) * (t - times[0]!);
    norm += (k - middle) ** 2;
  });
  slope /= norm;
  return { level: times[0]! + mean - slope * middle, slope };
}

/** Half the swing about that line, min. */
function halfSwingMinutes(times: Float64Array): number {
  const { level, slope } = lineOf(times);
  const rest = times.map((t, k) => t - level - slope * k);
  return 720 * (Math.max(...rest) - Math.min(...rest));
}

function listed(letter: string, period: number): CompanionChoice {
  return {
    letter,
    circular: true,
    elements: { period: { kind: 'prior', value: period, sigma: 0.01 * period } },
    inclinationDeg: null,
  };
}

function solve(pair: Pair, starMass: number | null): Promise<Solved> {
  const random = RandomStream.fromSeed(31);
  const times = truth(pair);
  const companions = pair.periods.map((periodDays, i) => ({
    periodDays,
    conjunctionBjdTdb: CONJUNCTIONS[i]!,
    radiusRatio: 0.05,
    impactParameter: 0.1,
    semiAmplitudeMps: semiAmplitudeMps({
      starMassSolar: STAR_SOLAR,
      companionMassSolar: pair.massRatios[i]! * STAR_SOLAR,
      periodDays,
      eccentricity: 0,
      sinInclination: 1,
    }),
  }));
  return solveObservations(
    caseOf({
      companions: [listed('b', pair.periods[0]), listed('c', pair.periods[1])],
      circular: true,
      drift: 'none',
      star: {
        massSolar: starMass === null ? null : { value: starMass, sigma: 0.02 },
        radiusSolar: null,
        effectiveTemperatureK: null,
      },
    }),
    observed({
      velocities: velocitiesOf(
        random,
        companions,
        Float64Array.from({ length: 90 }, (_, k) => START_BJD + 6.61 * k + 0.2 * random.normal()).sort(),
        1,
      ),
      midTimes: times.map((own, i) =>
        midTimeTable(
          Array.from(own, (t) => t + SIGMA_DAYS * random.normal()),
          SIGMA_DAYS,
          { companion: 'bc'[i]!, cycles: Int32Array.from(own, (_, k) => k) },
        ),
      ),
    }),
    QUICK,
  );
}

describe('two companions with masses near a resonance', () => {
  let solved: Solved;
  beforeAll(async () => {
    solved = await solve(RESONANT, STAR_SOLAR);
  });

  it('have the swing of their mid-times predicted', () => {
    const interaction = solved.record.photometry!.interaction!;
    expect(interaction.letters).toEqual(['b', 'c']);
    expect(interaction.nearResonance).toMatchObject({ letters: ['b', 'c'], ratio: '2:1' });
    expectWithin(interaction.superPeriod!, superPeriodDays(...meanPeriods(RESONANT), 2), {
      rel: 0.01,
      unit: 'd',
      why: 'periods are also those of the velocities',
    });
    truth(RESONANT).forEach((times, i) => {
      const { value, sigma } = interaction.predictedAmplitudeMinutes['bc'[i]!]!;
      expect(sigma).toBeGreaterThan(0);
      expectWithin(value!, halfSwingMinutes(times), {
        abs: 2 * sigma!,
        unit: 'min',
        why: 'two errors, which hold masses and the moment of the elements',
      });
    });
  });

  it('agree with the near-resonant formula, which takes free eccentricities of zero', () => {
    const { predictedAmplitudeMinutes, superPeriodAmplitudeMinutes, eccentricityLeverMinutes } =
      solved.record.photometry!.interaction!;
    for (const letter of ['b', 'c']) {
      expectWithin(predictedAmplitudeMinutes[letter]!.value!, superPeriodAmplitudeMinutes[letter]!, {
        rel: 0.2,
        unit: 'min',
        why: 'order of delta, and half the swing beside a line through 1.1 super-periods is no exact amplitude',
      });
      expect(eccentricityLeverMinutes[letter]!).toBeGreaterThan(0);
    }
  });

  it('are said to need more than undisturbed orbits, and follow the prediction', () => {
    const { comparisons, predictedAmplitudeMinutes } = solved.record.photometry!.interaction!;
    for (const letter of ['b', 'c']) {
      const { chiSquare, chiSquareLine, medianErrorMinutes, count } = comparisons[letter]!;
      expectWithin(medianErrorMinutes, 1440 * SIGMA_DAYS, { rel: 1e-9, unit: 'min', why: 'rounding' });
      expect(count).toBeGreaterThan(30);
      expect(predictedAmplitudeMinutes[letter]!.value!).toBeGreaterThan(medianErrorMinutes);
      // The true orbits are circular at one moment, the predicted ones on average: amplitude and phase are near, not equal.
      expect(chiSquare).toBeLessThan(0.8 * chiSquareLine);
    }
    const told = solved.record.warnings.filter(({ code }) => code === 'pull-shifts-mid-times');
    expect(told.map(({ message }) => message.slice(0, 11))).toEqual(['companion b', 'companion c']);
    const text = section.blocks(solved, { charts: [], files: [] }).join('\n\n');
    expect(text).toMatch(/undisturbed orbits.*b [\d.]+ .* min.*outside the 2:1 resonance/);
    expect(text).not.toMatch(/NaN|undefined|null/);
  });
});

describe('integrated orbits that keep a mean ephemeris', () => {
  const observedTimes = truth(RESONANT);
  const mean = observedTimes.map((times, i): PredictedCompanion => {
    const { level, slope } = lineOf(times);
    return {
      letter: 'bc'[i]!,
      periodDays: slope,
      conjunctionDays: level - (START_BJD + SPAN_DAYS / 2),
      eccentricity: 0,
      argPeriastronStarRad: 0,
      massRatio: RESONANT.massRatios[i]!,
      inclinationRad: Math.PI / 2,
      cycles: Array.from(times, (_, k) => k),
    };
  });

  it('are those that the times came from', () => {
    const found = followed(shifted(mean, departuresOf(mean, STAR_SOLAR, 0)), STAR_SOLAR, 0)!;
    found.forEach(({ timesDays }, i) => {
      timesDays.forEach((time, k) => {
        expectWithin(time + START_BJD + SPAN_DAYS / 2, observedTimes[i]![k]!, {
          abs: 2e-7,
          unit: 'd',
          why: 'alignment stops at 1e-7 d',
        });
      });
    });
  });

  it('are null where the companions cannot be followed', () => {
    const wild = mean.map((companion) => ({ ...companion, massRatio: -1 }));
    expect(followed(wild, STAR_SOLAR, 0)).toBeNull();
  });
});

describe('companions far from each other', () => {
  it('have a small swing, no resonance and no warning', async () => {
    const { record } = await solve(APART, STAR_SOLAR);
    const interaction = record.photometry!.interaction!;
    expect(interaction.nearResonance).toBeNull();
    expect(interaction.superPeriod).toBeNull();
    expect(interaction.superPeriodAmplitudeMinutes).toEqual({});
    for (const letter of ['b', 'c'])
      expect(interaction.predictedAmplitudeMinutes[letter]!.value!).toBeLessThan(0.3);
    expect(record.warnings.map(({ code }) => code)).not.toContain('pull-shifts-mid-times');
  });

  it('have nothing predicted where the star has no mass', async () => {
    const { record } = await solve(APART, null);
    expect(record.photometry!.interaction).toBeUndefined();
  });
});
