/**
 * Nodes and weights of eight-point collocation on [0, 1] with the start of the step as one node (left Radau nodes).
 * Everything is computed from the definition when the module is loaded: nothing is typed in.
 */

/** Nodes of a step. */
export const NODE_COUNT = 8;

interface Legendre {
  readonly value: number;
  readonly slope: number;
}

/** Legendre polynomial of the given degree and its derivative, -1 < x < 1. */
function legendre(degree: number, x: number): Legendre {
  let before = 1;
  let value = x;
  for (let n = 2; n <= degree; n++)
    [before, value] = [value, ((2 * n - 1) * x * value - (n - 1) * before) / n];
  return { value, slope: (degree * (x * value - before)) / (x * x - 1) };
}

/** Root of `f` between two ends of different sign, by Newton steps kept inside the shrinking bracket. */
function rootBetween(f: (x: number) => Legendre, from: number, to: number): number {
  let low = from;
  let high = to;
  const signAtLow = Math.sign(f(low).value);
  let x = 0.5 * (low + high);
  for (let step = 0; step < 100; step++) {
    const { value, slope } = f(x);
    if (value === 0) return x;
    if (Math.sign(value) === signAtLow) low = x;
    else high = x;
    const newton = x - value / slope;
    const next = newton > low && newton < high ? newton : 0.5 * (low + high);
    if (Math.abs(next - x) < 1e-17) return next;
    x = next;
  }
  return x;
}

function rootsOf(f: (x: number) => Legendre, count: number): number[] {
  const roots: number[] = [];
  const cells = 4000;
  for (let cell = 1; cell < cells - 1 && roots.length < count; cell++) {
    const from = -1 + (2 * cell) / cells;
    const to = -1 + (2 * (cell + 1)) / cells;
    if (f(from).value * f(to).value < 0) roots.push(rootBetween(f, from, to));
  }
  return roots;
}

/** (8), ascending: 0, then the seven other roots of P7 + P8, mapped to [0, 1]. */
export const NODES: Float64Array = Float64Array.from([
  0,
  ...rootsOf((x) => {
    const seventh = legendre(7, x);
    const eighth = legendre(8, x);
    return { value: seventh.value + eighth.value, slope: seventh.slope + eighth.slope };
  }, 7).map((x) => 0.5 * (1 + x)),
]);

const GAUSS_ROOTS = rootsOf((x) => legendre(8, x), 8);
const GAUSS_WEIGHTS = GAUSS_ROOTS.map((x) => 2 / ((1 - x * x) * legendre(8, x).slope ** 2));

/** Polynomial of degree 7 that is 1 at node j and 0 at the others. */
export function nodePolynomial(j: number, s: number): number {
  let product = 1;
  for (let k = 0; k < NODE_COUNT; k++) {
    if (k !== j) product *= (s - NODES[k]!) / (NODES[j]! - NODES[k]!);
  }
  return product;
}

/** Integral of a polynomial of degree <= 15 from 0 to `end`. */
function integrate(f: (s: number) => number, end: number): number {
  let sum = 0;
  for (let g = 0; g < 8; g++) sum += GAUSS_WEIGHTS[g]! * f(0.5 * end * (1 + GAUSS_ROOTS[g]!));
  return 0.5 * end * sum;
}

function tabulate(rows: number, element: (row: number, j: number) => number): Float64Array {
  return Float64Array.from({ length: rows * NODE_COUNT }, (_, at) =>
    element(Math.floor(at / NODE_COUNT), at % NODE_COUNT),
  );
}

/** (8 x 8): weights of the accelerations at the nodes in the displacement at node i, in units of the squared step. */
export const POSITION_WEIGHTS: Float64Array = tabulate(NODE_COUNT, (i, j) =>
  integrate((s) => (NODES[i]! - s) * nodePolynomial(j, s), NODES[i]!),
);
/** (8): the same at the end of the step. */
export const END_POSITION_WEIGHTS: Float64Array = tabulate(1, (_, j) =>
  integrate((s) => (1 - s) * nodePolynomial(j, s), 1),
);
/** (8): weights in the change of velocity over the step, in units of the step. */
export const END_VELOCITY_WEIGHTS: Float64Array = tabulate(1, (_, j) =>
  integrate((s) => nodePolynomial(j, s), 1),
);

/** (8 x 8): coefficient of s^k (row k) of the node polynomials. The last row gives the seventh divided difference. */
export const MONOMIALS: Float64Array = monomials();

function monomials(): Float64Array {
  const table = new Float64Array(NODE_COUNT * NODE_COUNT);
  for (let j = 0; j < NODE_COUNT; j++) {
    let coefficients = [1];
    let scale = 1;
    for (let k = 0; k < NODE_COUNT; k++) {
      if (k === j) continue;
      scale *= NODES[j]! - NODES[k]!;
      const next = new Array<number>(coefficients.length + 1).fill(0);
      coefficients.forEach((c, power) => {
        next[power + 1]! += c;
        next[power]! -= c * NODES[k]!;
      });
      coefficients = next;
    }
    coefficients.forEach((c, power) => (table[power * NODE_COUNT + j] = c / scale));
  }
  return table;
}
