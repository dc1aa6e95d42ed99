/**
 * Where a dark disc of radius k, its centre at a distance z, covers the unit disc: integrals of 1, of mu = sqrt(1 - r^2) and
 * of r^2 over the common area, with their derivatives by z and k.
 *
 * After the idea of [MandelAgol2002] and [Agol2020], derived afresh with Green's theorem. Derivatives are integrals
 * over the arc of the dark limb that lies on the unit disc, because only the limb moves. With psi counted at the
 * dark centre from the direction of the other centre, r^2 = (z - k)^2 + 4 z k sin^2(psi/2) on that limb, so that mu is
 * integrated by complete elliptic integrals; those needed (B = int cos^2/Delta, D' = kc^2 int sin^2/Delta and one of the third kind)
 * come from one joint descending Landen iteration after [Bulirsch1969]. Areas are taken from half angles at both
 * centres and from the kite that these span, with contact differences formed so that nothing is lost where they vanish.
 */

/** Values that `overlapMoments` writes: integrals of 1, mu, r^2; their derivatives by z; their derivatives by k. */
export const OVERLAP_MOMENTS = 9;

/** Below this complementary modulus the integrals do not change any more (they approach kc = 0 as kc^2 ln kc). */
const SMALLEST_MODULUS = 1e-20;
/** Convergence is quadratic: what is left is of the order of the square. */
const MODULUS_GOAL = 1e-8;

/**
 * Common area alone, with its derivatives: `out[0]`, d/dz in `out[1]`, d/dk in `out[2]`.
 *
 * @param z - distance of the centres, >= 0
 * @param k - radius of the other disc, >= 0
 */
export function overlapArea(z: number, k: number, out: Float64Array): void {
  out[1] = 0;
  if (z >= 1 + k || k === 0) {
    out[0] = 0;
    out[2] = 0;
  } else if (z <= k - 1) {
    out[0] = Math.PI;
    out[2] = 0;
  } else if (z <= 1 - k) {
    out[0] = Math.PI * k * k;
    out[2] = 2 * Math.PI * k;
  } else {
    const crossing = pastInnerContact(z, k) * (z + k + 1);
    const kite4 = Math.sqrt(crossing * withinOuterContact(z, k) * withinHiding(z, k));
    const angleAtDark = Math.atan2(kite4, sidesBeyondUnit(z, k));
    const angleAtStar = Math.atan2(kite4, z * z + (1 - k) * (1 + k));
    out[0] = angleAtStar + k * k * angleAtDark - 0.5 * kite4;
    out[1] = -kite4 / z;
    out[2] = 2 * k * angleAtDark;
  }
}

/**
 * All moments, see `OVERLAP_MOMENTS` for their order.
 *
 * @param z - distance of the centres, >= 0
 * @param k - radius of the dark disc, >= 0
 * @param out - (9), overwritten
 *
 * Accuracy: 2e-15 (1 + size) in each integral and 4e-15 (1 + size) in each derivative, times k^2 for k > 1, the neighbourhoods
 * of all contacts, of z = k and of z = 0 included (test/signals/transit/disc-overlap.test.ts). The derivatives are
 * continuous; at the contacts the second ones are not finite.
 */
