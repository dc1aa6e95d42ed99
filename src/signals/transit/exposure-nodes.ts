/**
 * How an exposure is averaged. Each stretch between contacts is mapped to s in [0, 1] by fraction = s^2 (3 - 2 s), whose
 * derivative vanishes at both ends: the 3/2 powers with which a loss of light begins and ends there become polynomials
 * in s, and a few Gauss-Legendre nodes over the part of the stretch that the exposure covers suffice.
 */

/** Most nodes that one exposure takes in one stretch. */
export const MOST_NODES = 32;

/** Gauss-Legendre on [0, 1]: nodes and weights of the rule with n points begin at n (n - 1) / 2. */
export const NODES: Float64Array = new Float64Array((MOST_NODES * (MOST_NODES + 1)) / 2);
export const WEIGHTS: Float64Array = new Float64Array(NODES.length);
for (let n = 1; n <= MOST_NODES; n++) {
  for (let i = 0; i < n; i++) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (n + 0.5));
    let slope = 1;
    for (let step = 0; step < 8; step++) {
      let [previous, now] = [1, x];
      for (let j = 2; j <= n; j++) [previous, now] = [now, ((2 * j - 1) * x * now - (j - 1) * previous) / j];
      slope = (n * (previous - x * now)) / (1 - x * x);
      x -= now / slope;
    }
    const at = (n * (n - 1)) / 2 + i;
    NODES[at] = 0.5 * (1 - x);
    WEIGHTS[at] = 1 / ((1 - x * x) * slope * slope);
  }
}

/** The s in [0, 1] with s^2 (3 - 2 s) = fraction. */
export function stretched(fraction: number): number {
  if (!(fraction > 0)) return 0;
  if (!(fraction < 1)) return 1;
  return 0.5 - Math.sin(Math.asin(1 - 2 * fraction) / 3);
}

/** What an average may be wrong by unless said otherwise, fraction of the star's light. */
export const DEFAULT_ERROR_BOUND = 1e-8;
/**
 * In the complex s plane the loss behaves as if its nearest singularity lay this far beyond the ends of a part: found from
 * the convergence on 20 000 random events, grazing and nearly grazing ones included.
 */
const CLEARANCE = 0.1;
/** The same for bodies of nearly equal size, where inner contacts and least separation crowd together. */
const DEEP_CLEARANCE = 0.03;
const DEEP = 0.5;
const MARGIN = 3;

/**
 * Number of nodes for a part of a stretch: the error of the rule with n nodes falls as rho^(-2n), rho the sum of the
 * half axes of the ellipse that reaches the singularity.
 *
 * @param extent - length of the part in s, (0, 1]
 * @param depth - size of the loss, fraction of the star's light
 * @param errorBound - what the average may be wrong by, fraction of the star's light
 */
export function nodesFor(extent: number, depth: number, errorBound: number): number {
  const x = 1 + (2 * (depth > DEEP ? DEEP_CLEARANCE : CLEARANCE)) / extent;
  const perNode = 2 * Math.log(x + Math.sqrt(x * x - 1));
  const n = Math.ceil(Math.log((MARGIN * depth) / errorBound) / perNode);
  return n < 2 ? 2 : n > MOST_NODES ? MOST_NODES : n;
}

/**
 * Whether the middle of an exposure stands for its average: at a contact, where that is worst, a loss that begins with the
 * power 3/2 is missed by 0.2 to 0.5 (half exposure / ingress)^1.5 of the depth.
 *
 * @param halfOverIngress - half an exposure over the time between the contacts of the ingress or egress
 */
export function negligible(halfOverIngress: number, depth: number, errorBound: number): boolean {
  return 0.5 * depth * halfOverIngress ** 1.5 < errorBound;
}
