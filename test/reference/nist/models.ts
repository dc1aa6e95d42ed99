/**
 * The model functions of the 27 sets with their partial derivatives, written out from the formula in each .dat file.
 * Each writes the partials of the prediction into `d` and returns the prediction.
 */
export type Model = (b: Float64Array, x: readonly number[], d: Float64Array) => number;

const { cos, sin, exp, log, PI } = Math;

/** b1 (1 - exp(-b2 x)) */
const saturation: Model = (b, x, d) => {
  const decay = exp(-b[1]! * x[0]!);
  d[0] = 1 - decay;
  d[1] = b[0]! * x[0]! * decay;
  return b[0]! * (1 - decay);
};

/** exp(-b1 x) / (b2 + b3 x) */
const chwirut: Model = (b, x, d) => {
  const denominator = b[1]! + b[2]! * x[0]!;
  const y = exp(-b[0]! * x[0]!) / denominator;
  d[0] = -x[0]! * y;
  d[1] = -y / denominator;
  d[2] = (-x[0]! * y) / denominator;
  return y;
};

/** b1 exp(-b2 x) + b3 exp(-b4 x) + b5 exp(-b6 x) */
const lanczos: Model = (b, x, d) => {
  let y = 0;
  for (let j = 0; j < 6; j += 2) {
    const decay = exp(-b[j + 1]! * x[0]!);
    d[j] = decay;
    d[j + 1] = -x[0]! * b[j]! * decay;
    y += b[j]! * decay;
  }
  return y;
};

/** b1 exp(-b2 x) + two bells b_j exp(-(x - b_{j+1})^2 / b_{j+2}^2) */
const gauss: Model = (b, x, d) => {
  const decay = exp(-b[1]! * x[0]!);
  d[0] = decay;
  d[1] = -x[0]! * b[0]! * decay;
  let y = b[0]! * decay;
  for (const j of [2, 5]) {
    const offset = x[0]! - b[j + 1]!;
    const width = b[j + 2]!;
    const bell = exp((-offset * offset) / (width * width));
    d[j] = bell;
    d[j + 1] = (b[j]! * bell * 2 * offset) / width ** 2;
    d[j + 2] = (b[j]! * bell * 2 * offset * offset) / width ** 3;
    y += b[j]! * bell;
  }
  return y;
};

/** A polynomial of degree `top` over 1 + a polynomial without constant of degree `bottom`. */
function rational(top: number, bottom: number): Model {
  return (b, x, d) => {
    let numerator = 0;
    let denominator = 1;
    for (let k = 0; k <= top; k++) numerator += b[k]! * x[0]! ** k;
    for (let k = 1; k <= bottom; k++) denominator += b[top + k]! * x[0]! ** k;
    const y = numerator / denominator;
    for (let k = 0; k <= top; k++) d[k] = x[0]! ** k / denominator;
    for (let k = 1; k <= bottom; k++) d[top + k] = (-y * x[0]! ** k) / denominator;
    return y;
  };
}

