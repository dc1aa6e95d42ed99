import { describe, expect, it } from 'vitest';
import { checkChoices, gatherObservations, parseAnyTable } from '../../src/observations/index.js';
import type { AnyTable, Case } from '../../src/observations/index.js';
import { expectWithin } from '../support/expect-within.js';
import { brief, caseIssues, caseOf, issuesOf, notice } from './helpers.js';
import { curveText, readAny, readCurve, readMidTimes, wiggle } from './photometry-helpers.js';

const PER_MAGNITUDE = 0.9210340371976184; // 0.4 ln 10

function tableOf(lines: string): Case['tables'][number] {
  return caseOf(`target: Vellamo\ntables:\n  - file: survey.csv\n${lines}`).tables[0]!;
}

describe('what a case says of light curves and mid-times', () => {
  it('reads every key of a light curve', () => {
    const request = tableOf(`    holds: light curve
    instrument: pier
    unit: mag
    error-unit: mmag
    time: BJD_TDB - 2450000
    exposure: 30 s
    band: R
    dilution: 0.05 +- 0.01
    baseline: [ airmass, time ]
    jitter: 0 .. 500 ppm
    noise: correlated
    columns: { time: 1, magnitude: 2, error: 3 }
`);
    expect(request).toMatchObject({
      path: 'cases/survey.csv', holds: 'light curve', instrument: 'pier', errorUnit: 'mmag', velocityUnit: null,
      timeScale: 'BJD_TDB', timeOffsetDays: 2450000, columns: { time: '1', magnitude: '2', error: '3' },
      lightCurve: { fluxUnit: 'mag', band: 'R', dilution: { value: 0.05, sigma: 0.01 }, baseline: ['airmass', 'time'], noise: 'correlated' },
    }); // prettier-ignore
    expectWithin(request.lightCurve!.exposureDays!, 30 / 86_400, {
      abs: 1e-18,
      unit: 'd',
      why: 'a rounding',
    });
    expect(request.lightCurve!.jitter).toEqual({ kind: 'range', low: 0, high: 500e-6 });
    expect(request.midTimes).toBeUndefined();
  });

  it.each([
    ['200 ppm', 2e-4],
    ['0.02 %', 2e-4],
    ['0.0002', 2e-4],
    ['1 mmag', 1e-3 * PER_MAGNITUDE],
    ['0.001 mag', 1e-3 * PER_MAGNITUDE],
  ])('reads a jitter of %s', (written, value) => {
    const jitter = tableOf(`    jitter: ${written}\n`).lightCurve!.jitter!;
    if (jitter.kind !== 'fixed') throw new Error('not fixed');
    expectWithin(jitter.value, value, { rel: 1e-14, unit: 'relative flux', why: 'a rounding' });
  });

  it('reads baselines of one word', () => {
    expect(tableOf('    baseline: auto\n').lightCurve!.baseline).toBe('auto');
    expect(tableOf('    baseline: none\n').lightCurve!.baseline).toEqual([]);
    expect(tableOf('    baseline: airmass\n').lightCurve!.baseline).toEqual(['airmass']);
  });

  it('reads the keys of mid-times', () => {
    const request = tableOf(
      '    holds: mid-times\n    companion: c\n    kind: occultation\n    error-unit: min\n',
    );
    expect(request).toMatchObject({ holds: 'mid-times', errorUnit: 'min', midTimes: { companion: 'c', kind: 'occultation' } }); // prettier-ignore
    expect(tableOf('    holds: light-curve\n').holds).toBe('light curve');
  });

  it('leaves a table of velocities as it was', () => {
    const request = tableOf('    unit: km/s\n    columns: { velocity: RV, error: e_RV }\n');
    expect(Object.keys(request).sort()).toEqual(['columns', 'instrument', 'path', 'timeOffsetDays', 'timeScale', 'velocityUnit']); // prettier-ignore
    expect(request.columns).toEqual({ velocity: 'RV', 'velocity-error': 'e_RV' });
  });

  it('reads star density, bands, and what a transit shows', () => {
    const theCase = caseOf(`target: Vellamo
star: { density: 1410 +- 60 kg/m3 }
tables: [ survey.csv ]
bands:
  R: { u1: 0.35 +- 0.05, u2: 0.2 }
  clear: { u2: 0.25 +- 0.1 }
companions:
  - { period: 3.2 d, radius-ratio: 0.08 .. 0.12, impact-parameter: 0.3 +- 0.1, occultation: true }
  - { period: 9 d }
`);
    expect(theCase.star.densityGcc).toEqual({ value: 1.41, sigma: 0.06 });
    expect({ ...theCase.bands }).toEqual({
      R: { u1: { value: 0.35, sigma: 0.05 }, u2: { value: 0.2, sigma: 0 } },
      clear: { u1: null, u2: { value: 0.25, sigma: 0.1 } },
    });
    const [first, second] = theCase.companions as Exclude<Case['companions'], 'auto' | number>;
    expect(first!.transit).toEqual({
      radiusRatio: { kind: 'range', low: 0.08, high: 0.12 },
      impactParameter: { kind: 'prior', value: 0.3, sigma: 0.1 },
      occultation: true,
    });
    expect(second!.transit).toBeUndefined();
  });

  it('names every mistake with line and key', () => {
    const issues = caseIssues(`target: Vellamo
star: { density: 0 }
tables:
  - file: survey.csv
    holds: spectra
    unit: magg
    exposure: 60
    dilution: 1.2
    noise: pink
    companion: a
    kind: eclipse
    bandd: R
bands:
  R: {}
companions:
  - { radius-ratio: -0.1, inclination: 88 deg, impact-parameter: 0.2, occultation: maybe }
`);
    expect(brief(issues)).toEqual([
      '2:18 bad-value star.density',
      '5:12 bad-value tables[0].holds',
      '6:11 bad-value tables[0].unit',
      '7:15 bad-value tables[0].exposure',
      '8:15 bad-value tables[0].dilution',
      '9:12 bad-value tables[0].noise',
      '10:16 bad-value tables[0].companion',
      '11:11 bad-value tables[0].kind',
      '12:5 unknown-key tables[0].bandd',
      '14:3 bad-value bands.R',
      '16:21 bad-value companions[0].radius-ratio',
      '16:84 bad-value companions[0].occultation',
    ]);
    expect(issues[3]!.message).toContain('write its unit: 60 s');
    const tilt = caseIssues('target: V\ntables: [ a.csv ]\ncompanions:\n  - { inclination: 88 deg, impact-parameter: 0.2 }\n'); // prettier-ignore
    expect(tilt.map((issue) => issue.message)).toEqual([expect.stringContaining('both set the tilt')]);
  });
});

