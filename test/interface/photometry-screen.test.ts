import { describe, expect, it } from 'vitest';

import { solutionScreen } from '../../src/cli/screens/solution-screen.js';
import { makePhotometrySolved } from '../support/photometry-fixture.js';

const plain = (_kind: string, text: string): string => text;

describe('the screen of a solution with transits', () => {
  const screen = solutionScreen(
    makePhotometrySolved({ companions: 2, cadenceMinutes: 10 }),
    'dossier/',
    plain,
  );

  it('says what was observed and how well it is fitted', () => {
    const [title, ...data] = screen.split('\n');
    expect(title).toBe('Vellamo: 2 companions');
    expect(
      data
        .slice(0, 2)
        .map((line) => line.trim())
        .join(' '),
    ).toMatch(
      /^38 velocities, 3 light curves, 28 mid-times in \d+(\.\d)? d; rms [\d.]+ m\/s, \d+ \.\. \d+ ppm, 0\.71 min$/,
    );
  });
  it('gives radius, shape and depth of each transit, and no guess about it', () => {
    expect(screen).toContain('radius                0.941 ± 0.017 R_jup');
    expect(screen).toContain('impact parameter      0.320 ± 0.050');
    expect(screen).toContain('light lost            10289 ± 55 ppm');
    expect(screen).not.toContain('transit probability');
  });
  it('lists light curves, tables of mid-times and the density', () => {
    expect(screen).toMatch(/Hill telescope\s+r\s+300\s+< 130 \(84 %\)\s+\d+/);
    expect(screen).toMatch(/old-c\.csv\s+c\s+14/);
    expect(screen).toContain('density of the star  1.270 ± 0.060 g/cm3 from the transits');
    expect(screen).toContain('given 1.61 ± 0.11 g/cm3, 2.7 sigma apart');
  });
  it('fits a terminal', () => {
    for (const line of screen.split('\n')) expect(line.length, line).toBeLessThanOrEqual(80);
  });
});

it('without velocities the screen speaks of none', () => {
  const screen = solutionScreen(makePhotometrySolved({ velocities: false, cadenceMinutes: 10 }), 'd/', plain);
  expect(screen).not.toContain('m/s');
  expect(screen).not.toContain('velocities');
  expect(screen).not.toContain('semi-amplitude');
});

it('many tables are counted, and hostile names are made harmless', () => {
  const solved = makePhotometrySolved({ cadenceMinutes: 30, names: ['a\u001b[31m', 'b', 'c', 'd'] });
  const { photometry } = solved.record;
  const tables = Array.from({ length: 13 }, () => photometry!.lightCurves[0]!);
  const record = { ...solved.record, photometry: { ...photometry!, lightCurves: tables } };
  const screen = solutionScreen({ ...solved, record }, 'd/', plain);
  expect(screen).toContain('and 3 more light curves');
  expect(screen).not.toContain('\u001b');
});
