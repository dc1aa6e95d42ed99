/**
 * Special functions of statistics. Largest relative errors measured against mpmath (test/reference/special/): logGamma 3e-16,
 * erf 5e-16, erfc 2e-14, regularisedGammaQ 2e-14, regularisedBeta and fSurvival 4e-14, normalQuantile 3e-15.
 */

/** zeta(k) - 1 for k = 2 .. 30 (mpmath 1.3.0, 40 digits). */
const ZETA_MINUS_ONE = [
  0.6449340668482264, 0.2020569031595943, 0.08232323371113819, 0.03692775514336993, 0.01734306198444914,
  0.008349277381922827, 0.00407735619794434, 0.0020083928260822143, 0.0009945751278180853,
  0.0004941886041194645, 0.0002460865533080483, 0.00012271334757848915, 6.124813505870483e-5,
  3.058823630702049e-5, 1.528225940865187e-5, 7.637197637899763e-6, 3.81729326499984e-6, 1.908212716553939e-6,
  9.539620338727962e-7, 4.769329867878064e-7, 2.38450502727733e-7, 1.1921992596531106e-7,
  5.960818905125948e-8, 2.980350351465228e-8, 1.4901554828365043e-8, 7.45071178983543e-9,
  3.725334024788457e-9, 1.862659723513049e-9, 9.313274324196682e-10,
];
const ONE_MINUS_EULER = 0.42278433509846713;
/** B_2k / (2k (2k - 1)) of the Stirling series, k = 1 .. 10 (Abramowitz & Stegun 6.1.40). */
const STIRLING = [
  0.08333333333333333, -0.002777777777777778, 0.0007936507936507937, -0.0005952380952380953,
  0.0008417508417508417, -0.0019175269175269176, 0.00641025641025641, -0.029550653594771242,
  0.17964437236883057, -1.3924322169059011,
];
const HALF_LOG_TWO_PI = 0.9189385332046728;
const TWO_OVER_ROOT_PI = 2 / Math.sqrt(Math.PI);
const TINY = 1e-300;
const MOST_TERMS = 1_000_000;

/**
 * Natural logarithm of the gamma function.
 *
 * @param x - > 0; 0 gives Infinity, a negative or NaN argument NaN
 * Method: series about 2 (coefficients zeta(k) - 1) for 0.5 <= x <= 2.5, reached by recurrence from below 10; Stirling above.
 */
export function logGamma(x: number): number {
  if (x === 0 || x === Infinity) return Infinity;
  if (!(x > 0)) return NaN;
  if (x >= 10) return (x - 0.5) * Math.log(x) - x + HALF_LOG_TWO_PI + stirlingCorrection(x);
  if (x < 0.5) return seriesAboutTwo(x) - Math.log(x) - Math.log1p(x);
  if (x < 1.5) return seriesAboutTwo(x - 1) - Math.log1p(x - 1);
  let argument = x;
  let product = 1;
  while (argument > 2.5) {
    argument -= 1;
    product *= argument;
  }
  return Math.log(product) + seriesAboutTwo(argument - 2);
}

/** ln Gamma(2 + z), |z| <= 0.5. */
function seriesAboutTwo(z: number): number {
  let sum = 0;
  for (let k = 30; k >= 2; k--) sum = sum * -z + ZETA_MINUS_ONE[k - 2]! / k;
  return z * (ONE_MINUS_EULER + sum * z);
}

/** ln Gamma(x) - [(x - 1/2) ln x - x + ln(2 pi)/2], x > 0. */
function stirlingCorrection(x: number): number {
  if (x < 10) return logGamma(x) - (x - 0.5) * Math.log(x) + x - HALF_LOG_TWO_PI;
  const inverseSquare = 1 / (x * x);
  let sum = 0;
  for (let k = STIRLING.length - 1; k >= 0; k--) sum = sum * inverseSquare + STIRLING[k]!;
  return sum / x;
}

