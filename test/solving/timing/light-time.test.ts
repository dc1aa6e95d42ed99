import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { solveTiming } from '../../../src/solving/timing/solve-timing.js';
import type { TimingParameters } from '../../../src/solving/timing/types.js';
import { expectWithin } from '../../support/expect-within.js';
import { CHOICES, tableOf } from './support.js';

/** Passages of Io through a fixed direction, seen from the Earth (test/reference/light-time/generate.py, ERFA ephemerides). */
const passages = JSON.parse(
  readFileSync(new URL('../../reference/light-time/passages.json', import.meta.url), 'utf8'),
) as {
  readonly periodDays: number;
  readonly errorDays: number;
  readonly cycles: number[];
  readonly timesTdb: number[];
};

function sinusoidOf(isUsed: (cycle: number) => boolean): { preferred: string; parameters: TimingParameters } {
  const rows = passages.cycles
    .map((cycle, k) => ({ cycle, time: passages.timesTdb[k]!, sigma: passages.errorDays }))
    .filter(({ cycle }) => isUsed(cycle));
  const { record } = solveTiming([tableOf(rows)], CHOICES);
  const { parameters } = record.models.find(({ name }) => name === 'sinusoidal')!;
  return { preferred: record.preferred, parameters };
}

describe("the light time across the Earth's orbit, from the clock of Io", () => {
  it('period of Io, synodic year of Jupiter and 16.6 min over one revolution of Jupiter', () => {
    const { preferred, parameters } = sinusoidOf((cycle) => cycle % 3 === 0);
    expect(preferred).toBe('sinusoidal');
    // Published sidereal period; the light time of Jupiter's own eccentric orbit (two minutes) is not in the model.
    expectWithin(parameters.period!.value!, passages.periodDays, { abs: 5e-7, unit: 'd', why: '2 min of other light time in 4333 d allow 1e-6' });
    // 1/(1/365.256 - 1/4332.59) = 398.88 d.
    expectWithin(parameters.modulationPeriod!.value!, 398.88, { rel: 0.003, unit: 'd', why: 'the synodic year varies with the eccentric orbit' });
    // 2 x 499.0048 s.
    expectWithin(2 * parameters.modulationAmplitude!.value!, 16.6335, { rel: 0.01, unit: 'min', why: 'the first harmonic of the distance is 0.5 % short' });
  }); // prettier-ignore

  it('the same light time from 540 days', () => {
    const { parameters } = sinusoidOf((cycle) => cycle < 305);
    const why = 'one and a third synodic years: the slow change of the distance of Jupiter leaks in';
    expectWithin(2 * parameters.modulationAmplitude!.value!, 16.6335, { rel: 0.01, unit: 'min', why });
    expectWithin(parameters.period!.value!, passages.periodDays, { abs: 5e-6, unit: 'd', why });
  });
});
