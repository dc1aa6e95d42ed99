import { describe, expect, it } from 'vitest';

import { logBayesFactor, oddsOf, strengthOf } from '../../src/dossier/evidence-words.js';
import {
  divergenceSentence,
  energySentence,
  essText,
  missedRequirements,
  modeText,
  rHatText,
  shownModes,
} from '../../src/dossier/posterior-words.js';
import { posteriorRecord } from '../support/posterior-fixture.js';

const factor = (
  logBayes: number,
  standardError = 0.1,
): { logBayesFactor: number; standardError: number } => ({
  logBayesFactor: logBayes,
  standardError,
});

describe('Bayes factors in words', () => {
  it.each([
    [12.34, 0.1, '12.3 ± 0.1'],
    [148.6301, 0.0144, '148.63 ± 0.01'],
    [-2.89, 0.06, '-2.89 ± 0.06'],
    [18.5, 3.2, '19 ± 3'],
    [5, 0, '5.00 ± 0.01'], // an estimate is never without error
  ])('ln B %d with error %d', (value, error, want) => {
    expect(logBayesFactor(factor(value, error), 'text')).toBe(want);
  });

  it('has the minus sign of print in the report', () => {
    expect(logBayesFactor(factor(-2.89, 0.06), 'markdown')).toBe('−2.89 ± 0.06');
  });

  it.each([
    [12.3, '2 × 10⁵ : 1'], // e^12.3 = 219 696
    [-3, '20 : 1'], // e^3 = 20.09, for the other side
    [0, '1 : 1'],
    [9.2, '9900 : 1'], // e^9.2 = 9897
    [11.475, '1 × 10⁵ : 1'], // e^11.475 = 96 278, 9.6 × 10⁴ to one digit
    [800, '3 × 10³⁴⁷ : 1'], // 800 / ln 10 = 347.4356, 10^0.4356 = 2.73; beyond a double
  ])('odds of ln B %d', (value, want) => {
    expect(oddsOf(factor(value), 'markdown')).toBe(want);
  });

  it('gives no digits that its error does not carry', () => {
    // 18.5 / ln 10 = 8.03
    expect(oddsOf(factor(18.5, 0.8), 'markdown')).toBe('about 10⁸ : 1');
    expect(oddsOf(factor(18.5, 0.8), 'text')).toBe('about 1e8 : 1');
  });

  it('names the steps of Kass & Raftery 1995 (2 ln B = 2, 6, 10), whatever the side', () => {
    expect([0.9, 1.1, 2.9, 3.1, 4.9, 5.1, -6].map(strengthOf)).toEqual([
      'undecided', 'positive', 'positive', 'strong', 'strong', 'very strong', 'very strong',
    ]); // prettier-ignore
  });
});

describe('diagnostics in words', () => {
  it('never rounds a missed requirement into a met one, nor the other way', () => {
    expect(rHatText(posteriorRecord({ rHatMax: 1.00996 }))).toBe('1.009');
    expect(rHatText(posteriorRecord({ rHatMax: 1.01004 }))).toBe('1.010');
    expect(essText(399.99)).toBe('399');
  });

  it('names each requirement that was missed, and none of those that were met', () => {
    expect(missedRequirements(posteriorRecord())).toEqual([]);
    const missed = missedRequirements(
      posteriorRecord({ status: 'draw-limit', rHatMax: 1.02, tailEssMin: 120.5 }),
    );
    expect(missed).toHaveLength(2);
    expect(missed[0]).toContain('R̂ is 1.020');
    expect(missed[1]).toContain('(tails) is 120');
  });

  it('speaks of divergent draws and of slow energies only where there are any', () => {
    expect(divergenceSentence(posteriorRecord())).toBe('No draw diverged.');
    expect(divergenceSentence(posteriorRecord({ divergences: 7 }))).toContain('7 draws of 8000 diverged');
    expect(energySentence(posteriorRecord({ ebfmiMin: 0.31 }))).toContain('move freely');
    expect(energySentence(posteriorRecord({ ebfmiMin: 0.29 }))).toContain('wider than the draws show');
  });

  it('lists modes above 1 %, and none when only one is left', () => {
    const mode = (period: number, weight: number) => ({ periods: [period], logEvidence: 0, standardError: 0, weight }); // prettier-ignore
    const both = posteriorRecord({ modes: [mode(41.6321, 0.815), mode(0.97921, 0.18), mode(20.8, 0.005)] });
    expect(shownModes(both).map((one) => modeText(one, 'text'))).toEqual([
      '41.6321 d (82 %)',
      '0.97921 d (18 %)',
    ]);
    expect(shownModes(posteriorRecord({ modes: [mode(41, 0.995), mode(1, 0.005)] }))).toEqual([]);
    expect(shownModes(null)).toEqual([]);
    expect(modeText({ ...mode(3.1, 0.5), periods: [3.1, 41] }, 'text')).toBe('3.1 d + 41 d (50 %)');
  });
});
