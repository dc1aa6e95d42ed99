import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import { windowFunction } from '../../src/solving/window-function.js';
import invented from '../reference/search/invented-velocities.json' with { type: 'json' };
import search from '../reference/search/search.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

function direct(times: Float64Array, weights: Float64Array, frequency: number): number {
  let [re, im, total] = [0, 0, 0];
  for (let i = 0; i < times.length; i++) {
    const angle = 2 * Math.PI * frequency * times[i]!;
    re += weights[i]! * Math.cos(angle);
    im += weights[i]! * Math.sin(angle);
    total += weights[i]!;
  }
  return (re * re + im * im) / (total * total);
}

const FAST = { abs: 1e-9, unit: '1', why: 'fast sums good to 1e-10 of the total weight' };

describe('window function', () => {
  it('is what sums term by term give, all along its grid', () => {
    const random = RandomStream.fromSeed(3);
    const times = Float64Array.from({ length: 80 }, () => random.uniformBetween(-400, 400)).sort();
    const weights = times.map(() => random.uniformBetween(0.1, 2));
    const window = windowFunction(times, weights, times.at(-1)! - times[0]!);
    for (let j = 0; j < window.power.length; j += 97) {
      expectWithin(window.power[j]!, direct(times, weights, window.frequenciesPerDay[j]!), FAST);
    }
    expect(window.frequenciesPerDay.at(-1)).toBeGreaterThan(2.19);
    expect(window.power.every((value) => value >= 0 && value <= 1)).toBe(true);
  });

  it('matches search.json (numpy) beside its frequencies', () => {
    const times = Float64Array.from(invented.rows, (row) => row[0]! - 2458100);
    const weights = Float64Array.from(invented.rows, (row) => row[2]! ** -2);
    const span = times.at(-1)! - times[0]!;
    const window = windowFunction(times, weights, span);
    for (const [frequency, want] of search.window as [number, number][]) {
      expectWithin(direct(times, weights, frequency), want, {
        abs: 1e-9,
        unit: '1',
        why: 'dates of 2.458e6 d in numpy',
      });
      const near = window.frequenciesPerDay.findIndex((f) => f > frequency);
      const fraction =
        (frequency - window.frequenciesPerDay[near - 1]!) /
        (window.frequenciesPerDay[near]! - window.frequenciesPerDay[near - 1]!);
      const between = window.power[near - 1]! + fraction * (window.power[near]! - window.power[near - 1]!);
      expectWithin(between, want, {
        abs: 0.02,
        unit: '1',
        why: 'linear between samples an eighth of 1/span apart',
      });
    }
  });

  it('names the peaks of nightly observations in yearly seasons: sidereal day, year and their kin', () => {
    const random = RandomStream.fromSeed(4);
    // Always near culmination, half of each year: the sampling repeats with the sidereal day and the year.
    const nights = Array.from({ length: 2200 }, (_, night) => night).filter(
      (night) => (night % 365.25) / 365.25 < 0.45 && random.uniform() < 0.3,
    );
    const times = Float64Array.from(nights, (night) => (night + 0.04 * random.normal()) / 1.00273790935);
    const window = windowFunction(
      times,
      times.map(() => 1),
      times.at(-1)! - times[0]!,
    );
    const names = window.peaks.map(({ name }) => name);
    expect(names).toContain('sidereal day');
    expect(names).toContain('year');
    const day = window.peaks.find(({ name }) => name === 'sidereal day')!;
    expectWithin(day.frequencyPerDay, 1.00273790935, {
      abs: 0.2 / 2200,
      unit: '1/d',
      why: 'the grid has eight samples per 1/span',
    });
    expectWithin(day.periodDays * day.frequencyPerDay, 1, { abs: 1e-15, unit: '1', why: 'reciprocal' });
    expect(day.power).toBeGreaterThan(0.7);
  });

  it('observations on whole days have the solar day at full height, and peaks come highest first', () => {
    const times = Float64Array.from({ length: 120 }, (_, i) => Math.floor(i * 2.7 + Math.sin(i)));
    const window = windowFunction(
      times,
      times.map(() => 1),
      times.at(-1)! - times[0]!,
    );
    const day = window.peaks.find(({ name }) => name === 'solar day')!;
    expect(day.power).toBeGreaterThan(0.9);
    const powers = window.peaks.map(({ power }) => power);
    expect(powers).toEqual([...powers].sort((a, b) => b - a));
    expect(new Set(powers).size).toBe(powers.length);
  });

  it('bears a span of one hour and of a century', () => {
    for (const span of [1 / 24, 36525]) {
      const times = Float64Array.from({ length: 10 }, (_, i) => (span * i ** 2) / 81);
      const window = windowFunction(
        times,
        times.map(() => 1),
        span,
      );
      expect(window.power.length).toBeLessThanOrEqual(400_001);
      expect(window.power.every(Number.isFinite)).toBe(true);
      expect(window.frequenciesPerDay.every((f) => f > 0)).toBe(true);
    }
  });
});
