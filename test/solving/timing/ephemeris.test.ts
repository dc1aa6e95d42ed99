import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { bestJitter, jitterScale } from '../../../src/solving/timing/jitter-profile.js';
import { LinearSolver } from '../../../src/solving/timing/linear-solver.js';
import { fitTimingModel } from '../../../src/solving/timing/fit-timing-model.js';
import { linearFunctional, mixtureMoments } from '../../../src/solving/timing/mixture.js';
import { modelForm, timingProblem, type TimingProblem } from '../../../src/solving/timing/model-forms.js';
import { eventQuantity, predictions } from '../../../src/solving/timing/predict.js';
import { periodChangeMsPerYear } from '../../../src/solving/timing/physics.js';
import { leastCorrelatedCycle, solveTiming } from '../../../src/solving/timing/solve-timing.js';
import { mergeMidTimes } from '../../../src/solving/timing/timing-data.js';
import { expectWithin } from '../../support/expect-within.js';
import { CHOICES, tableOf } from './support.js';

interface Reference {
  readonly data: { readonly epoch: number[]; readonly time: number[]; readonly err: number[] };
  readonly linear: { readonly params: string[]; readonly sigma: number[]; readonly cov_T0_P: number; readonly chi2: number; readonly BIC: number };
  readonly leastCorrelated: { readonly E_opt: number; readonly E_opt_rounded: number; readonly sigma_T_at_Eopt: number; readonly sigma_pred_E3000: number };
  readonly quadratic: { readonly params: string[]; readonly sigma: number[]; readonly chi2: number; readonly dPdE: number; readonly dPdt_ms_per_yr: number; readonly delta_BIC: number };
} // prettier-ignore
const reference = JSON.parse(readFileSync(new URL('./ephemeris.json', import.meta.url), 'utf8')) as Reference;
const rows = reference.data.epoch.map((cycle, i) => ({
  cycle,
  time: reference.data.time[i]!,
  sigma: reference.data.err[i]!,
}));
const WHY =
  'double precision of a Julian date is 5e-10 d; sigmas follow from well-conditioned normal equations';

function problemAt(cycle: number): TimingProblem {
  const { times } = mergeMidTimes([tableOf(rows)]);
  const cycles = Int32Array.from(times.written, (written) => written ?? 0);
  const near = { timeDays: 2456305.455 - times.originBjdTdb, periodDays: 1.09142, cycle: 0 };
  return timingProblem({ ...times, cycles }, near, cycle);
}

