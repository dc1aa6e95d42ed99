/**
 * The table behind the array solver. Nodes are equally spaced in E, so their sines and cosines never change and are
 * computed once; a new eccentricity only needs the mean anomalies of the nodes and an index from M to the nearest node,
 * about 230 multiplications.
 */
import { arcMinusSine, NEAR_PERIASTRON_RAD } from './near-periastron.js';

/** A power of two, so that node * spacing is exact. */
const NODE_SPACING_RAD = 1 / 32;
/** The last node lies just beyond pi. */
const LAST_NODE = Math.ceil(Math.PI / NODE_SPACING_RAD);

/** sin E and cos E at the nodes. */
export const NODE_SIN: Float64Array = new Float64Array(LAST_NODE + 1);
export const NODE_COS: Float64Array = new Float64Array(LAST_NODE + 1);
const NODE_ARC_MINUS_SINE = new Float64Array(LAST_NODE + 1);
for (let node = 0; node <= LAST_NODE; node++) {
  const anomalyRad = node * NODE_SPACING_RAD;
  NODE_SIN[node] = Math.sin(anomalyRad);
  NODE_COS[node] = Math.cos(anomalyRad);
  NODE_ARC_MINUS_SINE[node] = arcMinusSine(anomalyRad);
}

/**
 * The series about a node converges well when the node is far from where dM/dE vanishes, E = +-i acosh(1/e). Squared
 * distance that is kept, rad^2: 16 node spacings.
 */
const CLEARANCE_RAD2 = 0.25;

/** What the solver knows of one eccentricity. Arrays are owned by the table and rewritten when it is reused. */
export interface NodeTable {
  eccentricity: number;
  /** M at the nodes. */
  readonly nodeMeanRad: Float64Array;
  /** Up to this M the node is the nearest one; `Infinity` for the last. */
  readonly nodeLimitRad: Float64Array;
  /** First node to try per interval of M. */
  readonly firstNode: Uint8Array;
  /** Intervals per radian of M. */
  readonly intervalsPerRad: number;
  /** Below this M the series does not serve and the point is solved as near periastron; 0 for e < 0.875. */
  nearPeriastronMeanRad: number;
}

// Few points do not pay for a fine index; many do, as nearly every look-up then hits the right node at once.
const MANY_POINTS = 600;
const COARSE_INTERVALS = 128;
const FINE_INTERVALS = 1024;
/** Several companions are evaluated in turn, each with its own e. */
const TABLES_KEPT = 4;

const coarseTables = Array.from({ length: TABLES_KEPT }, () => emptyTable(COARSE_INTERVALS));
const fineTables = Array.from({ length: TABLES_KEPT }, () => emptyTable(FINE_INTERVALS));
let nextCoarse = 0;
let nextFine = 0;

/**
 * Table for an eccentricity; one of the last four used of its size comes back as it was.
 *
 * @param eccentricity - 0 <= e < 1 (checked by the caller)
 * @param count - how many points will be solved with it
 */
export function nodeTableFor(eccentricity: number, count: number): NodeTable {
  const fine = count >= MANY_POINTS;
  const tables = fine ? fineTables : coarseTables;
  for (let i = 0; i < TABLES_KEPT; i++) {
    const kept = tables[i]!;
    if (kept.eccentricity === eccentricity) return kept;
  }
  const table = tables[fine ? nextFine : nextCoarse]!;
  if (fine) nextFine = (nextFine + 1) % TABLES_KEPT;
  else nextCoarse = (nextCoarse + 1) % TABLES_KEPT;
  fillTable(table, eccentricity);
  return table;
}

function emptyTable(intervals: number): NodeTable {
  return {
    eccentricity: NaN,
    nodeMeanRad: new Float64Array(LAST_NODE + 1),
    nodeLimitRad: new Float64Array(LAST_NODE + 1),
    firstNode: new Uint8Array(intervals + 2), // one to spare: rounding may put M = pi into the next interval
    intervalsPerRad: intervals / Math.PI,
    nearPeriastronMeanRad: 0,
  };
}

function fillTable(table: NodeTable, eccentricity: number): void {
  const { nodeMeanRad, nodeLimitRad, firstNode } = table;
  const complement = 1 - eccentricity;
  let previousRad = 0;
  for (let node = 1; node <= LAST_NODE; node++) {
    // Not E - e sin E: both terms are positive here, so M keeps its digits near periastron.
    const meanRad = complement * (node * NODE_SPACING_RAD) + eccentricity * NODE_ARC_MINUS_SINE[node]!;
    nodeMeanRad[node] = meanRad;
    nodeLimitRad[node - 1] = 0.5 * (previousRad + meanRad);
    previousRad = meanRad;
  }
  nodeLimitRad[LAST_NODE] = Infinity;

  const intervalRad = 1 / table.intervalsPerRad;
  let node = 0;
  for (let interval = 0; interval < firstNode.length; interval++) {
    const startRad = interval * intervalRad;
    while (startRad > nodeLimitRad[node]!) node++;
    firstNode[interval] = node;
  }

  const squaredRad2 = CLEARANCE_RAD2 - 2 * complement;
  if (squaredRad2 > 0) {
    const edgeRad = Math.min(NEAR_PERIASTRON_RAD, Math.sqrt(squaredRad2) + NODE_SPACING_RAD);
    table.nearPeriastronMeanRad = nodeMeanRad[Math.ceil(edgeRad / NODE_SPACING_RAD)]!;
  } else {
    table.nearPeriastronMeanRad = 0;
  }
  table.eccentricity = eccentricity;
}
