import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { BoxScan } from '../../../src/solving/dips/box-scan.js';
import { BoxSearch } from '../../../src/solving/dips/box-search.js';
import { expectWithin } from '../../support/expect-within.js';

interface Definition {
  readonly timesDays: number[];
  readonly flux: number[];
  readonly frequencies: { from: number; to: number; count: number };
  readonly binCount: number;
  readonly expected: {
    SR_peak: number;
    SR_mean: number;
    SR_sd: number;
    SDE: number;
    best_period: number;
    i1: number;
    n_bins_in_box: number;
    r: number;
    depth: number;
    SR_first10: number[];
  };
  readonly signalToNoise: {
    inputs: { depth: number; sigma: number; n: number; q: number };
    expected: number;
  };
}

const given = JSON.parse(
  readFileSync(new URL('./box-by-definition.json', import.meta.url), 'utf8'),
) as Definition;

interface Scanned {
  readonly residues: readonly number[];
  readonly best: { startBin: number; lengthBins: number; depth: number; share: number };
}

/** Spectrum with bins folded here and boxes scanned by the program; `sign` -1 looks for bumps. */
function scanned(sign: 1 | -1): Scanned {
  const { timesDays, flux, binCount, frequencies } = given;
  const mean = flux.reduce((sum, value) => sum + value, 0) / flux.length;
  const lengths = Int32Array.from({ length: 9 }, (_, k) => k + 2);
  const scan = new BoxScan();
  const residues: number[] = [];
  let best = { startBin: 0, lengthBins: 0, depth: 0, share: 0 };
  for (let j = 0; j < frequencies.count; j++) {
    const frequency = frequencies.from + ((frequencies.to - frequencies.from) * j) / (frequencies.count - 1);
    const bins = new Float64Array(2 * binCount);
    timesDays.forEach((time, i) => {
      const turns = (time - timesDays[0]!) * frequency;
      const bin = Math.floor(binCount * (turns - Math.floor(turns)));
      bins[2 * bin]! += 1 / timesDays.length;
      bins[2 * bin + 1]! += (sign * (flux[i]! - mean)) / timesDays.length;
    });
    const residue = scan.scan(bins, binCount, lengths, lengths.length);
    if (residue > Math.max(0, ...residues)) best = { ...scan.best };
    residues.push(residue);
  }
  return { residues, best };
}

describe('the scan of boxes', () => {
  // Computed by direct brute force from the definition in [Kovacs2002], see the fixture.
  const { expected } = given;
  const { residues, best } = scanned(1);
  const why = 'rounding; the fixture asks for 1e-8';

  it('gives the signal residue of the definition at the first ten frequencies', () => {
    expected.SR_first10.forEach((value, j) => {
      expectWithin(residues[j]!, value, { rel: 1e-8, unit: '1', why });
    });
  });

  it('finds the box of the definition, its depth and its share of the points', () => {
    expectWithin(Math.max(...residues), expected.SR_peak, { rel: 1e-8, unit: '1', why });
    expect([best.startBin, best.lengthBins]).toEqual([expected.i1, expected.n_bins_in_box]);
    expectWithin(best.depth, expected.depth, { rel: 1e-8, unit: '1', why });
    expectWithin(best.share, expected.r, { rel: 1e-8, unit: '1', why });
  });

  it('gives the mean, the scatter and with them the efficiency of the definition', () => {
    // The definition squares the sum and takes bumps too, which the search does not.
    const bumps = scanned(-1).residues;
    const both = residues.map((value, j) => Math.max(value, bumps[j]!));
    const mean = both.reduce((sum, value) => sum + value, 0) / both.length;
    const variance = both.reduce((sum, value) => sum + (value - mean) ** 2, 0) / both.length;
    expectWithin(mean, expected.SR_mean, { rel: 1e-8, unit: '1', why });
    expectWithin((Math.max(...residues) - mean) / Math.sqrt(variance), expected.SDE, {
      rel: 1e-7,
      unit: '1',
      why,
    });
  });

  it('signal residue times the root of all weights is depth over its error', () => {
    // alpha = (depth/sigma) sqrt(n q) for a share q that is small [Kovacs2002, section 4]; exactly, with n q (1 - q).
    const { depth, sigma, n, q } = given.signalToNoise.inputs;
    const bins = Float64Array.of(q * n, 0, (1 - q) * n, 0);
    bins[1] = -depth * (1 - q) * q * n;
    bins[3] = -bins[1];
    const residue = new BoxScan().scan(bins, 2, Int32Array.of(1), 1);
    expectWithin((residue * Math.sqrt(n)) / (sigma * Math.sqrt(1 - q)), given.signalToNoise.expected, {
      rel: 1e-10,
      unit: '1',
      why: 'a closed form',
    });
  });
});

