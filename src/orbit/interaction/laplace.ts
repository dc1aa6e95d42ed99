/** Laplace coefficients: how strongly two circular orbits feel each other's harmonics. */
import { ModelDomainError } from '../../errors.js';

export interface LaplaceCoefficient {
  readonly value: number;
  /** Derivative by alpha. */
  readonly slope: number;
}

/**
 * b_s^(j)(alpha) = 2/pi times the integral over psi from 0 to pi of cos(j psi) / (1 - 2 alpha cos psi + alpha^2)^s.
 *
 * @param s - exponent, 1/2, 3/2 ...
 * @param j - harmonic, whole number (negative ones equal positive ones)
 * @param alpha - ratio of the semi-major axes, 0 <= alpha <= 0.99
 * @throws ModelDomainError outside
 *
 * Method: the trapezoidal rule, which converges like alpha^points for this periodic integrand.
 * Accuracy: 1e-13 relative to 40-digit quadrature for alpha up to 0.95, j up to 12 (test/reference/interaction).
 */
export function laplaceCoefficient(s: number, j: number, alpha: number): LaplaceCoefficient {
  if (!(alpha >= 0 && alpha <= 0.99))
    throw new ModelDomainError('ratio of semi-major axes', alpha, '0 .. 0.99');
  if (!Number.isInteger(j)) throw new ModelDomainError('harmonic', j, 'the whole numbers');
  const points = 2 * Math.ceil((40 / -Math.log(Math.max(alpha, 0.1)) + Math.abs(j)) / 2) + 16;
  let value = 0;
  let slope = 0;
  for (let k = 0; k <= points; k++) {
    const psi = (Math.PI * k) / points;
    const cosine = Math.cos(psi);
    const distance = 1 - 2 * alpha * cosine + alpha * alpha;
    const term = Math.cos(j * psi) * distance ** -s * (k === 0 || k === points ? 0.5 : 1);
    value += term;
    slope += (term * -2 * s * (alpha - cosine)) / distance;
  }
  return { value: (2 * value) / points, slope: (2 * slope) / points };
}
