/** Kepler's equation for arrays: the hot kernel of every velocity model. */
import { REDUCTION_LIMIT_RAD, reduceAngleRad, TWO_PI_HIGH, TWO_PI_LOW, TWO_PI_MIDDLE } from './angles.js';
import { TWO_PI } from './constants.js';
import { requireEccentricity } from './domain.js';
import { NODE_COS, NODE_SIN, nodeTableFor, type NodeTable } from './kepler-nodes.js';
import { solveHalfTurn } from './kepler.js';
import { solveNearPeriastron } from './near-periastron.js';

const TURNS_PER_RAD = 1 / TWO_PI;
/** Sign of a result by `+(m < 0)`: a look-up is cheaper than a branch that goes either way half of the time. */
const SIGN = new Float64Array([1, -1]);

/**
 * Solves E - e sin E = M for many M at one eccentricity and writes sin E and cos E (E itself is not needed for velocities).
 *
 * @param meanAnomaliesRad - M, radians, any finite values, unsorted; read, never modified
 * @param eccentricity - 0 <= e < 1
 * @param sinE - receives sin E; length >= count; may be the same array as `meanAnomaliesRad`
 * @param cosE - receives cos E; length >= count
 * @param count - number of points, default all
 * @throws ModelDomainError for e outside [0, 1); RangeError when an array is shorter than `count`
 *
 * A non-finite M gives NaN in both outputs, so that a runaway model shows as non-finite. Nothing is allocated.
 *
 * Accuracy: sin E and cos E to 4e-16 absolute on the 80-digit values of test/reference/kepler (e up to 1 - 2^-53); for
 * small E, sin E to 2e-15 relative. Speed: about one Math.sin and one Math.cos per point (test/bench/kepler.bench.ts), 1.4
 * of them when every 60 points have a new e, 4 near periastron of e > 0.875.
 *
 * Method, after the idea of [RaposoPulido2017] and [Brandt2021] to expand E about tabulated points: M is reduced to
 * [0, pi]; the nearest of 102 nodes equally spaced in E is looked up; E - E_node comes from the fourth-order reversed series
 * in M - M_node, then from one third-order correction; its sine and cosine are short polynomials and the node's are
 * rotated by them, so no trigonometric function is called. Near periastron of orbits with e > 0.875 the series is
 * replaced by `solveNearPeriastron`.
 */
export function solveKeplerArray(
  meanAnomaliesRad: Float64Array,
  eccentricity: number,
  sinE: Float64Array,
  cosE: Float64Array,
  count: number = meanAnomaliesRad.length,
): void {
  requireEccentricity(eccentricity);
  if (!(count <= meanAnomaliesRad.length && count <= sinE.length && count <= cosE.length)) {
    throw new RangeError(
      `${count} points asked for, but the arrays hold ${meanAnomaliesRad.length}, ${sinE.length} and ${cosE.length}`,
    );
  }
  if (count > 0) solveWithTable(meanAnomaliesRad, sinE, cosE, count, nodeTableFor(eccentricity, count));
}

function solveWithTable(
  meanAnomaliesRad: Float64Array,
  sinE: Float64Array,
  cosE: Float64Array,
  count: number,
  table: NodeTable,
): void {
  const { eccentricity, nodeMeanRad, nodeLimitRad, firstNode, intervalsPerRad, nearPeriastronMeanRad } =
    table;
  // Local names: where modules are rewritten (test runners, bundlers) an imported name is a property read at each use.
  const [turnHigh, turnMiddle, turnLow, limitRad] = [
    TWO_PI_HIGH,
    TWO_PI_MIDDLE,
    TWO_PI_LOW,
    REDUCTION_LIMIT_RAD,
  ];
  const [nodeSin, nodeCos, signs] = [NODE_SIN, NODE_COS, SIGN];
  for (let i = 0; i < count; i++) {
    const meanRad = meanAnomaliesRad[i]!;
    if (!(meanRad <= limitRad && meanRad >= -limitRad)) {
      solveFarRevolution(meanRad, eccentricity, sinE, cosE, i);
      continue;
    }
    // As `reduceAngleRad`, written out: a call here costs a tenth of the loop.
    const turns = Math.floor(meanRad * TURNS_PER_RAD + 0.5);
    const reducedRad = meanRad - turns * turnHigh - turns * turnMiddle - turns * turnLow;
    const sizeRad = Math.abs(reducedRad);
    if (sizeRad < nearPeriastronMeanRad) {
      solveNearPeriastron(reducedRad, eccentricity, sinE, cosE, i);
      continue;
    }

    let node = firstNode[(sizeRad * intervalsPerRad) | 0]!;
    while (sizeRad > nodeLimitRad[node]!) node++;
    const sinNode = nodeSin[node]!;
    const cosNode = nodeCos[node]!;
    const aheadRad = sizeRad - nodeMeanRad[node]!;

    // ahead = slope (d + a2 d^2 + a3 d^3 + a4 d^4 ...), a4 = -a2/12; reversed for d = E - E_node.
    const inverseSlope = 1 / (1 - eccentricity * cosNode);
    const x = aheadRad * inverseSlope;
    const a2 = 0.5 * eccentricity * sinNode * inverseSlope;
    const a3 = eccentricity * cosNode * inverseSlope * (1 / 6);
    const d = x * (1 - x * (a2 - x * (2 * a2 * a2 - a3 + x * a2 * (5 * (a3 - a2 * a2) + 1 / 12))));

    // sin d and 1 - cos d; |d| < 1/60, so what is left out is below 1e-19.
    const d2 = d * d;
    const sinD = d - d * d2 * (1 / 6 - d2 * (1 / 120 - d2 * (1 / 5040)));
    const dipD = d2 * (0.5 - d2 * (1 / 24 - d2 * (1 / 720)));
    const sinGain = cosNode * sinD - sinNode * dipD;
    const cosGain = -(sinNode * sinD + cosNode * dipD);

    // What is left of the equation, measured from the node: small terms only, so nothing is lost by rounding.
    const sinNow = sinNode + sinGain;
    const cosNow = cosNode + cosGain;
    const inverseNow = 1 / (1 - eccentricity * cosNow);
    const newton = (d - eccentricity * sinGain - aheadRad) * inverseNow;
    const last = -newton * (1 + 0.5 * eccentricity * sinNow * inverseNow * newton);
    const dipLast = 0.5 * last * last;
    cosE[i] = cosNode + (cosGain - (sinNow * last + cosNow * dipLast));
    sinE[i] = (sinNode + (sinGain + (cosNow * last - sinNow * dipLast))) * signs[+(reducedRad < 0)]!;
  }
}

/** More than four million revolutions away, or not a number: rare, so only right and not fast. */
function solveFarRevolution(
  meanAnomalyRad: number,
  eccentricity: number,
  sinE: Float64Array,
  cosE: Float64Array,
  index: number,
): void {
  const reducedRad = reduceAngleRad(meanAnomalyRad); // NaN for a non-finite M
  if (Number.isNaN(reducedRad)) {
    sinE[index] = NaN;
    cosE[index] = NaN;
    return;
  }
  const anomalyRad = solveHalfTurn(Math.abs(reducedRad), eccentricity);
  sinE[index] = Math.sin(anomalyRad) * SIGN[+(reducedRad < 0)]!;
  cosE[index] = Math.cos(anomalyRad);
}
