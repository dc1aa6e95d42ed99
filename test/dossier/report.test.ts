import { describe, expect, it } from 'vitest';

import { report } from '../../src/dossier/report.js';
import {
  companionFixture,
  fixed,
  quantity,
  solvedFixture,
  unknown,
} from '../support/solved-record-fixture.js';

const NOTHING = { charts: [], files: ['solution.json', 'report.md'] };

describe('report.md', () => {
  const text = report(solvedFixture(), NOTHING);

  it('has its sections in reading order', () => {
    const headings = text.split('\n').filter((line) => line.startsWith('## '));
    expect(headings).toEqual([
      '## What is there',
      '## How sure this is',
      '## What is well determined and what is not',
      '## What else would fit',
      '## Instruments',
      '## What these numbers assume',
      '## How this was made',
    ]);
  });

  it('states the orbit and the mass with their uncertainties', () => {
    // Rounded by hand from the fixture: 41.6321 ± 0.0141 d, 38.41 ± 0.552 m/s, 0.7123 +0.0257 -0.0212 M_jup.
    expect(text).toContain('goes round in 41.632 ± 0.014 d');
    expect(text).toContain('a semi-amplitude of 38.41 ± 0.55 m/s');
    expect(text).toContain('0.712 (+0.026, −0.021) M_jup for a star of 0.940 ± 0.030 M_sun');
  });

  it('states the conventions in words', () => {
    expect(text).toContain("The argument of periastron is that of the star's orbit");
    expect(text).toContain('the true anomaly is then 90° minus the argument of periastron');
    expect(text).toContain('positive when the star recedes');
  });

  it('lists the rivals, the warnings, the checksum and the command as it was typed', () => {
    expect(text).toContain('| 0.97921 | sidereal-day alias | 0.31 | −22.4 |');
    expect(text).toContain('There are fewer velocities than free parameters.');
    expect(text).toContain('ab'.repeat(32));
    expect(text).toContain("`tugline solve north.csv --star-mass '0.94 +- 0.03'`");
  });

  it('says when a rival cannot be told from the solution', () => {
    const rivals = [{ period: 0.97, kind: 'sidereal-day alias', deltaLogLikelihood: -1.2, eccentricity: 0 }];
    const close = report(solvedFixture({ companions: [{ ...companionFixture(), rivals }] }), NOTHING);
    expect(close).toContain('these data do not decide between the periods');
    expect(text).not.toContain('these data do not decide between the periods');
  });

  it('never calls a fit without a posterior a posterior, nor the other way round', () => {
    expect(text).toContain('Uncertainties come from the curvature');
    const posterior = { method: 'NUTS', chains: 4, draws: 8000, rHatMax: 1.003, bulkEssMin: 2100, tailEssMin: 1900, divergences: 0, warmup: 300, ebfmiMin: 0.9, status: 'converged' as const, logEvidence: -300, logEvidenceError: 0.02, modes: [], priors: [] }; // prettier-ignore
    const sampled = report(solvedFixture({ record: { posterior } }), NOTHING);
    expect(sampled).toContain('8000 draws from the posterior in 4 chains');
    expect(sampled).not.toContain('come from the curvature');
  });

  it('says when two sides of an interval are written as one', () => {
    expect(text).toContain('sides that differ by less than 10 % of their mean are written as one ±');
  });

  it('says that nothing was found, and that an unusable fit must not be cited', () => {
    const { fit } = solvedFixture().record;
    const none = report(
      solvedFixture({ companions: [], record: { fit: { ...fit, usable: false } } }),
      NOTHING,
    );
    expect(none).not.toContain('must not be cited');
    expect(none).toContain('# Vellamo: no companion');
    expect(none).toContain('show no companion that clears the thresholds');
    const failed = report(
      solvedFixture({ record: { fit: { ...fit, status: 'failed', usable: false } } }),
      NOTHING,
    );
    expect(failed).toContain('no usable solution');
    expect(failed).toContain('must not be cited');
  });

  it('does not claim an eccentricity for a circular orbit, nor a value where there is only a limit', () => {
    const base = companionFixture();
    const circular = report(
      solvedFixture({
        companions: [{ ...base, circular: true, elements: { ...base.elements, eccentricity: fixed(0, '') } }],
      }),
      NOTHING,
    );
    expect(circular).toContain('on a circular orbit');
    expect(circular).toContain('| eccentricity | 0 (fixed) |');
    const limit = report(
      solvedFixture({
        companions: [{ ...base, elements: { ...base.elements, eccentricity: quantity(0.02, 0.018, '') } }],
      }),
      NOTHING,
    );
    expect(limit).toContain('| eccentricity | &lt; 0.038 (84 %) |');
    expect(limit).not.toContain('e = 0.02');
  });

  it('gives the reason when the mass is not known', () => {
    const base = companionFixture();
    const derived = { ...base.derived, minimumMass: unknown('M_jup', 'the mass of the star is not known') };
    const massless = report(solvedFixture({ companions: [{ ...base, derived }] }), NOTHING);
    expect(massless).toContain('Its minimum mass (m sin i) is not known: the mass of the star is not known.');
  });

  it('shows hostile labels as text', () => {
    const hostile = report(
      solvedFixture({
        target: '<script>alert(1)</script>',
        names: ['a|b', '[x](javascript:1)'],
        path: '../`evil`.csv',
      }),
      NOTHING,
    );
    expect(hostile).not.toContain('<script>');
    expect(hostile).not.toContain('[x](');
    expect(hostile).toContain('| a\\|b |');
    expect(hostile).toContain('``../`evil`.csv``');
  });

  it('refers only to charts that exist, with their captions', () => {
    expect(text).not.toContain('![');
    const charts = [
      { path: 'charts/velocities.png', caption: 'velocities *now*' },
      { path: 'charts/velocities.svg', caption: 'velocities *now*' },
      { path: 'charts/folded-b.png', caption: 'folded' },
    ];
    const illustrated = report(solvedFixture(), { ...NOTHING, charts });
    expect(illustrated.match(/!\[.*\]\([^)]*\)/g)).toEqual([
      '![velocities \\*now\\*](charts/velocities.png)',
      '![folded](charts/folded-b.png)',
    ]);
    expect(illustrated).toContain('*velocities \\*now\\**');
  });

  it('holds no not-a-number and no missing word', () => {
    expect(text).not.toMatch(/NaN|undefined|null|\[object/);
  });
});
