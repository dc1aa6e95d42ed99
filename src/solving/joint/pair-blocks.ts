/** Blocks of two coordinates: eccentricity with argument of periastron, and the pair of limb-darkening coefficients. */
import type { Block, PriorUse } from './block.js';
import type { Dial } from './block.js';

/**
 * k = e cos omega, h = e sin omega through a plane (x, y) that covers the disc of sqrt(e)(cos omega, sin omega):
 * uniform on the disc is uniform in e and omega; smooth at e = 0, and e = 1 is at infinity.
 *
 * @param target - natural index of k; h follows
 */
export function shapeBlock(target: number, use: PriorUse): Block {
  const all = use === 'all' ? 1 : 0;
  return {
    size: 2,
    mirrored: [],
    logNormalisation: Math.log(Math.PI),
    read(position, at, natural) {
      const x = position[at]!;
      const y = position[at + 1]!;
      const s2 = x * x + y * y;
      const s = Math.sqrt(s2);
      const q = 1 / (1 + s2);
      natural[target] = x * s * q;
      natural[target + 1] = y * s * q;
      return 2 * all * Math.log(q);
    },
    pull(position, at, byNatural, gradient) {
      const x = position[at]!;
      const y = position[at + 1]!;
      const s2 = x * x + y * y;
      const s = Math.sqrt(s2);
      const q = 1 / (1 + s2);
      const common = s > 0 ? (1 / s - 2 * s * q) * q : 0;
      const byK = byNatural[target]!;
      const byH = byNatural[target + 1]!;
      gradient[at]! += byK * (s * q + x * x * common) + byH * x * y * common - 4 * all * x * q;
      gradient[at + 1]! += byH * (s * q + y * y * common) + byK * x * y * common - 4 * all * y * q;
    },
    write(natural, position, at) {
      const k = natural[target]!;
      const h = natural[target + 1]!;
      const e = Math.min(Math.max(Math.hypot(k, h), 1e-6), 0.98);
      const s = Math.sqrt(e / (1 - e));
      const omega = Math.atan2(h, k);
      position[at] = s * Math.cos(omega);
      position[at + 1] = s * Math.sin(omega);
    },
  };
}

/** e and omega each with a dial of its own or fixed, where the case states one of them. */
export function statedShapeBlock(
  target: number,
  eccentricity: Dial | number,
  argumentRad: Dial | number,
): Block {
  const eDial = typeof eccentricity === 'number' ? null : eccentricity;
  const wDial = typeof argumentRad === 'number' ? null : argumentRad;
  const wAt = eDial === null ? 0 : 1;
  const eOf = (position: Float64Array, at: number): number =>
    eDial === null ? (eccentricity as number) : eDial.value(position[at]!);
  const wOf = (position: Float64Array, at: number): number =>
    wDial === null ? (argumentRad as number) : wDial.value(position[at + wAt]!);
  return {
    size: wAt + (wDial === null ? 0 : 1),
    mirrored: [],
    logNormalisation: (eDial?.logNormalisation ?? 0) + (wDial?.logNormalisation ?? 0),
    read(position, at, natural) {
      const e = eOf(position, at);
      const w = wOf(position, at);
      if (!(e >= 0 && e < 1)) return -Infinity;
      natural[target] = e * Math.cos(w);
      natural[target + 1] = e * Math.sin(w);
      return (eDial?.logPrior(position[at]!) ?? 0) + (wDial?.logPrior(position[at + wAt]!) ?? 0);
    },
    pull(position, at, byNatural, gradient) {
      const e = eOf(position, at);
      const w = wOf(position, at);
      const byK = byNatural[target]!;
      const byH = byNatural[target + 1]!;
      if (eDial !== null) {
        const u = position[at]!;
        gradient[at]! += (byK * Math.cos(w) + byH * Math.sin(w)) * eDial.slope(u) + eDial.logPriorSlope(u);
      }
      if (wDial !== null) {
        const u = position[at + wAt]!;
        gradient[at + wAt]! +=
          e * (byH * Math.cos(w) - byK * Math.sin(w)) * wDial.slope(u) + wDial.logPriorSlope(u);
      }
    },
    write(natural, position, at) {
      const k = natural[target]!;
      const h = natural[target + 1]!;
      if (eDial !== null) position[at] = eDial.position(Math.hypot(k, h));
      if (wDial !== null) position[at + wAt] = wDial.position(Math.atan2(h, k));
    },
  };
}

/** Logistic coordinates end here: 1e-9 of the range is left outside. */
const LARGEST_LOGISTIC = 20;

/**
 * u1 and u2 by q1 = (u1 + u2)^2 and q2 = u1/(2(u1 + u2)), both uniform on (0, 1): uniform over all physical pairs [Kipping2013].
 *
 * @param target - natural index of u1; u2 follows
 */
export function triangleBlock(target: number, use: PriorUse): Block {
  const all = use === 'all' ? 1 : 0;
  const share = (u: number): number => 1 / (1 + Math.exp(-u));
  const coordinate = (value: number): number => {
    const inside = Math.min(0.98, Math.max(0.02, value));
    return Math.log(inside / (1 - inside));
  };
  return {
    size: 2,
    mirrored: [],
    logNormalisation: 0,
    read(position, at, natural) {
      const a = position[at]!;
      const b = position[at + 1]!;
      if (!(Math.abs(a) < LARGEST_LOGISTIC && Math.abs(b) < LARGEST_LOGISTIC)) return -Infinity;
      const root = Math.sqrt(share(a));
      const q2 = share(b);
      natural[target] = 2 * root * q2;
      natural[target + 1] = root * (1 - 2 * q2);
      return all === 0
        ? 0
        : Math.log(share(a)) + Math.log(share(-a)) + Math.log(share(b)) + Math.log(share(-b));
    },
    pull(position, at, byNatural, gradient) {
      const a = position[at]!;
      const b = position[at + 1]!;
      const root = Math.sqrt(share(a));
      const q2 = share(b);
      const by1 = byNatural[target]!;
      const by2 = byNatural[target + 1]!;
      // d root/d a = root share(-a)/2.
      gradient[at]! +=
        (by1 * 2 * q2 + by2 * (1 - 2 * q2)) * 0.5 * root * share(-a) + all * (share(-a) - share(a));
      gradient[at + 1]! += 2 * root * (by1 - by2) * q2 * share(-b) + all * (share(-b) - share(b));
    },
    write(natural, position, at) {
      const u1 = natural[target]!;
      const u2 = natural[target + 1]!;
      const sum = Math.max(1e-3, u1 + u2);
      position[at] = coordinate(sum * sum);
      position[at + 1] = coordinate(u1 / (2 * sum));
    },
  };
}
