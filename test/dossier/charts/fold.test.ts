import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { binResiduals, foldOn, orbitalPhase } from '../../../src/dossier/charts/fold.js';
import { evaluateVelocity } from '../../../src/signals/evaluate-velocity.js';
import { expectWithin } from '../../support/expect-within.js';
import { threeCompanions } from '../../support/solved-cases.js';
import { randomSource } from '../../support/solved-fixture.js';

describe('orbitalPhase', () => {
  it('is 0 at periastron, stays in [-0.5, 0.5) and repeats with the period', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -3e4, max: 3e4, noNaN: true }),
        fc.double({ min: 0.3, max: 9e3, noNaN: true }),
        (offset, period) => {
          const tp = 2_459_000;
          const phase = orbitalPhase(tp + offset, tp, period);
          expect(phase).toBeGreaterThanOrEqual(-0.5);
          expect(phase).toBeLessThan(0.5);
          // Whole turns away from offset / period; 1e-9 d is the rounding of a Julian date.
          const turns = offset / period - phase;
          expect(Math.abs(turns - Math.round(turns))).toBeLessThan(2e-9 / period + 1e-9);
        },
      ),
      { seed: 5, numRuns: 500 },
    );
    expect(orbitalPhase(2_459_010, 2_459_010, 7)).toBe(0);
    expect(orbitalPhase(2_459_010 - 1.75, 2_459_010, 7)).toBe(-0.25);
  });
});

describe('foldOn', () => {
  it('leaves what is observed less zero point, drift and the other companions', () => {
    const solved = threeCompanions();
    const { velocities, best } = solved;
    for (const companion of [0, 1, 2]) {
      const others = evaluateVelocity(best, velocities.timesBjdTdb, {
        companions: [0, 1, 2].filter((one) => one !== companion),
      });
      const folded = foldOn(solved, companion);
      for (let i = 0; i < velocities.count; i += 1) {
        const want =
          velocities.velocitiesMps[i]! - best.zeroPointsMps[velocities.instrumentOf[i]!]! - others[i]!;
        expectWithin(folded.velocitiesMps[i]!, want, {
          abs: 1e-8,
          unit: 'm/s',
          why: 'rounding of sums with zero points of 2e4 m/s',
        });
      }
    }
  });
});

describe('binResiduals', () => {
  it('gives the weighted mean and its error of each bin, by direct sums', () => {
    const random = randomSource(3);
    const n = 90;
    const phases = Float64Array.from({ length: n }, () => random.uniform() - 0.5);
    const residuals = Float64Array.from({ length: n }, () => random.gauss());
    const sigmas = Float64Array.from({ length: n }, () => 0.5 + random.uniform());
    const bins = binResiduals(phases, residuals, sigmas);
    expect(bins.length).toBeGreaterThan(10);
    const width = 1 / 15; // 90 points, six to a bin
    for (const bin of bins) {
      const edge = Math.floor((bin.phase + 0.5) / width);
      const rows = Array.from(phases.keys()).filter((i) => Math.floor((phases[i]! + 0.5) / width) === edge);
      const weight = rows.reduce((sum, i) => sum + sigmas[i]! ** -2, 0);
      const mean = rows.reduce((sum, i) => sum + residuals[i]! * sigmas[i]! ** -2, 0) / weight;
      const rounding = { abs: 1e-12, unit: 'm/s', why: 'rounding of a sum of ten terms' };
      expect(bin.count).toBe(rows.length);
      expectWithin(bin.residualMps, mean, rounding);
      expectWithin(bin.sigmaMps, weight ** -0.5, rounding);
    }
  });
  it('makes no bins of a few points', () => {
    const few = new Float64Array(23).fill(0.1);
    expect(binResiduals(few, few, few)).toEqual([]);
  });
});