describe('ephemeris of 30 invented times (ephemeris.json: 40-digit normal equations)', () => {
  const problem = problemAt(0);
  const { halfRange: h, times, nearPeriodDays, nearTimeDays } = problem;

  it('linear: time, period, their errors and covariance, chi-square', () => {
    const solver = new LinearSolver(problem, modelForm('linear', problem));
    solver.solve();
    const covariance = solver.covariance();
    const { params, sigma } = reference.linear;
    expectWithin(times.originBjdTdb + nearTimeDays + solver.beta[0]!, Number(params[0]), { abs: 1e-9, unit: 'd', why: WHY });
    expectWithin(nearPeriodDays + solver.beta[1]! / h, Number(params[1]), { abs: 1e-12, unit: 'd', why: WHY });
    expectWithin(Math.sqrt(covariance[0]!), sigma[0]!, { rel: 1e-6, unit: 'd', why: WHY });
    expectWithin(Math.sqrt(covariance[3]!) / h, sigma[1]!, { rel: 1e-6, unit: 'd', why: WHY });
    expectWithin(covariance[1]! / h, reference.linear.cov_T0_P, { rel: 1e-6, unit: 'd2', why: WHY });
    expectWithin(solver.chiSquare, reference.linear.chi2, { rel: 1e-6, unit: '1', why: WHY });
  }); // prettier-ignore

  it('quadratic: change of the period per cycle and in ms/yr', () => {
    const solver = new LinearSolver(problem, modelForm('quadratic', problem));
    solver.solve();
    const covariance = solver.covariance();
    const change = (2 * solver.beta[2]!) / (h * h);
    const period = nearPeriodDays + solver.beta[1]! / h;
    const { quadratic } = reference;
    expectWithin(times.originBjdTdb + nearTimeDays + solver.beta[0]!, Number(quadratic.params[0]), { abs: 1e-9, unit: 'd', why: WHY });
    expectWithin(period, Number(quadratic.params[1]), { abs: 1e-12, unit: 'd', why: WHY });
    expectWithin(change, quadratic.dPdE, { rel: 1e-6, unit: 'd', why: WHY });
    expectWithin(Math.sqrt(covariance[8]!) / (h * h), quadratic.sigma[2]!, { rel: 1e-6, unit: 'd', why: WHY });
    expectWithin(periodChangeMsPerYear(change, period), quadratic.dPdt_ms_per_yr, { rel: 1e-6, unit: 'ms/yr', why: WHY });
    expectWithin(solver.chiSquare, quadratic.chi2, { rel: 1e-6, unit: '1', why: WHY });
  }); // prettier-ignore

  it('reference cycle of least correlation, and the error of a prediction far ahead', () => {
    const form = modelForm('linear', problem);
    const solver = new LinearSolver(problem, form);
    solver.solve();
    const node = { weight: 1, jitterDays: 0, frequency: 0, beta: solver.beta.slice(), covariance: solver.covariance() };
    const sigmaAt = (cycle: number): number =>
      mixtureMoments([node], linearFunctional([node], 2, (_, out) => form.row(cycle, false, 0, out))).sigma;
    const scale = jitterScale(times.sigmasDays, 1e-3);
    const fit = { ...fitTimingModel(problem, form, scale, null, 0)!, nodes: [node] };
    const { leastCorrelated } = reference;
    expectWithin(leastCorrelatedCycle(problem, fit), leastCorrelated.E_opt, { rel: 1e-6, unit: 'cycle', why: WHY });
    expectWithin(sigmaAt(leastCorrelated.E_opt), leastCorrelated.sigma_T_at_Eopt, { rel: 1e-6, unit: 'd', why: WHY });
    expectWithin(sigmaAt(3000), leastCorrelated.sigma_pred_E3000, { rel: 1e-6, unit: 'd', why: WHY });
  }); // prettier-ignore

  const { record } = solveTiming([tableOf(rows)], { ...CHOICES, modulationDays: { low: 100, high: null } });

  it('prefers the changing period that the times were made with', () => {
    const quadratic = record.models.find(({ name }) => name === 'quadratic')!;
    expect(record.preferred).toBe('quadratic');
    // Truth of the invented times: half of dP/dE is -4.9e-10 d.
    const { value, sigma } = quadratic.parameters.periodChangePerCycle!;
    expect(Math.abs(value! + 9.8e-10)).toBeLessThan(2 * sigma!);
    expect(Math.abs(quadratic.correlation)).toBeLessThan(0.3);
  });

  it('time and period of the reference cycle hardly correlate in the linear model', () => {
    expect(Math.abs(record.models[0]!.correlation)).toBeLessThan(0.01);
  });
});

describe('posterior of the linear model', () => {
  it('agrees with brute force over time, period and jitter', () => {
    const few = [
      { cycle: 0, time: 2459000.0003, sigma: 0.0004 },
      { cycle: 1, time: 2459002.4994, sigma: 0.0006 },
      { cycle: 4, time: 2459010.0006, sigma: 0.0004 },
      { cycle: 7, time: 2459017.4998, sigma: 0.0005 },
      { cycle: 9, time: 2459022.5009, sigma: 0.0007 },
    ];
    const { times } = mergeMidTimes([tableOf(few)]);
    const problem = timingProblem(
      { ...times, cycles: Int32Array.from(times.written, (cycle) => cycle ?? 0) },
      { timeDays: 2459010 - times.originBjdTdb, periodDays: 2.5, cycle: 4 },
      4,
    );
    const scale = jitterScale(times.sigmasDays, 0.0006);
    const fit = fitTimingModel(problem, modelForm('linear', problem), scale, null, 0)!;
    const moments = (index: number): { mean: number; sigma: number } =>
      mixtureMoments(fit.nodes, linearFunctional(fit.nodes, 2, (_, out) => {
          out.fill(0);
          out[index] = 1;
          return 0;
        }),
      ); // prettier-ignore
    const sums = [0, 0, 0, 0, 0];
    const steps = 60;
    const reach = 0.006;
    for (let k = 0; k <= 200; k++) {
      const jitter = scale.scaleDays * Math.sinh((scale.reach * k) / 200);
      const share = k === 0 || k === 200 ? 0.5 : 1;
      for (let i = 0; i <= steps; i++)
        for (let j = 0; j <= steps; j++) {
          const a = reach * ((2 * i) / steps - 1);
          const b = reach * ((2 * j) / steps - 1);
          let logL = 0;
          for (let row = 0; row < 5; row++) {
            const variance = times.sigmasDays[row]! ** 2 + jitter ** 2;
            const z = (few[row]!.cycle - 4) / problem.halfRange;
            logL -=
              0.5 * ((problem.yDays[row]! - a - b * z) ** 2 / variance + Math.log(2 * Math.PI * variance));
          }
          const weight = share * Math.exp(logL - fit.logLikelihood);
          sums[0]! += weight;
          sums[1]! += weight * a;
          sums[2]! += weight * b;
          sums[3]! += weight * a * a;
          sums[4]! += weight * b * b;
        }
    }
    const [total, a, b, aa, bb] = sums as [number, number, number, number, number];
    const why = 'the grid of the brute force ends at 6e-3 d and has steps of a fifth of a standard deviation';
    expectWithin(moments(0).mean, a / total, { abs: 3e-6, unit: 'd', why });
    expectWithin(moments(1).mean, b / total, { abs: 3e-6, unit: 'd', why });
    expectWithin(moments(0).sigma, Math.sqrt(aa / total - (a / total) ** 2), { rel: 0.03, unit: 'd', why });
    expectWithin(moments(1).sigma, Math.sqrt(bb / total - (b / total) ** 2), { rel: 0.03, unit: 'd', why });
    const cell = ((2 * reach) / steps) ** 2 / 200;
    const brute = Math.log(total * cell) + fit.logLikelihood - 2 * Math.log(2.5);
    expectWithin(fit.logEvidence!, brute, { abs: 0.02, unit: '1', why });
  });

  it('finds the jitter where the derivative of ln L vanishes', () => {
    const problem = problemAt(0);
    const solver = new LinearSolver(problem, modelForm('linear', problem));
    const scale = jitterScale(problem.times.sigmasDays, 1e-3);
    const { jitterDays, logLikelihood } = bestJitter(solver, scale);
    expect(jitterDays).toBeGreaterThan(0);
    for (const factor of [0.98, 1.02]) {
      solver.setJitter(jitterDays * factor);
      expect(solver.solve()).toBeLessThan(logLikelihood);
    }
  });
});

