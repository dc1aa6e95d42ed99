import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { solveTiming } from '../../../src/solving/timing/solve-timing.js';
import type { TimingParameterKey } from '../../../src/solving/timing/types.js';
import type { Quantity } from '../../../src/solving/types.js';
import { CHOICES, tableOf, type Row } from './support.js';

const T0 = 2458000;
const PERIOD = 2.5;
const CHANGE = -2e-8;

function isHeld({ lower, upper }: Quantity, truth: number): boolean {
  return lower! <= truth && truth <= upper!;
}

/** Seven times with a jitter as large as their errors: few enough that an interval of known noise would be too narrow. */
function fewTimes(seed: number): Row[] {
  const random = RandomStream.fromSeed(seed);
  return Array.from({ length: 7 }, (_, k): Row => {
    const cycle = 40 * k + random.integerBelow(30);
    const sigma = 5e-4 * random.uniformBetween(0.6, 1.4);
    const noise = Math.hypot(sigma, 5e-4) * random.normal();
    return { cycle, time: T0 + PERIOD * cycle + 0.5 * CHANGE * cycle * cycle + noise, sigma };
  });
}

describe('intervals hold the truth as often as they say (250 seeded sets of seven times)', () => {
  const SETS = 250;
  const held = new Map<TimingParameterKey | 'prediction', number>();
  const count = (key: TimingParameterKey | 'prediction', isIn: boolean): void => {
    held.set(key, (held.get(key) ?? 0) + (isIn ? 1 : 0));
  };
  for (let set = 0; set < SETS; set++) {
    const { record } = solveTiming([tableOf(fewTimes(1000 + set))], { ...CHOICES, modulationDays: { low: 1e8, high: null } });
    const quadratic = record.models.find(({ name }) => name === 'quadratic')!;
    const { referenceCycle: E } = record;
    count('time', isHeld(quadratic.parameters.time!, T0 + PERIOD * E + 0.5 * CHANGE * E * E));
    count('period', isHeld(quadratic.parameters.period!, PERIOD + CHANGE * E));
    count('periodChangePerCycle', isHeld(quadratic.parameters.periodChangePerCycle!, CHANGE));
  } // prettier-ignore

  it.each(['time', 'period', 'periodChangePerCycle'] as const)('%s', (key) => {
    const share = held.get(key)! / SETS;
    // 68.3 % with a standard error of 2.9 points; three of them either way.
    expect(share).toBeGreaterThan(0.595);
    expect(share).toBeLessThan(0.771);
  });
});

describe('intervals of a sinusoid hold the truth (50 seeded sets of 25 times)', () => {
  const SETS = 50;
  const MODULATION = 55;
  const held = { modulationPeriod: 0, modulationAmplitude: 0 };
  for (let set = 0; set < SETS; set++) {
    const random = RandomStream.fromSeed(7000 + set);
    const rows = Array.from({ length: 25 }, (): Row => {
      const cycle = random.integerBelow(200);
      const swing = 0.0025 * Math.sin((2 * Math.PI * cycle) / MODULATION + 0.4);
      return { cycle, time: T0 + PERIOD * cycle + swing + 7e-4 * random.normal(), sigma: 7e-4 };
    });
    const { record } = solveTiming([tableOf(rows)], CHOICES);
    const { parameters } = record.models.find(({ name }) => name === 'sinusoidal')!;
    if (isHeld(parameters.modulationPeriod!, MODULATION * PERIOD)) held.modulationPeriod++;
    if (isHeld(parameters.modulationAmplitude!, 0.0025 * 1440)) held.modulationAmplitude++;
  }

  it.each(['modulationPeriod', 'modulationAmplitude'] as const)('%s', (key) => {
    // 68.3 % with a standard error of 6.6 points; three of them either way.
    expect(held[key] / SETS).toBeGreaterThan(0.485);
    expect(held[key] / SETS).toBeLessThan(0.88);
  });
});
