import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { binCounts } from '../../../src/dossier/charts/histogram.js';
import { rankCounts } from '../../../src/dossier/charts/rank-counts.js';
import { drawBottomLabels } from '../../../src/dossier/charts/small-panel.js';
import { plainText } from '../../../src/dossier/charts/text-runs.js';
import { thinnedIndices } from '../../../src/dossier/charts/thin-draws.js';
import { valueAxis } from '../../../src/dossier/charts/value-axis.js';
import { randomSource } from '../../support/solved-fixture.js';

describe('rankCounts', () => {
  it('counts as ranking one by one does', () => {
    const random = randomSource(6);
    const [chains, per, bins] = [3, 80, 12];
    const values = Float64Array.from({ length: chains * per }, (_, i) => random.gauss() + (i >= 160 ? 1 : 0));
    const counts = rankCounts(values, chains, per, bins);
    for (let chain = 0; chain < chains; chain += 1) {
      const brute = new Float64Array(bins);
      for (const value of values.subarray(chain * per, (chain + 1) * per)) {
        const rank = values.filter((other) => other < value).length;
        brute[Math.floor((rank * bins) / (chains * per))]! += 1;
      }
      expect(Array.from(counts[chain]!)).toEqual(Array.from(brute));
    }
  });
  it('fills every range equally over all chains, and shows a stray chain', () => {
    const random = randomSource(7);
    const values = Float64Array.from({ length: 4000 }, (_, i) => random.gauss() + (i < 1000 ? 3 : 0));
    const counts = rankCounts(values, 4, 1000, 20);
    for (let bin = 0; bin < 20; bin += 1) expect(counts.reduce((sum, own) => sum + own[bin]!, 0)).toBe(200);
    expect(counts[0]![19]!).toBeGreaterThan(190);
    expect(counts[0]![0]!).toBe(0);
  });
});

describe('thinnedIndices', () => {
  it('takes evenly from every chain, no more than wanted plus one a chain, and all where there are few', () => {
    fc.assert(
      fc.property(fc.nat(6), fc.nat(500), fc.integer({ min: 1, max: 900 }), (more, draws, most) => {
        const [chains, per] = [more + 1, draws + 1];
        const indices = Array.from(thinnedIndices(chains, per, most));
        const step = Math.max(1, Math.ceil((chains * per) / most));
        const brute = Array.from({ length: chains * per }, (_, i) => i).filter((i) => (i % per) % step === 0);
        expect(indices).toEqual(brute);
        expect(indices.length).toBeLessThanOrEqual(most + chains);
        if (chains * per <= most) expect(indices).toHaveLength(chains * per);
      }),
      { seed: 9, numRuns: 200 },
    );
  });
});

it('binCounts counts what lies inside, the upper end included', () => {
  expect(Array.from(binCounts(Float64Array.of(-0.1, 0, 0.49, 0.5, 1, 1.01), 0, 1, 2))).toEqual([2, 2]);
});

describe('valueAxis', () => {
  const symbol = [{ text: 'P', italic: true as const }];
  const title = (low: number, high: number): string =>
    plainText(valueAxis(symbol, 'd', low, high, 3, 5).title);

  it('takes up in its title what all labels share', () => {
    expect(title(3, 5)).toBe('P (d)');
    expect(title(41.58, 41.68)).toBe('P (d)');
    expect(title(2_460_412.2, 2_460_413.4)).toBe('P \u2212 2460413 (d)');
    expect(title(13.27, 13.282)).toBe('P \u2212 13.276 (10\u22123 d)');
    expect(title(-5_000_000.5, -4_999_999.5)).toMatch(/^P \+ 5000000/);
    expect(plainText(valueAxis(symbol, '', 0.2, 0.3, 3, 5).title)).toBe('P');
    expect(plainText(valueAxis(symbol, 'M_Jup', 1, 2, 3, 5).title)).toBe('P (MJup)');
  });

  it('labels times the power of ten plus the offset give the places of the ticks', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -7, max: 7, noNaN: true }),
        fc.double({ min: -6, max: 6.5, noNaN: true }),
        fc.boolean(),
        (logSpan, logMiddle, negative) => {
          const span = 10 ** logSpan;
          const middle = (negative ? -1 : 1) * 10 ** logMiddle;
          const axis = valueAxis(symbol, 'd', middle - span / 2, middle + span / 2, 3, 5);
          const words = plainText(axis.title).replaceAll('\u2212', '-');
          const offset = /^P ([-+]) ([\d.]+) \(/.exec(words);
          const power = /\(10(-?\d+) d\)$/.exec(words);
          const shift = offset === null ? 0 : Number(offset[2]) * (offset[1] === '-' ? 1 : -1);
          const scale = 10 ** Number(power?.[1] ?? 0);
          expect(axis.ticks.length).toBeGreaterThanOrEqual(1);
          for (const { value, text } of axis.ticks) {
            const read = shift + Number(text.replace('\u2212', '-')) * scale;
            // Doubles near the middle are 2e-16 of it apart.
            expect(Math.abs(read - value)).toBeLessThanOrEqual(1e-6 * span + 1e-15 * Math.abs(middle));
            expect(value).toBeGreaterThanOrEqual(axis.low - 1e-6 * span);
            expect(value).toBeLessThanOrEqual(axis.high + 1e-6 * span);
            expect(text.replace('\u2212', '').length, `${text} of ${words}`).toBeLessThanOrEqual(6);
          }
        },
      ),
      { seed: 12, numRuns: 500 },
    );
  });
});

it('labels below a panel that would touch are left out, and none reaches into the next panel', () => {
  const drawn: { text: string; x: number }[] = [];
  const ctx = {
    measureText: (text: string) => ({ width: 10 * text.length }),
    fillText: (text: string, x: number) => drawn.push({ text, x }),
  } as unknown as CanvasRenderingContext2D;
  const ticks = Array.from({ length: 11 }, (_, k) => ({ value: k / 10, text: (k / 10).toFixed(1) }));
  const box = { left: 50, top: 0, width: 100, height: 20 };
  drawBottomLabels({ ctx, widthPx: 200, heightPx: 50 }, box, { low: 0, high: 1, ticks, title: [] });
  expect(drawn.length).toBeGreaterThanOrEqual(2);
  drawn.forEach(({ text, x }, index) => {
    const half = 5 * text.length;
    expect(Math.abs(x - (50 + 100 * Number(text)))).toBeLessThan(1e-9);
    expect(x - half).toBeGreaterThanOrEqual(47);
    expect(x + half).toBeLessThanOrEqual(153);
    if (index > 0) expect(x - half).toBeGreaterThan(drawn[index - 1]!.x + half);
  });
});