export function overlapMoments(z: number, k: number, out: Float64Array): void {
  if (z >= 1 + k || k === 0) {
    out.fill(0);
    return;
  }
  if (z <= k - 1) {
    out.fill(0);
    out[0] = Math.PI;
    out[1] = (2 / 3) * Math.PI;
    out[2] = 0.5 * Math.PI;
    return;
  }
  const crosses = z > 1 - k;
  const k2 = k * k;
  const z2 = z * z;
  const past = pastInnerContact(z, k);
  const crossing = past * (z + k + 1);
  const nearest2 = withinOuterContact(z, k) * withinHiding(z, k); // 1 - (z - k)^2: mu^2 at the limb point nearest to the centre
  const four = 4 * z * k;
  const gap = k > z ? k - z : z - k;
  const side = k > z ? 1 : k < z ? -1 : 0;

  let modulus: number;
  let p: number;
  let aPi: number;
  let bPi: number;
  if (crosses) {
    modulus = Math.sqrt(crossing / four);
    p = gap > 0 ? 1 / gap : 1;
    bPi = 0;
  } else {
    modulus = Math.sqrt(Math.max(-crossing / nearest2, 0));
    p = gap > 0 ? (k + z) / gap : 1;
    bPi = modulus * modulus;
  }
  if (modulus < SMALLEST_MODULUS) modulus = SMALLEST_MODULUS;
  aPi = p;
  const complement = modulus * modulus;
  let product = modulus;
  let mean = 1;
  let aB = 1;
  let bB = 0;
  let aD = 0;
  let bD = complement;
  for (;;) {
    const inverseMean = 1 / mean;
    const ratio = product * inverseMean;
    const oldB = aB;
    aB += bB * inverseMean;
    bB = 2 * (bB + oldB * ratio);
    const oldD = aD;
    aD += bD * inverseMean;
    bD = 2 * (bD + oldD * ratio);
    const inverseP = 1 / p;
    const ratioP = product * inverseP;
    const oldPi = aPi;
    aPi += bPi * inverseP;
    bPi = 2 * (bPi + oldPi * ratioP);
    p += ratioP;
    const before = mean;
    mean += modulus;
    if (!(Math.abs(before - modulus) > before * MODULUS_GOAL)) break; // also where a NaN came in
    modulus = 2 * Math.sqrt(product);
    product = modulus * mean;
  }
  const scale = Math.PI / (4 * mean * mean);
  const integralB = scale * (bB + aB * mean);
  const integralD = scale * (bD + aD * mean);
  const third = ((0.5 * Math.PI) / (mean * (mean + p))) * (bPi + aPi * mean) * side;
  const whole = Math.PI * (1 + side); // 2 pi when the star's centre is covered

  if (crosses) {
    const kite4 = Math.sqrt(crossing * nearest2);
    const angleAtDark = Math.atan2(kite4, sidesBeyondUnit(z, k));
    const angleAtStar = Math.atan2(kite4, z2 + (1 - k) * (1 + k));
    out[0] = angleAtStar + k2 * angleAtDark - 0.5 * kite4;
    out[3] = -kite4 / z;
    out[6] = 2 * k * angleAtDark;
    out[2] = 0.5 * (angleAtStar + angleAtDark * k2 * (k2 + 2 * z2)) - 0.125 * kite4 * (1 + z2 + 5 * k2);
    out[5] = 2 * z * k2 * angleAtDark - (0.5 * kite4 * (1 + z2 + k2)) / z;
    out[8] = 2 * k * ((z2 + k2) * angleAtDark - kite4);
    const size = nearest2 / Math.sqrt(z * k); // twice mu^2/sqrt(4 z k)
    const inner =
      (nearest2 - (k - z) * (k + z)) * integralB - (four / 3) * (integralB - integralD) + (k + z) * third;
    out[1] = (whole - size * inner) / 3;
    out[4] = (-2 / 3) * k * size * (integralB + 2 * integralD);
    out[7] = 2 * k * size * integralB;
  } else {
    out[0] = Math.PI * k2;
    out[3] = 0;
    out[6] = 2 * Math.PI * k;
    out[2] = Math.PI * k2 * (z2 + 0.5 * k2);
    out[5] = 2 * Math.PI * k2 * z;
    out[8] = 2 * Math.PI * k * (z2 + k2);
    const size = Math.sqrt(nearest2);
    const inner =
      nearest2 * (integralB + integralD) -
      (four * (integralB + 2 * integralD)) / 3 -
      (k - z) * (k + z) * (integralB + integralD) +
      third;
    out[1] = (whole - 2 * size * inner) / 3;
    out[4] = (-4 / 3) * k * size * (integralB - integralD);
    out[7] = 4 * k * size * (integralB + integralD);
  }
}

/** z + k - 1 with the larger first: that difference from 1 is exact near the contact. */
function pastInnerContact(z: number, k: number): number {
  return z > k ? z - 1 + k : k - 1 + z;
}

/** 1 + k - z. */
function withinOuterContact(z: number, k: number): number {
  return k < 1 ? 1 - z + k : 1 - (z - k);
}

/** 1 + z - k: zero where a larger disc begins to hide everything. */
function withinHiding(z: number, k: number): number {
  return z < 1 ? 1 - k + z : 1 - (k - z);
}

/** z^2 + k^2 - 1. */
function sidesBeyondUnit(z: number, k: number): number {
  return z > k ? (z - 1) * (z + 1) + k * k : (k - 1) * (k + 1) + z * z;
}
