/** One model of mid-times: its maximum, its marginal likelihood, and its posterior as a mixture. */
import { frequencyMesh, searchFrequency, type FrequencyMesh, type FrequencyRange } from './frequency-scan.js';
import { bestJitter, jitterNodes, type JitterNodes, type JitterScale } from './jitter-profile.js';
import { LinearSolver } from './linear-solver.js';
import type { MixtureNode } from './mixture.js';
import {
  LARGEST_DEVIATION_IN_PERIODS,
  LARGEST_PRECESSING_ECCENTRICITY,
  type ModelForm,
  type TimingProblem,
} from './model-forms.js';

export interface FittedModel {
  readonly form: ModelForm;
  /** At the maximum of the likelihood. */
  readonly beta: Float64Array;
  readonly covariance: Float64Array;
  readonly frequency: number;
  readonly jitterDays: number;
  readonly logLikelihood: number;
  readonly chiSquare: number;
  /** Observed minus model, days. */
  readonly residualsDays: Float64Array;
  /** Coefficients, frequency and jitter. */
  readonly freeParameters: number;
  readonly bic: number;
  /** ln of the marginal likelihood with the priors of `priorVolumeLog`; `null` where the data do not confine the model. */
  readonly logEvidence: number | null;
  /** Posterior; weights sum to 1. */
  readonly nodes: readonly MixtureNode[];
  readonly range: FrequencyRange | null;
  /** The best frequency lies at an end of its range. */
  readonly isAtEdge: boolean;
}

const JITTER_NODES = 24;
/** Above so many frequencies that matter, those that fall short by `SHALLOW` are summed over the jitter as the best one is. */
const MANY_FREQUENCIES = 500;
const SHALLOW = 5;
const MOST_NODES = 1000;

/** ln of the volume of the priors: time, period and shift within a period, the model's own within `deviationLimit`. */
function priorVolumeLog(form: ModelForm, problem: TimingProblem): number {
  const period = Math.log(problem.nearPeriodDays);
  const limit = deviationLimit(form, problem);
  switch (form.name) {
    case 'linear':
      return form.size * period;
    case 'quadratic':
      return (form.size - 1) * period + Math.log(2 * limit);
    case 'sinusoidal':
    case 'precessing':
      return (form.size - 2) * period + Math.log(Math.PI * limit * limit);
  }
}

/** Half the allowed range of a model's own coefficients (for two of them the radius of a disc), days. */
function deviationLimit(form: ModelForm, problem: TimingProblem): number {
  return form.name === 'precessing'
    ? (LARGEST_PRECESSING_ECCENTRICITY * problem.nearPeriodDays) / Math.PI
    : LARGEST_DEVIATION_IN_PERIODS * problem.nearPeriodDays;
}

/** A coefficient whose standard deviation exceeds a third of its allowed range is not confined by the data. */
function isConfined(form: ModelForm, problem: TimingProblem, covariance: Float64Array): boolean {
  const own = { linear: 0, quadratic: 1, sinusoidal: 2, precessing: 2 }[form.name];
  const most = deviationLimit(form, problem) / 3;
  for (let k = 2; k < 2 + own; k++) if (!(covariance[k * form.size + k]! < most * most)) return false;
  return true;
}

/**
 * Fits one model.
 *
 * @param range - of the frequency, for models that have one
 * @param startJitterDays - jitter of the linear model, from which a scan starts
 * @returns `null` where the data do not determine the coefficients
 */
export function fitTimingModel(
  problem: TimingProblem,
  form: ModelForm,
  scale: JitterScale,
  range: FrequencyRange | null,
  startJitterDays: number,
): FittedModel | null {
  const solver = new LinearSolver(problem, form);
  let frequency = 0;
  let mesh: FrequencyMesh = {
    frequencies: new Float64Array(1),
    logShares: new Float64Array(1),
    depths: new Float64Array(1),
  };
  if (form.hasFrequency) {
    const found = range === null ? null : searchFrequency(solver, range, scale, startJitterDays);
    if (found === null || range === null) return null;
    ({ frequency } = found.best);
    solver.setJitter(found.best.jitterDays);
    mesh = frequencyMesh(solver, range, found.values, found.best);
  }
  solver.setFrequency(frequency);
  const { jitterDays, logLikelihood } = bestJitter(solver, scale);
  if (logLikelihood === -Infinity) return null;
  const beta = solver.beta.slice();
  const covariance = solver.covariance();
  const { chiSquare } = solver;
  const residualsDays = solver.residuals();
  const { count } = problem.times;
  const jitters = jitterNodes(solver, scale, JITTER_NODES);
  const { nodes, logTotal } = posteriorNodes(solver, mesh, jitters, jitterDays);
  if (nodes.length === 0) return null;
  const freeParameters = form.size + (form.hasFrequency ? 2 : 1);
  return {
    form,
    beta,
    covariance,
    frequency,
    jitterDays,
    logLikelihood,
    chiSquare,
    residualsDays,
    freeParameters,
    bic: -2 * logLikelihood + freeParameters * Math.log(count),
    logEvidence: isConfined(form, problem, covariance) ? logTotal - priorVolumeLog(form, problem) : null,
    nodes,
    range,
    isAtEdge: range !== null && Math.min(frequency - range.low, range.high - frequency) < 0.5 * range.step,
  };
}

