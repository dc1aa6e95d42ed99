import { describe, expect, it } from 'vitest';

import { columnsOf } from '../../src/cli/screens/layout.js';
import { periodsJson, periodsScreen } from '../../src/cli/screens/periods-screen.js';
import { solutionScreen } from '../../src/cli/screens/solution-screen.js';
import type { PosteriorRecord, SearchStage, WindowFunction } from '../../src/solving/types.js';
import { drawsOf, posteriorRecord, uniformGrid } from '../support/posterior-fixture.js';
import { companionFixture, fixed, solvedFixture, unknown } from '../support/solved-record-fixture.js';

const plain = (_kind: unknown, text: string): string => text;

describe('columnsOf', () => {
  it('aligns columns to their widest cell, numbers to the right', () => {
    expect(columnsOf([['a', '1'], ['bb', '22']], [1])).toEqual(['a    1', 'bb  22']); // prettier-ignore
  });
});

describe('solutionScreen', () => {
  const text = solutionScreen(solvedFixture(), 'dossier-vellamo/', plain);

  it('is one screen: at most 40 lines of at most 80 columns', () => {
    const lines = text.split('\n');
    expect(lines.length).toBeLessThanOrEqual(40);
    expect(lines.filter((line) => line.length > 80)).toEqual([]);
  });

  it('shows elements, mass, evidence, the best rival, instruments and where the dossier is', () => {
    // Rounded by hand from the fixture to two digits of the error.
    for (const part of [
      'Vellamo: 1 companion; 4 velocities',
      '41.632 ± 0.014 d',
      '38.41 ± 0.55 m/s',
      '0.352 +0.014 -0.012',
      '128.4 ± 2.1 deg',
      '0.712 +0.026 -0.021 M_jup',
      'false alarm 3e-21; BIC gains 297.9',
      '0.97921 d, sidereal-day alias, ln L -22.4; 1 more',
      '-4.21 ± 0.33 m/s/yr',
      'north   2    118.00 ± 0.61   < 1.3 (84 %)',
      'dossier-vellamo/',
      '!  There are fewer velocities than free parameters.',
    ])
      expect(text).toContain(part);
  });

  it('says circular for a circular orbit, and shows no element that has no meaning then', () => {
    const base = companionFixture();
    const elements = { ...base.elements, eccentricity: fixed(0, ''), argumentOfPeriastron: fixed(90, 'deg') };
    const circular = solutionScreen(
      solvedFixture({ companions: [{ ...base, circular: true, elements }] }),
      'd',
      plain,
    );
    expect(circular).toContain('0 (circular orbit)');
    expect(circular).not.toContain('periastron');
  });

  it('shows the mass function when no mass can be derived', () => {
    const base = companionFixture();
    const derived = {
      ...base.derived,
      minimumMass: unknown('M_jup', 'no star mass'),
      semiMajorAxis: unknown('au', 'no star mass'),
    };
    const massless = solutionScreen(solvedFixture({ companions: [{ ...base, derived }] }), 'd', plain);
    expect(massless).toContain('(2.01 ± 0.11)e-10 M_sun');
    expect(massless).not.toContain('minimum mass');
  });

  it('says what the posterior is worth, in 80 columns', () => {
    const base = companionFixture();
    const marginal = { logBayesFactor: 148.6301, standardError: 0.0144 };
    const eccentricity = { ...base.evidence.eccentricity!, marginal: { ...marginal, logBayesFactor: -2.9 } };
    const companions = [{ ...base, evidence: { ...base.evidence, marginal, eccentricity } }];
    const draws = drawsOf({ 'velocity.instruments.south.jitter': uniformGrid(1999, 2) });
    const mode = (period: number, weight: number) => ({ periods: [period], logEvidence: 0, standardError: 0, weight }); // prettier-ignore
    const screen = (changes: Partial<PosteriorRecord>): string => {
      const record = { posterior: posteriorRecord(changes) };
      return solutionScreen({ ...solvedFixture({ companions, record }), posterior: draws }, 'd', plain);
    };
    const converged = screen({});
    expect(converged).toContain('posterior, converged; intervals hold 68.3 %');
    expect(converged).toContain('4 chains × 2000 draws; R̂ 1.003, ESS 1900');
    expect(converged).toContain('ln B 148.63 ± 0.01; e > 0: ln B -2.90 ± 0.01');
    expect(converged).toMatch(/south .* < 1\.9 \(95 %\)/); // the 95 % point of an even grid from 0 to 2
    expect(converged).toMatch(/north .* < 1\.3 \(84 %\)/);
    expect(converged).not.toContain('modes');
    const bad = {
      rHatMax: 1.2,
      draws: 800_000,
      modes: [mode(41.6321, 0.6), mode(0.97921, 0.2), mode(1.0236, 0.2)],
    };
    for (const status of ['draw-limit', 'interrupted'] as const) {
      const unconverged = screen({ ...bad, status });
      expect(unconverged).toContain('posterior, NOT converged (');
      expect(unconverged).not.toContain('posterior, converged');
      expect(unconverged).toMatch(/modes +41\.6321 d \(60 %\), 0\.97921 d \(20 %\), 1\.0236 d \(20 %\);/);
      expect(unconverged.split('\n').filter((line) => line.length > 80)).toEqual([]);
    }
    expect(text).toContain('curvature at the solution; intervals hold 68.3 %');
  });

  it('says that nothing was found, or that the fit is unusable', () => {
    const { fit } = solvedFixture().record;
    const none = solvedFixture({ companions: [], record: { fit: { ...fit, usable: false } } });
    expect(solutionScreen(none, 'd', plain)).toContain('no companion found');
    const failed = solvedFixture({ record: { fit: { ...fit, usable: false, status: 'failed' } } });
    expect(solutionScreen(failed, 'd', plain)).toContain('no usable solution');
  });

  it('prints no control character of a label', () => {
    const hostile = solvedFixture({ target: 'a\u001b[31mb', names: ['n\u0007', 's\r'] });
    expect(solutionScreen(hostile, 'd\u001b', plain)).not.toMatch(/[\u0000-\u0009\u000b-\u001f]/);
  });
});