/** u - ln(1 + u), u > -1, without cancellation near 0; 1 + u is given as well because near u = -1 only it has the digits. */
function excessOverLog(u: number, onePlusU: number): number {
  if (Math.abs(u) > 0.3) return u - Math.log(onePlusU);
  // ln(1 + u) = 2 artanh(r), r = u / (2 + u), and u - 2 r = u r.
  const r = u / (2 + u);
  const square = r * r;
  let power = r * square;
  let sum = 0;
  for (let k = 3; k < 80; k += 2, power *= square) {
    const term = power / k;
    sum += term;
    if (Math.abs(term) < 1e-18 * Math.abs(sum)) break;
  }
  return u * r - 2 * sum;
}

/** Error function, any x. */
export function erf(x: number): number {
  const size = Math.abs(x);
  if (size > 1.5) return Math.sign(x) * (1 - erfc(size));
  return Number.isNaN(x) ? NaN : erfSeries(x);
}

/** Sum of positive terms, |x| <= 1.5 (Abramowitz & Stegun 7.1.6). */
function erfSeries(x: number): number {
  let term = x;
  let sum = x;
  for (let k = 1; Math.abs(term) > 1e-18 * Math.abs(sum); k++) {
    term *= (2 * x * x) / (2 * k + 1);
    sum += term;
  }
  return TWO_OVER_ROOT_PI * Math.exp(-x * x) * sum;
}

/** Complementary error function, any x; relative accuracy holds down to 1e-300. */
export function erfc(x: number): number {
  if (Number.isNaN(x)) return NaN;
  if (x < 0.5) return 1 - erf(x);
  if (x > 27.3) return 0;
  // exp(-x^2) with x^2 in two parts, the first of them exact.
  const coarse = Math.round(x * 64) / 64;
  const gaussian = Math.exp(-coarse * coarse) * Math.exp(-(x - coarse) * (x + coarse));
  return (gaussian * x * gammaFraction(0.5, x * x)) / Math.sqrt(Math.PI);
}

/** Gamma(a, x)·e^x·x^-a by its continued fraction (Abramowitz & Stegun 6.5.31, modified Lentz), x >= 0.25 or so. */
function gammaFraction(a: number, x: number): number {
  let b = x + 1 - a;
  let c = 1 / TINY;
  let d = 1 / b;
  let value = d;
  for (let k = 1; k < MOST_TERMS; k++) {
    const numerator = -k * (k - a);
    b += 2;
    d = 1 / nonZero(numerator * d + b);
    c = nonZero(b + numerator / c);
    const factor = c * d;
    value *= factor;
    if (Math.abs(factor - 1) < 1e-16) break;
  }
  return value;
}

function nonZero(value: number): number {
  return Math.abs(value) < TINY ? TINY : value;
}

/**
 * Upper regularised incomplete gamma function Q(a, x); the probability that chi-square with 2a degrees of freedom exceeds 2x.
 *
 * @param a - > 0, measured up to 1e4
 * @param x - >= 0; outside the domain NaN
 */
export function regularisedGammaQ(a: number, x: number): number {
  if (!(a > 0) || !(x >= 0) || a === Infinity) return NaN;
  if (x === 0) return 1;
  if (x === Infinity) return 0;
  if (x >= a + 1) return gammaPrefix(a, x) * gammaFraction(a, x);
  let term = 1 / a;
  let sum = term;
  for (let k = 1; k < MOST_TERMS && term > 1e-17 * sum; k++) {
    term *= x / (a + k);
    sum += term;
  }
  return 1 - gammaPrefix(a, x) * sum;
}

/** x^a e^-x / Gamma(a). */
function gammaPrefix(a: number, x: number): number {
  if (a < 10) return (x ** a * Math.exp(-x / 2) * Math.exp(-x / 2)) / Math.exp(logGamma(a));
  return (
    Math.sqrt(a / (2 * Math.PI)) * Math.exp(-a * excessOverLog((x - a) / a, x / a) - stirlingCorrection(a))
  );
}

/**
 * Regularised incomplete beta function I_x(a, b).
 *
 * @param x - 0 .. 1
 * @param a - > 0, measured up to 1e4; b likewise; outside the domain NaN
 */
