/** Marginal likelihood from draws that are there already, by bridge sampling. */
import { ConvergenceError } from '../../errors.js';
import type { RandomStream } from '../random.js';
import type { SmoothDensity } from './density.js';
import { mean, median, standardDeviation } from '../summary.js';
import { effectiveSize } from './effective-size.js';
import { Proposal } from './proposal.js';
import { RunningCovariance } from './running-covariance.js';

export interface BridgeOptions {
  readonly random: RandomStream;
  /** Draws from the proposal, >= 2; default: as many as draws of the density are bridged, i.e. half of those given. */
  readonly proposals?: number;
}

export interface BridgeEvidence {
  /** ln of the integral of the density. */
  readonly logEvidence: number;
  /** Of `logEvidence`. Trust it below about 0.2; a larger one means that density and normal proposal hardly overlap. */
  readonly standardError: number;
  /** How many independent draws the bridged half is worth, at most 1 each. */
  readonly effectiveDraws: number;
}

const LARGEST_ITERATIONS = 1000;
const SETTLED = 1e-12;
/** Per coordinate, in the half that the proposal is fitted to: fewer give a covariance that is mostly noise. */
const FEWEST_DRAWS_PER_COORDINATE = 10;

/**
 * ln of the integral of exp(density), from draws of the density: a normal proposal is fitted to the first half of
 * them and bridged to the second half with the optimal bridge, iterated (Meng & Wong 1996, Statistica Sinica 6,
 * 831).
 *
 * @param draws - n x size, row-major, in order of drawing (chains one after another); read only. At least 20 per coordinate.
 * @throws RangeError for draws that do not fit or are too few
 * @throws ConvergenceError when the draws vary in too few directions, or the iteration does not settle
 *
 * The standard error is the approximate relative mean square error of Frühwirth-Schnatter 2004 (Econometrics
 * Journal 7, 143), with the autocorrelation of the draws counted. It knows nothing of modes that the draws have
 * missed. Measured over 40 repeats with 2000 draws, normal and logistic densities of 1 to 25 coordinates: scatter
 * 0.8 to 1.2 of the error stated, which is 0.002 for 1, 0.006 for 7, 0.02 for 25 (normal).
 */
export function bridgeEvidence(
  density: SmoothDensity,
  draws: Float64Array,
  options: BridgeOptions,
): BridgeEvidence {
  const { size } = density;
  const count = draws.length / size;
  const fitted = Math.floor(count / 2);
  if (!Number.isInteger(count) || fitted < FEWEST_DRAWS_PER_COORDINATE * size)
    throw new RangeError(
      `${draws.length} numbers are not enough whole draws of ${size} coordinates; at least ${2 * FEWEST_DRAWS_PER_COORDINATE * size} draws are needed`,
    );
  const bridged = count - fitted;
  const proposals = options.proposals ?? bridged;
  if (!Number.isSafeInteger(proposals) || proposals < 2)
    throw new RangeError(`${proposals} proposals were asked for; allowed is a whole number >= 2`);
  const proposal = fitProposal(draws.subarray(0, fitted * size), size);

  // ln(density / proposal), at draws of the density and at draws of the proposal.
  const position = new Float64Array(size);
  const gradient = new Float64Array(size);
  const atDraws = new Float64Array(bridged);
  for (let k = 0; k < bridged; k++) {
    position.set(draws.subarray((fitted + k) * size, (fitted + k + 1) * size));
    atDraws[k] = density.evaluate(position, gradient) - proposal.logDensity(position);
  }
  const atProposals = new Float64Array(proposals);
  for (let k = 0; k < proposals; k++) {
    const logProposal = proposal.draw(options.random, position);
    const logRatio = density.evaluate(position, gradient) - logProposal;
    atProposals[k] = Number.isNaN(logRatio) ? -Infinity : logRatio;
  }
  if (!atDraws.every(Number.isFinite))
    throw new RangeError('a draw lies outside the domain of the density that it is said to come from');
  return iterateBridge(atDraws, atProposals);
}

function fitProposal(draws: Float64Array, size: number): Proposal {
  const moments = new RunningCovariance(size);
  for (let start = 0; start < draws.length; start += size) moments.add(draws.subarray(start, start + size));
  try {
    return new Proposal(moments.centre(), moments.covariance());
  } catch (cause) {
    throw new ConvergenceError(
      'the draws do not vary in every direction, so no proposal can be fitted to them; draw more',
      { draws: draws.length / size, coordinates: size },
      { cause },
    );
  }
}

function iterateBridge(atDraws: Float64Array, atProposals: Float64Array): BridgeEvidence {
  const bridged = atDraws.length;
  const proposals = atProposals.length;
  // Correlated draws carry less: the optimal bridge weighs both sides by what they are worth.
  const effectiveDraws = worth(atDraws);
  const drawShare = effectiveDraws / (effectiveDraws + proposals);
  const proposalShare = 1 - drawShare;
  const shift = median(atDraws);
  let ratio = 1;
  for (let iteration = 0; ; iteration++) {
    let fromProposals = 0;
    for (const logRatio of atProposals) {
      const weight = Math.exp(logRatio - shift);
      fromProposals +=
        weight === Infinity ? 1 / drawShare : weight / (drawShare * weight + proposalShare * ratio);
    }
    let fromDraws = 0;
    for (const logRatio of atDraws)
      fromDraws += 1 / (drawShare * Math.exp(logRatio - shift) + proposalShare * ratio);
    const next = fromProposals / proposals / (fromDraws / bridged);
    const change = Math.abs(next - ratio) / next;
    ratio = next;
    if (change < SETTLED) break;
    if (iteration >= LARGEST_ITERATIONS || !Number.isFinite(ratio) || ratio === 0)
      throw new ConvergenceError(
        'the evidence did not settle: the normal proposal and the draws hardly overlap; try each mode by itself',
        { ratio, change, iteration },
      );
  }
  const logEvidence = Math.log(ratio) + shift;
  const weight = (logRatio: number): number => Math.exp(logRatio - logEvidence);
  const ofDraws = atDraws.map((logRatio) => 1 / (drawShare * weight(logRatio) + proposalShare));
  const ofProposals = atProposals.map((logRatio) =>
    weight(logRatio) === Infinity
      ? 1 / drawShare
      : weight(logRatio) / (drawShare * weight(logRatio) + proposalShare),
  );
  const drawVariance = (standardDeviation(ofDraws) / mean(ofDraws)) ** 2 / worth(ofDraws);
  const proposalVariance = (standardDeviation(ofProposals) / mean(ofProposals)) ** 2 / proposals;
  return { logEvidence, standardError: Math.sqrt(drawVariance + proposalVariance), effectiveDraws };
}

/** Number of independent values that a series is worth; antithetic series are not credited with more than their length. */
function worth(series: Float64Array): number {
  const effective = effectiveSize([series]);
  return Number.isNaN(effective) ? series.length : Math.min(series.length, effective);
}
