import { describe, expect, it } from 'vitest';

import { report } from '../../src/dossier/report.js';
import type { SolutionRecord, Solved } from '../../src/solving/types.js';
import { makePhotometrySolved } from '../support/photometry-fixture.js';
import { quantity, unknown } from '../support/solved-record-fixture.js';

const NOTHING = { charts: [], files: ['solution.json', 'report.md', 'light-curve.csv', 'mid-times.csv'] };
const solved = makePhotometrySolved({ cadenceMinutes: 10 });
const text = report(solved, NOTHING);

/** The solution with some of its photometry replaced. */
function changed(changes: Partial<NonNullable<SolutionRecord['photometry']>>, base: Solved = solved): Solved {
  return { ...base, record: { ...base.record, photometry: { ...base.record.photometry!, ...changes } } };
}

describe('the report of a solution with transits', () => {
  it('has its sections in the order in which an observer asks', () => {
    expect(text.split('\n').filter((line) => line.startsWith('## '))).toEqual([
      '## What is there',
      '## What the light curves say',
      '## How sure this is',
      '## What is well determined and what is not',
      '## What else would fit',
      '## Mid-times',
      '## How the transits were found',
      '## Instruments',
      '## Light curves, baselines and noise',
      '## What these numbers assume',
      '## How this was made',
    ]);
  });

  it('says what was observed, and what the transits are like, rounded to the errors', () => {
    expect(text).toContain('The observations of Vellamo, 38 velocities, three light curves with');
    // Fixture: k = 0.095 ± 0.0006, b = 0.32 ± 0.05, a/R = 9.1 ± 0.14.
    expect(text).toContain('The radius ratio is 0.09500 ± 0.00060, the impact parameter 0.320 ± 0.050, the semi-major axis 9.10 ± 0.14 stellar radii'); // prettier-ignore
    expect(text).toMatch(/takes 10289 ± 55 ppm of the light .* \(band wide\)/);
    expect(text).toContain('for a star of 1.010 ± 0.020 R_sun');
  });

  it('lists tables, bands, events and what the search looked at', () => {
    expect(text).toContain('| Hill telescope | r | 300 | 300 | 60 |');
    expect(text).toContain('Its baseline is made of constant and time, for each transit anew');
    expect(text).toContain('Correlated noise: 310 ± 60 ppm with a time scale of 0.0210 ± 0.0060 d.');
    expect(text).toContain('| r | 0.450 ± 0.050 | 0.200 ± 0.080 | triangular |');
    expect(text).toMatch(/\| b \| 12 \| Hill telescope \| 300 \| 2459164\.\d{5} ± 0\.00028 \|/);
    expect(text).toContain('| `old-b.csv` | b | 14 |');
    expect(text).toContain('| no companion removed | 3.35118 | 39 | strongest |');
    // 8965 ± 90 against 9095 ± 85: 130 / 123.8.
    expect(text).toContain('has the same depth as the others (8965 ± 90 ppm against 9095 ± 85 ppm, 1.1 σ)');
    expect(text).toContain('- Companion b: found by the search for dips, ');
    expect(text).toContain('signal-to-noise ratio 61.2, efficiency 38, false-alarm probability 1 × 10⁻⁴⁰');
    expect(text).toContain('- dips every 0.913 d, 210 ppm deep: rests on one night');
    expect(text).toContain('- `light-curve.csv`: each point of a light curve that was fitted');
  });

  it('leaves out guesses about transits where these are seen', () => {
    expect(text).not.toContain('probability that it transits');
    expect(text).not.toContain('if it transits');
    expect(text).not.toContain('by a body of 1 R');
  });

  it.each([
    [0.8, 'The two agree.'],
    [2.7, 'keep an eye on it'],
    [-3.4, '3.4 σ apart: they disagree.** Light of another star'],
  ])('says what a tension of %d σ between the densities means', (starDensityTension, words) => {
    expect(report(changed({ starDensityTension }), NOTHING)).toContain(words);
  });

  it('says that there is no density to compare with', () => {
    const alone = changed({ starDensityGiven: unknown('g/cm3', 'no radius of the star is given'), starDensityTension: null }); // prettier-ignore
    expect(report(alone, NOTHING)).toContain(
      'there is nothing to compare it with (no radius of the star is given)',
    );
  });

  it('names unequal depths, a second dip and transits that come early or late', () => {
    const [vetting] = solved.photometry!.vettings;
    const [event] = solved.record.photometry!.events;
    const suspect: Solved = {
      ...changed({ events: [{ ...event!, oMinusC: quantity(3.1, 0.4, 'min') }] }),
      photometry: {
        ...solved.photometry!,
        vettings: [
          { ...vetting!, oddDepthPpm: 8000, secondary: { phase: 0.5, depthPpm: 900, sigmaPpm: 60 } },
        ],
      },
    };
    const words = report(suspect, NOTHING);
    expect(words).toContain('**Every second transit of b has another depth**');
    expect(words).toContain('**There is a second dip at phase 0.5**, 900 ± 60 ppm deep');
    expect(words).toContain(
      'One transit lies more than 3 σ from the ephemeris: cycle 0 of b in Moor survey.',
    );
  });
});

describe('the report without velocities', () => {
  const only = report(makePhotometrySolved({ velocities: false, cadenceMinutes: 10 }), NOTHING);

  it('says nothing of instruments, drifts or velocities that are not there', () => {
    expect(only).not.toContain('## Instruments');
    expect(only).not.toContain('drift');
    expect(only).not.toMatch(/\d velocities/);
    expect(only).not.toContain('Velocities are positive');
    // The one velocity left is that of the line distortion in transit, whose unit it is.
    expect(only.split('\n').filter((line) => line.includes('m/s'))).toHaveLength(1);
  });

  it('says that the pull on the star and the mass are unknown, and why', () => {
    expect(only).toContain('how it moves the star is unknown (there are no velocities)');
    expect(only).toContain('Its mass is not known: there are no velocities.');
    expect(only).toMatch(/leaves a scatter of .* ppm of the flux and 0\.71 min of the mid-times \(rms\)/);
  });
});

it('says what else the record may hold: means of rows, occultations, single events', () => {
  const { lightCurves, bands, detections } = solved.record.photometry!;
  const more = changed({
    lightCurves: [{ ...lightCurves[0]!, averaged: 5 }],
    bands: [{ ...bands[0]!, occultationDepths: { b: quantity(112, 31, 'ppm') } }],
    detections: [{ ...detections[0]!, how: 'one event', signalToNoise: null, efficiency: null, falseAlarmProbability: null, events: 1 }], // prettier-ignore
    refused: [{ period: null, depth: 5200, why: 'edge of a gap' }],
  });
  const words = report(more, NOTHING);
  expect(words).toContain('Each point of the fit is the mean of 5 neighbouring rows.');
  expect(words).toContain('Light lost in occultations: 112 ± 31 ppm by b in the band wide.');
  expect(words).toContain(
    '- Companion b: seen in one event only, so that the light does not give its period, one transit with data.',
  );
  expect(words).toContain('- a dip that does not return, 5200 ppm deep: edge of a gap');
});

it('labels are shown, not obeyed', () => {
  const hostile = makePhotometrySolved({
    names: ['<b>x</b>', 'a|b', '[l](http://x)', '*s*'],
    bands: ['`w`', '$r$', 'i'],
    cadenceMinutes: 30,
  });
  const words = report(hostile, NOTHING);
  expect(words).toContain('&lt;b&gt;x&lt;/b&gt;');
  expect(words).toContain('a\\|b');
  expect(words).not.toContain('<b>');
  expect(words).not.toContain('[l](');
});