/** Set name in lower case -> model. */
export const MODELS: Readonly<Record<string, Model>> = {
  misra1a: saturation,
  boxbod: saturation,
  chwirut1: chwirut,
  chwirut2: chwirut,
  lanczos1: lanczos,
  lanczos2: lanczos,
  lanczos3: lanczos,
  gauss1: gauss,
  gauss2: gauss,
  gauss3: gauss,
  kirby2: rational(2, 2),
  hahn1: rational(3, 3),
  thurber: rational(3, 3),
  danwood: (b, x, d) => {
    const power = x[0]! ** b[1]!;
    d[0] = power;
    d[1] = b[0]! * power * log(x[0]!);
    return b[0]! * power;
  },
  misra1b: (b, x, d) => {
    const root = 1 + (b[1]! * x[0]!) / 2;
    d[0] = 1 - root ** -2;
    d[1] = b[0]! * x[0]! * root ** -3;
    return b[0]! * (1 - root ** -2);
  },
  misra1c: (b, x, d) => {
    const inside = 1 + 2 * b[1]! * x[0]!;
    d[0] = 1 - inside ** -0.5;
    d[1] = b[0]! * x[0]! * inside ** -1.5;
    return b[0]! * (1 - inside ** -0.5);
  },
  misra1d: (b, x, d) => {
    const inside = 1 + b[1]! * x[0]!;
    d[0] = (b[1]! * x[0]!) / inside;
    d[1] = (b[0]! * x[0]!) / (inside * inside);
    return (b[0]! * b[1]! * x[0]!) / inside;
  },
  nelson: (b, x, d) => {
    const decay = exp(-b[2]! * x[1]!);
    d[0] = 1;
    d[1] = -x[0]! * decay;
    d[2] = b[1]! * x[0]! * x[1]! * decay;
    return b[0]! - b[1]! * x[0]! * decay;
  },
  enso: (b, x, d) => {
    const year = (2 * PI * x[0]!) / 12;
    d[0] = 1;
    d[1] = cos(year);
    d[2] = sin(year);
    let y = b[0]! + b[1]! * d[1] + b[2]! * d[2];
    for (const j of [3, 6]) {
      const angle = (2 * PI * x[0]!) / b[j]!;
      d[j + 1] = cos(angle);
      d[j + 2] = sin(angle);
      d[j] = ((b[j + 1]! * sin(angle) - b[j + 2]! * cos(angle)) * angle) / b[j]!;
      y += b[j + 1]! * cos(angle) + b[j + 2]! * sin(angle);
    }
    return y;
  },
  eckerle4: (b, x, d) => {
    const offset = (x[0]! - b[2]!) / b[1]!;
    const bell = exp(-0.5 * offset * offset) / b[1]!;
    d[0] = bell;
    d[1] = ((b[0]! * bell) / b[1]!) * (offset * offset - 1);
    d[2] = (b[0]! * bell * offset) / b[1]!;
    return b[0]! * bell;
  },
  mgh09: (b, x, d) => {
    const u = x[0]!;
    const denominator = u * u + u * b[2]! + b[3]!;
    const y = (b[0]! * (u * u + u * b[1]!)) / denominator;
    d[0] = (u * u + u * b[1]!) / denominator;
    d[1] = (b[0]! * u) / denominator;
    d[2] = (-y * u) / denominator;
    d[3] = -y / denominator;
    return y;
  },
  mgh10: (b, x, d) => {
    const sum = x[0]! + b[2]!;
    const factor = exp(b[1]! / sum);
    d[0] = factor;
    d[1] = (b[0]! * factor) / sum;
    d[2] = (-b[0]! * factor * b[1]!) / (sum * sum);
    return b[0]! * factor;
  },
  mgh17: (b, x, d) => {
    const first = exp(-x[0]! * b[3]!);
    const second = exp(-x[0]! * b[4]!);
    d[0] = 1;
    d[1] = first;
    d[2] = second;
    d[3] = -x[0]! * b[1]! * first;
    d[4] = -x[0]! * b[2]! * second;
    return b[0]! + b[1]! * first + b[2]! * second;
  },
  rat42: (b, x, d) => {
    const growth = exp(b[1]! - b[2]! * x[0]!);
    const y = b[0]! / (1 + growth);
    d[0] = 1 / (1 + growth);
    d[1] = (-y * growth) / (1 + growth);
    d[2] = (y * x[0]! * growth) / (1 + growth);
    return y;
  },
  rat43: (b, x, d) => {
    const growth = exp(b[1]! - b[2]! * x[0]!);
    const power = (1 + growth) ** (-1 / b[3]!);
    const y = b[0]! * power;
    d[0] = power;
    d[1] = (-y * growth) / (b[3]! * (1 + growth));
    d[2] = (y * x[0]! * growth) / (b[3]! * (1 + growth));
    d[3] = (y * log(1 + growth)) / b[3]! ** 2;
    return y;
  },
  roszman1: (b, x, d) => {
    const offset = x[0]! - b[3]!;
    const common = PI * (offset * offset + b[2]! * b[2]!);
    d[0] = 1;
    d[1] = -x[0]!;
    d[2] = -offset / common;
    d[3] = -b[2]! / common;
    return b[0]! - b[1]! * x[0]! - Math.atan(b[2]! / offset) / PI;
  },
  bennett5: (b, x, d) => {
    const base = b[1]! + x[0]!;
    const power = base ** (-1 / b[2]!);
    d[0] = power;
    d[1] = (-b[0]! * power) / (b[2]! * base);
    d[2] = (b[0]! * power * log(base)) / b[2]! ** 2;
    return b[0]! * power;
  },
};