describe('periodsScreen', () => {
  const stage: SearchStage = {
    title: 'all velocities',
    companionsFitted: 0,
    frequenciesPerDay: Float64Array.from([0.01, 0.02]),
    power: Float64Array.from([0.1, 0.2]),
    levels: [],
    peaks: [
      { periodDays: 41.6321, power: 0.8123, deltaLogLikelihood: 50, falseAlarmProbability: 2e-9, semiAmplitudeMps: 38.21, kind: 'strongest' },
      { periodDays: 0.979212, power: 0.7, deltaLogLikelihood: 40, falseAlarmProbability: 0.02, semiAmplitudeMps: 35, kind: 'sidereal-day alias' },
    ],
    eccentricPeak: { periodDays: 41.63, eccentricity: 0.35, deltaLogLikelihood: 90, falseAlarmProbability: 1e-20 },
  }; // prettier-ignore
  const window: WindowFunction = {
    frequenciesPerDay: new Float64Array(0),
    power: new Float64Array(0),
    peaks: [{ frequencyPerDay: 1.0027379, periodDays: 0.99727, power: 0.61, name: 'sidereal day' }],
  };
  const { velocities } = solvedFixture();

  it('lists peaks with their false-alarm probability and kind, and the peaks of the window', () => {
    const text = periodsScreen('Vellamo', velocities, { stage, window }, plain);
    expect(text).toMatch(/41\.6321 +0\.812 +38\.2 +2e-9 +strongest/);
    expect(text).toMatch(/0\.979212 +0\.700 +35 +2 % +sidereal-day alias/);
    expect(text).toMatch(/0\.99727 +0\.610 +sidereal day/);
    expect(text).toContain('An eccentric shape fits better: 41.63 d with e about 0.35');
    expect(text.split('\n').filter((line) => line.length > 80)).toEqual([]);
  });

  it('says so when there is nothing', () => {
    const empty = { stage: { ...stage, peaks: [], eccentricPeak: null }, window: { ...window, peaks: [] } };
    const text = periodsScreen('Vellamo', velocities, empty, plain);
    expect(text).toContain('no peak in this range');
    expect(text).toContain('no strong peak');
  });

  it('leaves the long arrays out of the JSON', () => {
    const text = JSON.stringify(periodsJson('Vellamo', { stage, window }));
    expect(text).toContain('"falseAlarmProbability":0.02');
    expect(text).not.toContain('frequenciesPerDay');
  });
});
