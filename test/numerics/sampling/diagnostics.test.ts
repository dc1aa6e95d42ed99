import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { autocovariance } from '../../../src/numerics/sampling/autocovariance.js';
import {
  basicEss,
  bulkEss,
  ebfmi,
  rankNormalisedRHat,
  tailEss,
} from '../../../src/numerics/sampling/index.js';
import { expectWithin } from '../../support/expect-within.js';
import { readReference } from './densities.js';

interface Measures {
  readonly rhat: number;
  readonly basicEss: number;
  readonly bulkEss: number;
  readonly tailEss: number;
}
const reference = readReference('diagnostics.json') as {
  source: string;
  expected: Readonly<Record<string, Measures>>;
};
const { chains: given } = readReference('chains.json') as {
  chains: Readonly<Record<string, readonly number[][]>>;
};
const autoregressive = readReference('autoregressive.json') as {
  source: string;
  theory: number;
  chain: number[];
};

function setNamed(name: string): Float64Array[] {
  return given[name]!.map((chain) => Float64Array.from(chain));
}

function normals(chains: number, draws: number, seed: number): Float64Array[] {
  const random = RandomStream.fromSeed(seed);
  return Array.from({ length: chains }, () => Float64Array.from({ length: draws }, () => random.normal()));
}

describe('diagnostics against outside programs', () => {
  const bound = {
    rel: 1e-10,
    unit: '1',
    why: 'values printed to 15 digits; measured worst 5e-14 (inverse normal, transforms)',
  };
  for (const [name, expected] of Object.entries(reference.expected)) {
    it(`set "${name}" (reference/sampling/diagnostics.json: ${reference.source})`, () => {
      const chains = setNamed(name);
      expectWithin(rankNormalisedRHat(chains), expected.rhat, bound);
      expectWithin(basicEss(chains), expected.basicEss, bound);
      expectWithin(bulkEss(chains), expected.bulkEss, bound);
      expectWithin(tailEss(chains), expected.tailEss, bound);
    });
  }

  it('gives 4000 / 19 effective draws, within a factor of 2, for an autoregressive chain (reference/sampling/autoregressive.json)', () => {
    const chain = Float64Array.from(autoregressive.chain);
    const steps = chain.length / basicEss([chain]);
    expectWithin(steps, autoregressive.theory, {
      rel: 0.5,
      unit: 'draws',
      why: 'one chain of 200 correlation lengths; a windowed estimate of the same chain is 13.98',
    });
  });
});