interface Weighed {
  readonly frequency: number;
  readonly jitterDays: number;
  readonly logWeight: number;
}

/** ln of the integral over the jitter, divided by the integrand at the best one, at the solver's present frequency. */
function logJitterWidth(solver: LinearSolver, jitters: JitterNodes, bestJitterDays: number): number {
  solver.setJitter(bestJitterDays);
  const best = solver.marginal(solver.solve());
  let sum = 0;
  for (let k = 0; k < jitters.jittersDays.length; k++) {
    solver.setJitter(jitters.jittersDays[k]!);
    sum += Math.exp(solver.marginal(solver.solve()) + jitters.logShares[k]! - best);
  }
  return Math.log(sum);
}

/** Weights of all nodes, of which the negligible are dropped and, beyond a limit, an even sample kept. */
function posteriorNodes(
  solver: LinearSolver,
  mesh: FrequencyMesh,
  jitters: JitterNodes,
  bestJitterDays: number,
): { readonly nodes: MixtureNode[]; readonly logTotal: number } {
  const { form } = solver;
  const alone: JitterNodes = {
    jittersDays: Float64Array.of(bestJitterDays),
    logShares: Float64Array.of(logJitterWidth(solver, jitters, bestJitterDays)),
  };
  const many = mesh.frequencies.length > MANY_FREQUENCIES;
  const weighed: Weighed[] = [];
  let top = -Infinity;
  for (let j = 0; j < mesh.frequencies.length; j++) {
    const frequency = mesh.frequencies[j]!;
    const { jittersDays, logShares } = many && mesh.depths[j]! > SHALLOW ? alone : jitters;
    solver.setFrequency(frequency);
    for (let k = 0; k < jittersDays.length; k++) {
      const jitterDays = jittersDays[k]!;
      solver.setJitter(jitterDays);
      const value = solver.marginal(solver.solve()) + logShares[k]! + mesh.logShares[j]!;
      if (!(value > top - NEGLIGIBLE) || !form.isSound(solver.beta)) continue;
      top = Math.max(top, value);
      weighed.push({ frequency, jitterDays, logWeight: value });
    }
  }
  const kept = weighed.filter(({ logWeight }) => logWeight > top - NEGLIGIBLE);
  let total = 0;
  for (const { logWeight } of kept) total += Math.exp(logWeight - top);
  const nodes = thinned(kept, top, total).map(({ node, weight }): MixtureNode => {
    solver.setFrequency(node.frequency);
    solver.setJitter(node.jitterDays);
    solver.solve();
    const { frequency, jitterDays } = node;
    return { weight, frequency, jitterDays, beta: solver.beta.slice(), covariance: solver.covariance() };
  });
  return { nodes, logTotal: top + Math.log(total) };
}

const NEGLIGIBLE = 16;

/** At most `MOST_NODES`: beyond, nodes chosen evenly along the sum of the weights, with equal weights. */
function thinned(
  kept: readonly Weighed[],
  top: number,
  total: number,
): { readonly node: Weighed; readonly weight: number }[] {
  const weightOf = ({ logWeight }: Weighed): number => Math.exp(logWeight - top) / total;
  if (kept.length <= MOST_NODES) return kept.map((node) => ({ node, weight: weightOf(node) }));
  const counts = new Map<Weighed, number>();
  let reached = 0;
  let chosen = 0;
  for (const node of kept) {
    reached += weightOf(node);
    while (chosen < MOST_NODES && (chosen + 0.5) / MOST_NODES < reached) {
      counts.set(node, (counts.get(node) ?? 0) + 1);
      chosen++;
    }
  }
  return Array.from(counts, ([node, times]) => ({ node, weight: times / chosen }));
}
