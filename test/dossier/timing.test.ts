import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import { solveTiming } from '../../src/solving/timing/solve-timing.js';
import type { TimingSolved } from '../../src/solving/timing/types.js';
import { describeTimingCharts, renderTimingCharts } from '../../src/dossier/charts/render-timing.js';
import { timingSeries } from '../../src/dossier/charts/timing-series.js';
import { oMinusCTable } from '../../src/dossier/timing/o-minus-c-table.js';
import { timingFiles } from '../../src/dossier/timing/timing-files.js';
import { timingReport } from '../../src/dossier/timing/timing-report.js';
import { expectWithin } from '../support/expect-within.js';
import { CHOICES, tableOf, type Row } from '../solving/timing/support.js';

const T0 = 2457000.3;
const PERIOD = 3.7;

function simulated(sources: number, deviation: (cycle: number) => number, source = 'source'): TimingSolved {
  const random = RandomStream.fromSeed(11);
  const rows = Array.from({ length: 48 }, (_, k): Row => {
    const isOccultation = k % 8 === 0;
    const cycle = random.integerBelow(500);
    const sigma = isOccultation ? 0.002 : 0.0006;
    const x = cycle + (isOccultation ? 0.5 : 0);
    const time = T0 + PERIOD * x + deviation(cycle) + sigma * random.normal();
    return { cycle, time, sigma, isOccultation, source: `${source} ${k % sources}` };
  });
  const facts = { ...CHOICES.facts, massRatio: 0.001, scaledSemiMajorAxis: 6 };
  return solveTiming([tableOf(rows)], { ...CHOICES, facts, modulationDays: { low: 100, high: null } });
}

const even = simulated(3, () => 0);
const swinging = simulated(12, (cycle) => 0.004 * Math.cos((2 * Math.PI * cycle) / 120));
const shrinking = simulated(1, (cycle) => -1e-7 * cycle * cycle, '<b>|x|</b> =1');

describe('table of O - C', () => {
  it('reads back: observed minus model is the residual, and rows are sorted by time', () => {
    const [header = '', ...lines] = oMinusCTable(shrinking).trim().split('\r\n');
    expect(header).toBe('cycle,kind,time_days,error_min,o_minus_c_min,model_min,residual_min,source,file,line');
    expect(lines).toHaveLength(48);
    let before = 0;
    for (const line of lines) {
      const [, , time, , observed, model, residual] = line.split(',').map(Number) as [number, number, number, number, number, number, number];
      expect(time).toBeGreaterThanOrEqual(before);
      before = time;
      expectWithin(observed - model, residual, { abs: 2e-6, unit: 'min', why: 'six decimals' });
    }
  }); // prettier-ignore
});

describe('report of mid-times', () => {
  it('opens with the verdict and holds the ephemeris, the models, predictions and assumptions', () => {
    expect(shrinking.record.preferred).toBe('quadratic');
    const text = timingReport(shrinking.record, { charts: [] });
    expect(text).toMatch(/^# Invented: the period changes at a constant rate\n/);
    for (const heading of ['Ephemeris', 'Models', 'What comes next', 'Cycles and rows', 'Assumptions', 'How this was made'])
      expect(text).toContain(`\n## ${heading}\n`);
    expect(text).toContain("tidal quality factor Q'");
    expect(text).not.toMatch(/undefined|NaN|null/);
  }); // prettier-ignore

  it('shows labels and paths as text', () => {
    const record = { ...even.record, target: '<script>|*x*' };
    const text = timingReport(record, { charts: [] });
    expect(text).toContain('# &lt;script&gt;\\|\\*x\\*');
  });
});

describe('charts of mid-times', () => {
  it('one panel for transits and one for occultations; a folded chart only for a preferred sinusoid', () => {
    expect(swinging.record.preferred).toBe('sinusoidal');
    expect(describeTimingCharts(even).map(({ name }) => name)).toEqual(['o-minus-c']);
    expect(describeTimingCharts(swinging).map(({ name }) => name)).toEqual(['o-minus-c', 'modulation']);
    const scales = Object.keys(describeTimingCharts(even)[0]!.configure().options!.scales!);
    expect(scales).toEqual(['x', 'yRes', 'yOcc', 'y']);
  });

  it('draws more than eight sources as eight', () => {
    const series = timingSeries(swinging);
    expect(series).toHaveLength(8);
    expect(series.at(-1)!.label).toBe('5 other sources');
    expect(series.reduce((sum, { rows }) => sum + rows.length, 0)).toBe(48);
  });

  it('the band of the preferred model widens into the future', () => {
    const curve = shrinking.curves.find(({ model, kind }) => model === 'quadratic' && kind === 'transit')!;
    const sigmas = curve.sigmaMinutes!;
    const lastDatum = shrinking.record.data.last;
    const atEnd = sigmas[sigmas.length - 1]!;
    const atLast = sigmas[curve.timesBjdTdb.findIndex((time) => time >= lastDatum)]!;
    expect(atEnd).toBeGreaterThan(1.3 * atLast);
    expect(curve.timesBjdTdb.at(-1)!).toBeGreaterThan(lastDatum + 0.15 * 500 * PERIOD);
  });

  it('are files of both kinds, the same bytes twice', async () => {
    const once = await renderTimingCharts(swinging);
    const twice = await renderTimingCharts(swinging);
    expect(once.map(({ name }) => name)).toEqual(['o-minus-c.png', 'o-minus-c.svg', 'modulation.png', 'modulation.svg']);
    once.forEach((file, index) => {
      expect(Buffer.from(file.bytes).equals(Buffer.from(twice[index]!.bytes))).toBe(true);
    });
    const svg = new TextDecoder().decode(once[1]!.bytes);
    expect(svg).not.toContain('NaN');
    expect(svg).toContain('residual (min)');
    const names = timingFiles(swinging, once).map(({ name }) => name);
    expect(names).toEqual(['timing.json', 'o-minus-c.csv', ...once.map(({ name }) => name), 'report.md']);
  }); // prettier-ignore
});
