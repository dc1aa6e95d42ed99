/** What a least-squares step costs beyond the model that it evaluates: one Keplerian, 100 and 1000 velocities. */
import { minimiseLeastSquares, type LeastSquaresProblem } from '../../src/numerics/least-squares.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { BARE_CASE } from '../challenge/evaluate.js';
import { callTimesMs, median } from './measure.js';
import { simulatedVelocities } from './simulated.js';

const FITS = 200;
const ROUNDS = 7;

function benchSize(count: number): string {
  const { explorer } = explorerFor(BARE_CASE, simulatedVelocities(count, 2000));
  const problem = explorer.builder.problem({ companions: [{ choice: null, circular: false }], drift: 0 });
  const start = explorer.builder.point(problem, {
    ...explorer.builder.emptyPoint(),
    companions: [
      {
        periodDays: 41.5,
        eccentricity: 0.1,
        argPeriastronStarRad: 2,
        timePeriastronDays: 0,
        semiAmplitudeMps: 20,
      },
    ],
  });
  problem.setJitters(start.jittersMps);
  // The evaluations of one fit, kept as a list, so that the model alone can be timed on just these points.
  const visited: { readonly parameters: Float64Array; readonly withJacobian: boolean }[] = [];
  const watched: LeastSquaresProblem = {
    parameterCount: problem.parameterCount,
    residualCount: problem.residualCount,
    evaluate(parameters, residuals, jacobian) {
      visited.push({ parameters: parameters.slice(), withJacobian: jacobian !== null });
      return problem.evaluate(parameters, residuals, jacobian);
    },
  };
  const outcome = minimiseLeastSquares(watched, start.parameters);
  if (outcome.status !== 'converged' || !Number.isFinite(outcome.chiSquare))
    throw new Error(`the fit of the bench ended as ${outcome.status}: its time means nothing`);
  const residuals = new Float64Array(problem.residualCount);
  const jacobian = new Float64Array(problem.residualCount * problem.parameterCount);
  const modelMs: number[] = [];
  const fitMs: number[] = [];
  for (let round = 0; round < ROUNDS; round++) {
    const model = callTimesMs(FITS, () => {
      for (const { parameters, withJacobian } of visited)
        problem.evaluate(parameters, residuals, withJacobian ? jacobian : null);
    });
    const fit = callTimesMs(FITS, () => void minimiseLeastSquares(problem, start.parameters));
    modelMs.push(median(model));
    fitMs.push(median(fit));
  }
  const perStep = (ms: number): string => ((1000 * ms) / outcome.iterations).toFixed(1);
  const [model, fit] = [median(modelMs), median(fitMs)];
  return (
    `least-squares ${count} velocities, ${problem.parameterCount} parameters: ${outcome.iterations} steps, ` +
    `${perStep(fit)} us a step, of which the model ${perStep(model)} us; overhead ${((fit - model) / model).toFixed(2)} of the model`
  );
}

export function benchLeastSquares(): string[] {
  return [100, 1000].map(benchSize);
}