describe('diagnostics as properties', () => {
  it('call no set converged that is not: R-hat >= 1.01 or an effective number <= 400 for four of the five sets', () => {
    const isConverged = (name: string): boolean => {
      const chains = setNamed(name);
      return rankNormalisedRHat(chains) < 1.01 && bulkEss(chains) > 400 && tailEss(chains) > 400;
    };
    expect(Object.keys(given).filter(isConverged)).toEqual(['white']);
  });

  it('call two modes and a short random walk unconverged, independent draws converged', () => {
    const modes = normals(4, 500, 1).map((chain, k) => chain.map((x) => x + (k % 2 === 0 ? 8 : -8)));
    expect(rankNormalisedRHat(modes)).toBeGreaterThan(1.5);
    expect(bulkEss(modes)).toBeLessThan(40);
    const walks = normals(4, 500, 2).map((chain) => {
      let place = 0;
      return chain.map((step) => (place += step));
    });
    expect(rankNormalisedRHat(walks)).toBeGreaterThan(1.05);
    expect(bulkEss(walks)).toBeLessThan(100);
    const independent = normals(4, 500, 3);
    expect(rankNormalisedRHat(independent)).toBeLessThan(1.01);
    expectWithin(bulkEss(independent), 2000, { rel: 0.15, unit: 'draws', why: 'noise of the estimate' });
    expectWithin(tailEss(independent), 2000, { rel: 0.15, unit: 'draws', why: 'noise of the estimate' });
  });

  it('see a single chain that drifts', () => {
    const drifting = normals(1, 1000, 4).map((chain) => chain.map((x, k) => x + 0.002 * k));
    expect(rankNormalisedRHat(drifting)).toBeGreaterThan(1.1);
  });

  it('do not change under an increasing function, for ranks (Cauchy draws and their arctangents)', () => {
    const angles = normals(4, 300, 5).map((chain) => chain.map((x) => Math.atan(x)));
    const wild = angles.map((chain) => chain.map((angle) => 100 + 5 * Math.tan(angle)));
    expect(bulkEss(wild)).toBe(bulkEss(angles));
    expect(tailEss(wild)).toBe(tailEss(angles));
  });

  it('let ties share a rank and leave the middle draw of an odd length out', () => {
    const dice = normals(3, 301, 6).map((chain) => chain.map((x) => Math.round(x)));
    const changed = dice.map((chain) => chain.map((x, k) => (k === 150 ? 1e6 : x)));
    expect(bulkEss(dice)).toBeGreaterThan(500);
    expect(basicEss(changed)).toBe(basicEss(dice));
    // The order of equal values must not matter: exchanging chains exchanges nothing else.
    expectWithin(bulkEss([...dice].reverse()), bulkEss(dice), {
      rel: 1e-12,
      unit: '1',
      why: 'order of sums',
    });
  });

  it('give NaN, not a number that looks good, for constant and non-finite chains', () => {
    const constant = [new Float64Array(100).fill(2459000.5), new Float64Array(100).fill(2459000.5)];
    const broken = normals(2, 100, 7);
    broken[1]![40] = NaN;
    const endless = normals(2, 100, 8);
    endless[0]![3] = Infinity;
    for (const measure of [rankNormalisedRHat, basicEss, bulkEss, tailEss])
      for (const chains of [constant, broken, endless]) expect(measure(chains)).toBeNaN();
  });

  it('refuse no chains, short chains and unequal chains', () => {
    for (const measure of [rankNormalisedRHat, basicEss, bulkEss, tailEss]) {
      expect(() => measure([])).toThrow(/0 chains of 0 draws/);
      expect(() => measure([new Float64Array(7)])).toThrow(/at least one of 8/);
      expect(() => measure([new Float64Array(8), new Float64Array(9)])).toThrow(/8, 9 draws/);
    }
  });
});

describe('ebfmi', () => {
  it('is 2 for independent energies, 1 - correlation of neighbours times 2 in general (Betancourt 2016)', () => {
    const [white] = normals(1, 20000, 9);
    expectWithin(ebfmi(white!), 2, { abs: 0.06, unit: '1', why: 'four times 2/sqrt(20000)' });
    let last = 0;
    const slow = white!.map((x) => (last = 0.9 * last + x));
    expectWithin(ebfmi(slow), 0.2, { abs: 0.03, unit: '1', why: 'noise at 1000 correlation lengths' });
  });

  it('by hand: energies 1, 2, 4, 5: steps 1 + 4 + 1 over departures 4 + 1 + 1 + 4', () => {
    expect(ebfmi(Float64Array.of(1, 2, 4, 5))).toBe(0.6);
    expect(ebfmi(Float64Array.of(3, 3, 3))).toBeNaN();
    expect(() => ebfmi(Float64Array.of(1, 2))).toThrow(/2 energies are too few/);
  });
});

describe('autocovariance', () => {
  it('equals direct sums at every lag (lengths 1 to 70 and 500, mean 1000)', () => {
    const random = RandomStream.fromSeed(10);
    for (const n of [...Array.from({ length: 70 }, (_, k) => k + 1), 500]) {
      const series = Float64Array.from({ length: n }, () => 1000 + random.normal());
      const mean = series.reduce((sum, x) => sum + x / n, 0);
      const got = autocovariance(series);
      expect(got.length).toBe(n);
      for (let lag = 0; lag < n; lag++) {
        let sum = 0;
        for (let i = 0; i + lag < n; i++) sum += (series[i]! - mean) * (series[i + lag]! - mean);
        expectWithin(got[lag]!, sum / n, { abs: 1e-12, unit: '1', why: 'rounding of the mean 1000' });
      }
    }
  });
});
