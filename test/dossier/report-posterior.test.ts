import { describe, expect, it } from 'vitest';

import { report } from '../../src/dossier/report.js';
import type { CompanionRecord, PosteriorDraws, PosteriorRecord, Solved } from '../../src/solving/types.js';
import { drawsOf, gaussians, posteriorRecord, uniformGrid } from '../support/posterior-fixture.js';
import { companionFixture, fixed, quantity, solvedFixture } from '../support/solved-record-fixture.js';

const NOTHING = { charts: [], files: [] };
const NO_DRAWS = drawsOf({ none: [0, 0] });

function sampled(
  changes: Partial<PosteriorRecord> = {},
  draws: PosteriorDraws = NO_DRAWS,
  companion: CompanionRecord = companionFixture(),
): Solved {
  const record = { posterior: posteriorRecord(changes) };
  return { ...solvedFixture({ record, companions: [companion] }), posterior: draws };
}

function section(text: string, heading: string): string {
  return text.split(`## ${heading}\n`)[1]!.split('\n## ')[0]!;
}

const open = (solved: Solved): string =>
  section(report(solved, NOTHING), 'What is well determined and what is not');
const sure = (solved: Solved): string => section(report(solved, NOTHING), 'How sure this is');

describe('"How sure this is" with a posterior', () => {
  it('gives method, chains, draws and diagnostics in words', () => {
    const text = sure(sampled());
    expect(text).toContain('8000 draws from the posterior in 4 chains (NUTS), after 300 draws of warm-up');
    expect(text).toContain('The chains have converged: the largest rank-normalised R̂ is 1.003');
    expect(text).toContain('2100 (bulk) and 1900 (tails)');
    expect(text).toContain('No draw diverged.');
    expect(text).toContain('E-BFMI 0.91');
    expect(text).toContain('A limit marked 95 % has 95 % of the draws below it');
  });

  it.each(['draw-limit', 'interrupted'] as const)('never says of chains that stopped (%s) that they converged', (status) => {
    const text = sure(sampled({ status, rHatMax: 1.03, bulkEssMin: 150, tailEssMin: 90 }));
    expect(text).not.toContain('chains have converged');
    expect(text).toContain('R̂ is 1.030 where less than 1.01 is required');
    expect(text).toContain('provisional');
    expect(text).toContain(status === 'interrupted' ? 'was interrupted' : 'at the limit of draws');
  }); // prettier-ignore

  it('gives ln B with its error, the odds and for which side they are, and the scale', () => {
    const base = companionFixture();
    const evidence = {
      ...base.evidence,
      marginal: { logBayesFactor: 12.34, standardError: 0.1 },
      eccentricity: { ...base.evidence.eccentricity!, marginal: { logBayesFactor: -3, standardError: 0.1 } },
    };
    const text = sure(sampled({}, NO_DRAWS, { ...base, evidence }));
    // e^12.34 = 228 662; e^3 = 20.1
    expect(text).toContain('ln B = 12.3 ± 0.1, odds of 2 × 10⁵ : 1 for the companion (very strong)');
    expect(text).toContain('ln B = −3.0 ± 0.1, odds of 20 : 1 for a circular one');
    expect(text).toContain('Kass & Raftery 1995, ln B from 1 to 3 is positive evidence');
    expect(sure(sampled())).toContain('ln B is not given for its presence and its eccentricity');
    expect(sure(sampled())).not.toContain('Kass');
    expect(sure(solvedFixture())).not.toContain('ln B');
  });

  it('lists the priors among the assumptions', () => {
    const text = section(report(sampled(), NOTHING), 'What these numbers assume');
    expect(text).toContain('- Priors: period log-uniform between 1 d and 900 d.');
  });
});

