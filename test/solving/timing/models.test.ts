import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { modelForm, timingProblem } from '../../../src/solving/timing/model-forms.js';
import { solveTiming } from '../../../src/solving/timing/solve-timing.js';
import { mergeMidTimes } from '../../../src/solving/timing/timing-data.js';
import type { TimingModelRecord, TimingRecord } from '../../../src/solving/timing/types.js';
import { expectWithin } from '../../support/expect-within.js';
import { CHOICES, tableOf, type Row } from './support.js';

const T0 = 2457000.3;

function model(record: TimingRecord, name: string): TimingModelRecord {
  return record.models.find((candidate) => candidate.name === name)!;
}

describe('precessing orbit', () => {
  interface Precession {
    readonly inputs: { readonly T0: number; readonly Ps: number; readonly e: number; readonly w0: number; readonly dwdN: number };
    readonly expected: readonly { readonly N: number; readonly t_tra: number; readonly t_occ: number; readonly P_anomalistic: number }[];
  } // prettier-ignore
  const { inputs, expected } = JSON.parse(
    readFileSync(new URL('./precession.json', import.meta.url), 'utf8'),
  ) as Precession;

  it('gives the times of the first-order ephemeris [GimenezBastero1995] (precession.json)', () => {
    const both = [
      { cycle: 0, time: inputs.T0, sigma: 1e-4 },
      { cycle: 3000, time: inputs.T0 + 3000 * inputs.Ps, sigma: 1e-4 },
      { cycle: 0, time: inputs.T0 + 0.5 * inputs.Ps, sigma: 1e-4, isOccultation: true },
    ];
    const { times } = mergeMidTimes([tableOf(both)]);
    const cycles = Int32Array.from(times.written, (cycle) => cycle ?? 0);
    const near = { timeDays: inputs.T0 - times.originBjdTdb, periodDays: inputs.Ps, cycle: 0 };
    const form = modelForm('precessing', timingProblem({ ...times, cycles }, near, 0));
    const frequency = inputs.dwdN / (2 * Math.PI);
    const amplitude = (inputs.e * expected[0]!.P_anomalistic) / Math.PI;
    const beta = [0, 0, -amplitude * Math.cos(inputs.w0), amplitude * Math.sin(inputs.w0)];
    const row = new Float64Array(4);
    const at = (N: number, isOccultation: boolean): number => {
      let time = form.row(N, isOccultation, frequency, row);
      for (let k = 0; k < 4; k++) time += row[k]! * beta[k]!;
      return inputs.T0 + time + inputs.Ps * (N + (isOccultation ? 0.5 : 0));
    };
    for (const { N, t_tra, t_occ } of expected) {
      expectWithin(at(N, false), t_tra, { abs: 1e-8, unit: 'd', why: 'rounding of Julian dates' });
      expectWithin(at(N, true), t_occ, { abs: 1e-8, unit: 'd', why: 'rounding of Julian dates' });
    }
  });

  const random = RandomStream.fromSeed(5);
  const frequency = 0.002 / (2 * Math.PI);
  const period = 1.3;
  const anomalistic = period / (1 - frequency);
  // Light time across the orbit of a star of one solar mass.
  const light = (2 * 499.004784 * Math.cbrt((period / 365.25) ** 2)) / 86400;
  const rows = Array.from({ length: 70 }, (_, k): Row => {
    const isOccultation = k % 4 === 0;
    const cycle = random.integerBelow(4000);
    const sigma = isOccultation ? 0.0008 : 0.0003;
    const shift = ((0.004 * anomalistic) / Math.PI) * Math.cos(1 + 2 * Math.PI * frequency * cycle);
    const offset = isOccultation ? anomalistic / 2 + shift + light : -shift;
    return { cycle, time: T0 + period * cycle + offset + sigma * random.normal(), sigma, isOccultation };
  });

  it('is preferred and measured where it is the truth', () => {
    const { record } = solveTiming([tableOf(rows)], { ...CHOICES, starMassSolar: 1, modulationDays: { low: 300, high: null } });
    expect(record.preferred).toBe('precessing');
    const { eccentricity, apsidalRate, anomalisticPeriod, argumentOfPeriastron } = model(record, 'precessing').parameters;
    const omega = ((1 + 2 * Math.PI * frequency * record.referenceCycle) * 180) / Math.PI;
    const near = [
      [eccentricity!, 0.004],
      [apsidalRate!, (360 * frequency * 365.25) / period],
      [anomalisticPeriod!, anomalistic],
      [argumentOfPeriastron!, omega % 360],
    ] as const;
    for (const [quantity, truth] of near)
      expect(Math.abs(quantity.value! - truth), quantity.unit).toBeLessThan(3 * quantity.sigma!);
    expectWithin(eccentricity!.sigma!, 0.00017, { rel: 0.5, unit: '1', why: 'about sigma / (P/pi) sqrt(2/52) of the transits' });
  }); // prettier-ignore

  it('is not tried without occultations, and says why', () => {
    const transits = rows.filter(({ isOccultation }) => isOccultation !== true);
    const { record } = solveTiming([tableOf(transits)], {
      ...CHOICES,
      modulationDays: { low: 1000, high: null },
    });
    expect(record.notTried.find(({ name }) => name === 'precessing')?.why).toContain('sinusoid');
  });

  it('is not preferred where the data end before it can be told', () => {
    const short = rows.filter(({ cycle }) => cycle! < 300);
    const { record } = solveTiming([tableOf(short)], CHOICES);
    expect(record.preferred).toBe('linear');
  });
});

