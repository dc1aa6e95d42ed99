import { describe, expect, it } from 'vitest';
import { dipsJson, dipsScreen } from '../../src/cli/screens/dips-screen.js';
import type { TableDips } from '../../src/solving/dips/search-tables.js';
import type { DipCandidate } from '../../src/solving/dips/types.js';

const plain = (_kind: unknown, text: string): string => text;

const candidate: DipCandidate = {
  kind: 'periodic',
  periodDays: 3.2,
  periodSigmaDays: 0.0012,
  shortestPeriodDays: 3.2,
  midTimeDays: 1.5,
  midTimeSigmaDays: 0.002,
  durationDays: 0.125,
  slopeShare: 0.1,
  depth: 0.004,
  depthSigma: 0.0001,
  signalToNoise: 40,
  efficiency: 14.26,
  falseAlarmProbability: 2e-12,
  events: [-1.7, 1.5, 4.7],
  eventDepths: [0.004, 0.004, 0.004],
  eventDepthSigmas: [2e-4, 2e-4, 2e-4],
  signalToNoiseWithoutStrongest: 32.6,
  oddEven: { oddDepth: 0.004, oddDepthSigma: 2e-4, evenDepth: 0.0041, evenDepthSigma: 2e-4, differenceSigmas: 0.4 },
  secondary: { phase: 0.31, depth: 5e-5, depthSigma: 1e-4, signalToNoise: 0.5, falseAlarmProbability: 1 },
  related: [{ periodDays: 6.4, kind: '2P', signalToNoise: 28, events: 2, eventsInSpan: 2 }],
  redNoiseFactor: 1.25,
}; // prettier-ignore

const single: DipCandidate = {
  ...candidate,
  kind: 'single', periodDays: null, periodSigmaDays: null, shortestPeriodDays: 17.25, efficiency: null,
  signalToNoiseWithoutStrongest: null, oddEven: null, secondary: null, related: [], events: [1.5],
}; // prettier-ignore

const found: TableDips = {
  epochBjdTdb: 2460000,
  points: 1296,
  spanDays: 27,
  search: {
    candidates: [candidate, single],
    rejected: [{ ...candidate, periodDays: 9.1, signalToNoise: 5.2, why: 'noise alone would do' }],
    stages: [],
    trend: new Float64Array(2),
    isOutlier: Uint8Array.of(0, 1),
    settings: ['periods of 0.5 d to 13.5 d'],
  },
};

describe('dipsScreen', () => {
  const text = dipsScreen('Vellamo', found, plain);

  it('shows what was found, with units and errors, and never a period of a single event', () => {
    // Rounded by hand from the fixture to two digits of the error.
    for (const part of [
      'Vellamo: 2 dips in 1296 points over 27 d',
      '3.2000 ± 0.0012 d',
      '2460001.5000 ± 0.0020',
      '3 h',
      '4000 ± 100 ppm',
      'red noise 1.25 times white',
      'false alarm 2e-12, efficiency 14.3',
      '3; 32.6 without the strongest',
      'equal',
      'none; below 300 ppm',
      '2P 28',
      'unknown: seen once; 17.25 d or longer',
      'noise alone would do',
      'periods of 0.5 d to 13.5 d',
    ])
      expect(text).toContain(part);
  });

  it('fits 80 columns', () => {
    expect(text.split('\n').filter((line) => line.length > 80)).toEqual([]);
  });

  it('says when nothing was found', () => {
    const nothing = { ...found, search: { ...found.search, candidates: [], rejected: [] } };
    expect(dipsScreen('Vellamo', nothing, plain)).toContain('no dip in 1296 points');
  });
});

describe('dipsJson', () => {
  it('puts times on BJD_TDB and leaves long arrays out', () => {
    const record = JSON.parse(JSON.stringify(dipsJson(found))) as Record<string, unknown> & {
      candidates: { midTimeBjdTdb: number; eventsBjdTdb: number[] }[];
      outliers: number;
    };
    expect(record.candidates[0]!.midTimeBjdTdb).toBe(2460001.5);
    expect(record.candidates[0]!.eventsBjdTdb).toEqual([2459998.3, 2460001.5, 2460004.7]);
    expect(record.outliers).toBe(1);
    expect(record).not.toHaveProperty('trend');
  });
});