/** Largest signal residue over all boxes between two of the points, phase by phase: no bins at all. */
function bruteForce(
  times: Float64Array,
  values: Float64Array,
  weights: Float64Array,
  periodDays: number,
  shortest: number,
  longest: number,
): number {
  const total = weights.reduce((sum, w) => sum + w, 0);
  const mean = values.reduce((sum, x, i) => sum + weights[i]! * x, 0) / total;
  const phases = Array.from(times, (time, i) => ({ at: time / periodDays - Math.floor(time / periodDays), i })).sort((a, b) => a.at - b.at);
  let best = 0;
  for (let a = 0; a < phases.length; a++) {
    let r = 0;
    let s = 0;
    for (let b = 0; b < phases.length; b++) {
      const { at, i } = phases[(a + b) % phases.length]!;
      const width = at - phases[a]!.at + (at < phases[a]!.at ? 1 : 0);
      if (width * periodDays > longest) break;
      r += weights[i]! / total;
      s += (weights[i]! * (values[i]! - mean)) / total;
      if (width * periodDays >= shortest && s < 0) best = Math.max(best, Math.sqrt((s * s) / (r * (1 - r))));
    }
  }
  return best;
} // prettier-ignore

describe('the search over a grid', () => {
  const random = RandomStream.fromSeed(41);
  const n = 1500;
  const times = Float64Array.from({ length: n }, () => random.uniformBetween(0, 40)).sort();
  const values = times.map((time) => {
    const phase = time / 3.7 - Math.floor(time / 3.7);
    return random.normal() - (phase > 0.3 && phase < 0.34 ? 3 : 0);
  });
  const weights = times.map(() => random.uniformBetween(0.5, 2));
  const grid = {
    frequenciesPerDay: Float64Array.of(1 / 5, 1 / 3.7, 1 / 2.9),
    durationsAt: (_period: number, out: Float64Array): number => {
      out.set([0.08, 0.11, 0.15, 0.2]);
      return 4;
    },
  };

  it('comes close to the best box among all points, binning and joining included', () => {
    const search = new BoxSearch({ timesDays: times, values, weights }, grid);
    const exact = bruteForce(times, values, weights, 3.7, 0.06, 0.22);
    const share = search.signalResidue[1]! / exact;
    expect(share).toBeLessThan(1.0001);
    // Bins, joining and durations of the ladder together; the period is exact here.
    expect(share).toBeGreaterThan(0.9);
    const peak = search.peakAt(1);
    const phase = peak.midTimeDays / 3.7 - Math.floor(peak.midTimeDays / 3.7);
    expectWithin(phase, 0.32, { abs: 0.004, unit: 'turns', why: 'half a bin of 1/256 and a box step' });
  });

  it('does not care about the origin of time, and leaves out points without weight', () => {
    const moved = times.map((time) => time + 2000);
    const spoilt = values.map((value, i) => (i % 50 === 0 ? -1e3 : value));
    const kept = weights.map((w, i) => (i % 50 === 0 ? 0 : w));
    const one = new BoxSearch({ timesDays: times, values, weights: kept }, grid, 'exact');
    const other = new BoxSearch({ timesDays: moved, values: spoilt, weights: kept }, grid, 'exact');
    one.signalResidue.forEach((value, j) => {
      expectWithin(other.signalResidue[j]!, value, {
        rel: 1e-6,
        unit: '1',
        why: 'same ticks about the middle',
      });
    });
  });
});