describe('sinusoid', () => {
  const random = RandomStream.fromSeed(11);
  const period = 3.7;
  const rows = Array.from({ length: 60 }, (_, k): Row => {
    const isOccultation = k % 6 === 0;
    const cycle = random.integerBelow(900);
    const sigma = isOccultation ? 0.002 : 0.0006;
    const x = cycle + (isOccultation ? 0.5 : 0);
    const swing = 0.004 * Math.cos((2 * Math.PI * x) / 120 - 1);
    const shift = isOccultation ? 0.01 : 0;
    return { cycle, time: T0 + period * x + swing + shift + Math.hypot(sigma, 4e-4) * random.normal(), sigma, isOccultation };
  }); // prettier-ignore
  const { record, rows: solvedRows } = solveTiming([tableOf(rows)], CHOICES);

  it('is preferred, with amplitude, period, phase and shift within their errors', () => {
    expect(record.preferred).toBe('sinusoidal');
    const sinusoid = model(record, 'sinusoidal');
    const { modulationPeriod, modulationAmplitude, modulationPeak, occultationShift } = sinusoid.parameters;
    expect(Math.abs(modulationPeriod!.value! - 444)).toBeLessThan(3 * modulationPeriod!.sigma!);
    expect(Math.abs(modulationAmplitude!.value! - 5.76)).toBeLessThan(3 * modulationAmplitude!.sigma!);
    expect(Math.abs(occultationShift!.value! - 14.4)).toBeLessThan(3 * occultationShift!.sigma!);
    const turns = (modulationPeak!.value! - (T0 + (period * 120) / (2 * Math.PI))) / 444;
    expect(Math.abs(turns - Math.round(turns)) * 444).toBeLessThan(3.5 * modulationPeak!.sigma!);
    expect(sinusoid.falseAlarmProbability).toBeLessThan(1e-10);
  });

  it('leaves residuals as large as errors and jitter', () => {
    let square = 0;
    for (let row = 0; row < solvedRows.count; row++)
      square +=
        solvedRows.residualsMinutes[row]! ** 2 /
        (solvedRows.sigmasMinutes[row]! ** 2 + model(record, 'sinusoidal').jitter.value! ** 2);
    expectWithin(square, model(record, 'sinusoidal').chiSquare, { rel: 1e-9, unit: '1', why: 'definition' });
  });

  it('is seldom found in noise: 8 seeded sets give none', () => {
    for (let set = 0; set < 8; set++) {
      const noise = RandomStream.fromSeed(500 + set);
      const quiet = Array.from({ length: 25 }, (): Row => {
        const cycle = noise.integerBelow(300);
        return { cycle, time: T0 + period * cycle + 5e-4 * noise.normal(), sigma: 5e-4 };
      });
      expect(solveTiming([tableOf(quiet)], CHOICES).record.preferred, `set ${set}`).toBe('linear');
    }
  });
});

describe('scatter and outliers', () => {
  const random = RandomStream.fromSeed(21);
  const rows = Array.from({ length: 30 }, (_, k): Row => {
    const sigma = 4e-4;
    return { cycle: 5 * k, time: T0 + 2 * 5 * k + sigma * random.normal() + (k === 12 ? 0.01 : 0), sigma };
  });

  it('an outlier is named with its line and kept', () => {
    const { record } = solveTiming([tableOf(rows)], CHOICES);
    expect(record.outliers.map(({ line, cycle }) => [line, cycle])).toEqual([[14, 60]]);
    expect(record.data.count).toBe(30);
  });

  it('too few times are refused', () => {
    expect(() => solveTiming([tableOf(rows.slice(0, 2))], CHOICES)).toThrow(/2 mid-times/);
  });

  it('order of rows and tables changes nothing', () => {
    const strip = (record: TimingRecord): unknown => ({
      ...record,
      provenance: null,
      outliers: null,
      warnings: null,
    });
    const one = solveTiming([tableOf(rows)], CHOICES).record;
    const other = solveTiming([tableOf([...rows].reverse())], CHOICES).record;
    expect(strip(other)).toEqual(strip(one));
  });
});