describe('everything observed of one target', () => {
  const velocities = (path: string, shift = 0): AnyTable =>
    parseAnyTable(`BJD_TDB,RV,err\n${2459000 + shift},1,2\n${2459001 + shift},3,4\n`, path, { path, instrument: null, timeScale: null, timeOffsetDays: null, velocityUnit: null, columns: {} }); // prettier-ignore

  it('is kept by kind, in the order of the tables', () => {
    const curve = readCurve(curveText(), {}, 'pier.csv');
    const times = readMidTimes('Tmid,err\n2459000.5,0.001\n', {}, 'times.csv');
    const all = gatherObservations([times, velocities('north.csv'), curve]);
    expect(all.velocities!.count).toBe(2);
    expect(all.lightCurves.map((table) => table.name)).toEqual(['pier']);
    expect(all.midTimes).toHaveLength(1);
    expect(gatherObservations([curve]).velocities).toBeNull();
    expect(brief(issuesOf(() => gatherObservations([])))).toEqual(['-:- no-rows -']);
  });

  it('gives light curves names of their own, and keeps the band', () => {
    const night = (start: number, instrument: string): AnyTable =>
      readCurve(curveText({ start }), { instrument });
    const { lightCurves } = gatherObservations([night(2459000.5, 'pier'), night(2459003.5, 'pier'), night(2459006.5, 'pier 2')]); // prettier-ignore
    expect(lightCurves.map((table) => table.name)).toEqual(['pier', 'pier 3', 'pier 2']);
    expect(lightCurves.map((table) => table.band)).toEqual(['pier', 'pier', 'pier 2']);
    expect(notice(lightCurves[1]!, 'renamed')).toBeDefined();
  });

  it('refuses a table that is given twice, and dates that cannot be on one axis', () => {
    const curve = readCurve(curveText(), {}, 'pier.csv');
    expect(issuesOf(() => gatherObservations([curve, curve])).map((issue) => issue.code)).toEqual([
      'same-table-twice',
    ]);
    const early = readCurve(curveText({ start: 9000.5 }), {}, 'early.csv');
    const [issue] = issuesOf(() => gatherObservations([velocities('north.csv'), early]));
    expect([issue!.code, issue!.file]).toEqual(['impossible-span', 'early.csv']);
  });

  it('says when two tables hold the same exposures or the same mid-times, or other time scales', () => {
    const first = readCurve(curveText(), { lightCurve: { band: 'R' } }, 'a.csv');
    const again = readCurve(curveText({ cells: (row) => [1.1 + wiggle(row), 2e-4] }), { lightCurve: { band: 'R' } }, 'b.csv'); // prettier-ignore
    expect(notice(gatherObservations([first, again]).lightCurves[1]!, 'repeated-table')?.message).toContain(
      '60 times',
    );
    const other = readCurve(curveText({ cells: (row) => [1.1 + wiggle(row), 2e-4] }), { lightCurve: { band: 'I' } }, 'c.csv'); // prettier-ignore
    expect(notice(gatherObservations([first, other]).lightCurves[1]!, 'repeated-table')).toBeUndefined();
    const times = [
      readMidTimes('Tmid (BJD_TDB),err\n2459000.5,0.001\n2459003.5,0.001\n', {}, 'a.csv'),
      readMidTimes('Tmid (HJD_UTC),err\n2459006.5,0.001\n2459003.5,0.001\n', {}, 'b.csv'),
    ];
    const gathered = gatherObservations(times).midTimes;
    expect(notice(gathered[1]!, 'repeated-row')?.lines).toEqual([3]);
    expect(notice(gathered[0]!, 'mixed-time-scales')?.message).toContain('BJD_TDB, HJD_UTC');
  });

  it('holds the names of a case against those of the tables', () => {
    const theCase = caseOf('target: V\ntables: [ a.csv ]\ncompanions:\n  - { period: 3 d }\nbands:\n  Rr: { u1: 0.3 }\ninstruments:\n  north: { jitter: 1 m/s }\n'); // prettier-ignore
    const observations = gatherObservations([
      readAny(curveText(), { lightCurve: { band: 'R' } }),
      readAny('Tmid,err\n2459000.5,0.001\n', { midTimes: { companion: 'd' } }),
    ]);
    const issues = issuesOf(() => {
      checkChoices(theCase, observations);
    });
    expect(brief(issues)).toEqual(['-:- unknown-companion companion', '6:3 unknown-band bands.Rr', '8:3 unknown-instrument instruments.north']); // prettier-ignore
    expect(issues[1]!.hint).toContain('R');
  });
});