export function regularisedBeta(x: number, a: number, b: number): number {
  return betaOf(x, 1 - x, a, b);
}

/** I_x(a, b) with y = 1 - x given separately, so that neither tail loses digits. */
function betaOf(x: number, y: number, a: number, b: number): number {
  if (!(x >= 0 && x <= 1 && a > 0 && b > 0) || a === Infinity || b === Infinity) return NaN;
  if (x === 0) return 0;
  if (y === 0) return 1;
  const prefix = betaPrefix(x, y, a, b);
  if (x < (a + 1) / (a + b + 2)) return (prefix * betaFraction(x, a, b)) / a;
  return 1 - (prefix * betaFraction(y, b, a)) / b;
}

/** x^a y^b / B(a, b), arranged around its peak so that large a and b keep their digits. */
function betaPrefix(x: number, y: number, a: number, b: number): number {
  const total = a + b;
  const departure = x * b - y * a;
  const exponent =
    a * excessOverLog(departure / a, (x * total) / a) + b * excessOverLog(-departure / b, (y * total) / b);
  const correction = stirlingCorrection(total) - stirlingCorrection(a) - stirlingCorrection(b);
  return Math.sqrt((a / total) * (b / (2 * Math.PI))) * Math.exp(correction - exponent);
}

/** Continued fraction of the incomplete beta function (Abramowitz & Stegun 26.5.8, modified Lentz). */
function betaFraction(x: number, a: number, b: number): number {
  let c = 1;
  let d = 1 / nonZero(1 - ((a + b) * x) / (a + 1));
  let value = d;
  for (let k = 1; k < MOST_TERMS; k++) {
    const even = (k * (b - k) * x) / ((a + 2 * k - 1) * (a + 2 * k));
    d = 1 / nonZero(1 + even * d);
    c = nonZero(1 + even / c);
    value *= c * d;
    const odd = (-(a + k) * (a + b + k) * x) / ((a + 2 * k) * (a + 2 * k + 1));
    d = 1 / nonZero(1 + odd * d);
    c = nonZero(1 + odd / c);
    const factor = c * d;
    value *= factor;
    if (Math.abs(factor - 1) < 1e-16) break;
  }
  return value;
}

/**
 * Probability that Snedecor's F exceeds `f`.
 *
 * @param f - >= 0; d1, d2 - degrees of freedom, > 0
 */
export function fSurvival(f: number, d1: number, d2: number): number {
  if (!(f >= 0)) return NaN;
  if (f === Infinity) return 0;
  const denominator = d2 + d1 * f;
  return betaOf(d2 / denominator, (d1 * f) / denominator, d2 / 2, d1 / 2);
}

/**
 * Value that a standard normal variable stays below with probability p.
 *
 * @param p - 0 .. 1 (0 gives -Infinity, 1 Infinity); outside NaN
 * Method: approximation 26.2.23 of Abramowitz & Stegun, then Halley's iteration on erf or erfc.
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1)) return NaN;
  if (p === 0) return -Infinity;
  if (p === 1) return Infinity;
  if (p === 0.5) return 0;
  const tail = Math.min(p, 1 - p);
  const t = Math.sqrt(-2 * Math.log(tail));
  let z =
    t - (2.515517 + t * (0.802853 + t * 0.010328)) / (1 + t * (1.432788 + t * (0.189269 + t * 0.001308)));
  const central = Math.abs(p - 0.5) < 0.25;
  for (let k = 0; k < 4; k++) {
    // Off-centre the tail, in the middle the departure from one half is the number that has digits.
    const excess = central
      ? Math.abs(p - 0.5) - 0.5 * erf(z * Math.SQRT1_2)
      : 0.5 * erfc(z * Math.SQRT1_2) - tail;
    const newton = (excess * Math.sqrt(2 * Math.PI)) / Math.exp(-0.5 * z * z);
    const change = newton / (1 - 0.5 * z * newton);
    z += change;
    if (Math.abs(change) < 1e-16 * Math.abs(z)) break;
  }
  return p < 0.5 ? -z : z;
}
