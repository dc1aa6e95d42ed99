/**
 * The two comparisons that numerical tests use. Both throw with got, want, difference, bound and their ratio, so a
 * failure says by how much and a reader sees how much margin a bound has.
 */

/** Bound of a comparison. Exactly one of `abs` (in `unit`) and `rel` (of the wanted value) is given. */
export interface Bound {
  readonly abs?: number;
  readonly rel?: number;
  /** Unit of the numbers compared, for the message; `1` when dimensionless. */
  readonly unit: string;
  /** Where the bound comes from: what was measured, or what the source printed. */
  readonly why: string;
}

/** Throws unless |got - want| <= bound. A NaN on either side always fails; equal infinities pass. */
export function expectWithin(got: number, want: number, bound: Bound): void {
  if ((bound.abs === undefined) === (bound.rel === undefined)) {
    throw new Error('expectWithin needs exactly one of abs and rel');
  }
  const limit = bound.abs ?? Math.abs(want) * bound.rel!;
  const difference = got === want ? 0 : Math.abs(got - want);
  if (difference <= limit) return;
  throw new Error(
    `got ${got} ${bound.unit}, want ${want} ${bound.unit}: differ by ${difference}, bound ${limit} ` +
      `(ratio ${(difference / limit).toPrecision(3)}; ${bound.why})`,
  );
}

const bits = new BigInt64Array(1);
const asDouble = new Float64Array(bits.buffer);

/** Place of a double on the line of all doubles, so that neighbours differ by 1 and -0 and 0 coincide. */
function placeOf(value: number): bigint {
  asDouble[0] = value;
  const raw = bits[0]!;
  return raw < 0n ? -(raw & 0x7fffffffffffffffn) : raw;
}

/** Number of representable doubles between two numbers; `Infinity` when either is NaN. */
export function ulpsBetween(a: number, b: number): number {
  if (Number.isNaN(a) || Number.isNaN(b)) return Infinity;
  const distance = placeOf(a) - placeOf(b);
  return Number(distance < 0n ? -distance : distance);
}

/** Throws unless the two doubles are at most `ulps` representable numbers apart. */
export function expectUlps(got: number, want: number, ulps: number): void {
  const distance = ulpsBetween(got, want);
  if (distance <= ulps) return;
  throw new Error(`got ${got}, want ${want}: ${distance} ulps apart, bound ${ulps} ulps`);
}