describe('prediction', () => {
  // Independent recomputation of five windows of a linear ephemeris, sigma^2 = sigma_T^2 + N^2 sigma_P^2.
  const T0 = 2454560.80588;
  const P = 3.5247486;
  const expected = [
    [1146, 2458600.1677755998, 0.00046532844314526917],
    [1147, 2458603.6925242, 0.00046572249247808507],
    [1148, 2458607.2172728, 0.00046611655194811523],
    [1149, 2458610.7420214, 0.00046651062152967105],
    [1150, 2458614.26677, 0.00046690470119715007],
  ] as const;
  const { times } = mergeMidTimes([
    tableOf([
      { cycle: 0, time: T0, sigma: 8e-5 },
      { cycle: 10, time: T0 + 10 * P, sigma: 8e-5 },
      { cycle: 20, time: T0 + 20 * P, sigma: 8e-5 },
    ]),
  ]);
  const problem = timingProblem(
    { ...times, cycles: Int32Array.of(0, 10, 20) },
    { timeDays: T0 - times.originBjdTdb, periodDays: P, cycle: 0 },
    0,
  );
  const form = modelForm('linear', problem);
  const fit = fitTimingModel(problem, form, jitterScale(times.sigmasDays, 1e-5), null, 0)!;
  const covariance = Float64Array.of(8e-5 ** 2, 0, 0, (4e-7 * problem.halfRange) ** 2);
  const node = { weight: 1, jitterDays: 0, frequency: 0, beta: new Float64Array(2), covariance };
  const stated = { ...fit, beta: new Float64Array(2), covariance, nodes: [node] };

  it('gives the events after a date and their errors', () => {
    const events = predictions(stated, problem, 2458600 - times.originBjdTdb, 5);
    events.forEach((event, index) => {
      const [cycle, time, sigma] = expected[index]!;
      expect(event.cycle).toBe(cycle);
      expectWithin(event.time.value!, time, { abs: 2e-9, unit: 'd', why: 'four roundings of a Julian date' });
      expectWithin(event.time.sigma!, sigma, { rel: 1e-9, unit: 'd', why: 'closed form' });
      expectWithin(event.time.upper! - event.time.value!, sigma, { rel: 1e-4, unit: 'd', why: 'a normal distribution' });
    });
  }); // prettier-ignore

  it('puts an occultation half a period after its transit', () => {
    const half =
      eventQuantity(stated, problem, 7, true).value! - eventQuantity(stated, problem, 7, false).value!;
    expectWithin(half, P / 2, { abs: 2e-9, unit: 'd', why: 'rounding of a Julian date' });
  });
});