describe('"What is well determined and what is not"', () => {
  it('turns intervals into relative errors', () => {
    // Half widths over values of the fixture: 0.0141/41.6321 = 1/2953; 0.552/38.41 = 1.44 %; 0.01295/0.352 = 3.7 %; 0.02345/0.7123 = 3.3 %.
    const text = open(solvedFixture());
    expect(text).toContain('well determined: period (1 part in 3000), semi-amplitude (1.4 %), eccentricity (3.7 %), minimum mass (m sin i) (3.3 %)');
    expect(text).toContain('The argument of periastron of b is known to ± 2.1°');
    expect(text).not.toMatch(/correlated|Gaussian|modes/);
  }); // prettier-ignore

  it('sorts what is known worse into classes of its own', () => {
    const base = companionFixture();
    const elements = { ...base.elements, semiAmplitude: quantity(10, 2, 'm/s'), period: quantity(900, 450, 'd') };
    const text = open(solvedFixture({ companions: [{ ...base, elements }] }));
    expect(text).toContain('fairly determined: semi-amplitude (20 %)');
    expect(text).toContain('poorly determined: period (50 %)');
    // The fixture's velocities span 489.875 d; the interval of the period is 450 .. 1350 d.
    expect(text).toContain('The period of b may be longer than the 489.88 d of the data');
    const longer = { ...elements, period: quantity(900, 100, 'd') };
    expect(open(solvedFixture({ companions: [{ ...base, elements: longer }] }))).toContain('The period of b is longer');
  }); // prettier-ignore

  it('says that an eccentricity is compatible with zero, with the 95 % limit of the draws, everywhere the same', () => {
    const base = companionFixture();
    const elements = { ...base.elements, eccentricity: quantity(0.02, 0.018, '') };
    const draws = drawsOf({ 'companions.b.elements.eccentricity': uniformGrid(1999, 0.1) });
    const solved = sampled({}, draws, { ...base, elements });
    // The 95 % point of an even grid from 0 to 0.1.
    expect(open(solved)).toContain('The eccentricity of b is compatible with zero: &lt; 0.095 (95 %)');
    const whole = report(solved, NOTHING);
    expect(whole).toContain('an orbit whose eccentricity is &lt; 0.095 (95 %)');
    expect(whole).toContain('| eccentricity | &lt; 0.095 (95 %) |');
    expect(whole).not.toMatch(/eccentricity.*84 %/);
  });

  it('gives jitters that may be zero the limit of their draws', () => {
    const draws = drawsOf({ 'velocity.instruments.south.jitter': uniformGrid(1999, 2) });
    const solved = sampled({}, draws);
    expect(open(solved)).toContain(
      'the jitter of north (&lt; 1.3 m/s (84 %)) and south (&lt; 1.9 m/s (95 %))',
    );
    expect(report(solved, NOTHING)).toContain('| &lt; 1.9 (95 %) |');
  });

  it('calls an argument of periastron open when its interval spans more than 120°', () => {
    const base = companionFixture();
    const at = (half: number): string =>
      open(solvedFixture({ companions: [{ ...base, elements: { ...base.elements, argumentOfPeriastron: quantity(90, half, 'deg') } }] }));
    expect(at(61)).toContain('argument of periastron of b is undetermined: its interval spans 122° of 360°');
    expect(at(59)).toContain('known to ± 59°');
    const elements = { ...base.elements, argumentOfPeriastron: fixed(90, 'deg') };
    expect(open(solvedFixture({ companions: [{ ...base, elements }] }))).not.toContain('argument of periastron');
  }); // prettier-ignore

  it('names strong correlations and odd shapes from the draws, and neither where there is none', () => {
    const one = gaussians(4000, 11);
    const other = gaussians(4000, 12);
    const plain = drawsOf({
      'companions.b.elements.period': one,
      'companions.b.elements.semiAmplitude': other,
    });
    expect(open(sampled({}, plain))).not.toMatch(/correlated|Gaussian/);
    const tied = drawsOf({
      'companions.b.elements.period': one,
      'velocity.instruments.north.zeroPoint': one.map((x, i) => -x + 0.2 * other[i]!),
      'companions.b.elements.semiAmplitude': other.map((x) => Math.exp(x)),
    });
    const text = open(sampled({}, tied));
    // The correlation of -x + 0.2 y with x is -1/sqrt(1.04) = -0.98; a log-normal has sides of e : 1.
    expect(text).toMatch(/period of b with zero point of north \(−0\.9[78]\)/);
    expect(text).toMatch(/semi-amplitude of b \(longer above than below, 2\.[5-9] : 1\)/);
    expect(text).not.toContain('with semi-amplitude');
  });

  it('lists modes with their shares and says that they are never averaged; the first paragraph warns', () => {
    const mode = (period: number, weight: number) => ({ periods: [period], logEvidence: 0, standardError: 0, weight }); // prettier-ignore
    const solved = sampled({ modes: [mode(41.6321, 0.82), mode(0.97921, 0.18)] });
    expect(open(solved)).toContain('**The posterior has 2 modes**: 41.6321 d (82 %), 0.97921 d (18 %)');
    expect(open(solved)).toContain('modes are never averaged');
    expect(section(report(solved, NOTHING), 'What is there')).toContain('beside it 0.97921 d (18 %) share');
    expect(report(sampled(), NOTHING)).not.toMatch(/ modes|more than one period/);
  });

  it('is left out when there is no usable solution', () => {
    const { fit } = solvedFixture().record;
    const failed = solvedFixture({ record: { fit: { ...fit, status: 'failed', usable: false } } });
    expect(report(failed, NOTHING)).not.toContain('well determined');
  });

  it('shows hostile instruments as text', () => {
    const hostile = report(solvedFixture({ names: ['<b>', '[x](y)'] }), NOTHING);
    expect(hostile).not.toMatch(/<b>|\[x\]\(/);
  });
});
