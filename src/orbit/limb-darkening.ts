/**
 * The triangle of physical quadratic limb darkening and the unit square that maps onto it evenly [Kipping2013].
 *
 * I = 1 - u1 (1 - mu) - u2 (1 - mu)^2 is positive everywhere and darkens towards the limb when u1 + u2 <= 1, u1 >= 0 and
 * u1 + 2 u2 >= 0 (the last where u1 + u2 < 1). With q1 = (u1 + u2)^2 and q2 = u1 / [2 (u1 + u2)], uniform on the square is
 * uniform on the triangle.
 */
import { ModelDomainError } from '../errors.js';

export interface QuadraticLimbDarkening {
  readonly u1: number;
  readonly u2: number;
}

/** Place in the unit square. */
export interface TriangleSample {
  readonly q1: number;
  readonly q2: number;
}

/** u1 = 2 sqrt(q1) q2, u2 = sqrt(q1) (1 - 2 q2); 0 <= q1, q2 <= 1. */
export function limbDarkeningFromTriangle(sample: TriangleSample): QuadraticLimbDarkening {
  requireUnit('q1', sample.q1);
  requireUnit('q2', sample.q2);
  const sum = Math.sqrt(sample.q1);
  return { u1: 2 * sum * sample.q2, u2: sum * (1 - 2 * sample.q2) };
}

/**
 * Inverse of the above; the undarkened disc u1 = u2 = 0 belongs to every q2 and gets 1/2.
 *
 * @throws ModelDomainError outside the triangle
 */
export function triangleFromLimbDarkening(law: QuadraticLimbDarkening): TriangleSample {
  const { u1, u2 } = law;
  const sum = u1 + u2;
  if (!(sum >= 0 && sum <= 1))
    throw new ModelDomainError(
      'u1 + u2',
      sum,
      '[0, 1]: the limb has light and is not brighter than the centre',
    );
  if (sum === 0 && u1 === 0) return { q1: 0, q2: 0.5 };
  if (!(u1 >= 0 && u1 <= 2 * sum))
    throw new ModelDomainError('u1', u1, `[0, ${2 * sum}], twice u1 + u2: the star darkens towards its limb`);
  return { q1: sum * sum, q2: u1 / (2 * sum) };
}

/** Whether a pair lies in the triangle. */
export function isPhysicalLimbDarkening(law: QuadraticLimbDarkening): boolean {
  const sum = law.u1 + law.u2;
  return sum >= 0 && sum <= 1 && law.u1 >= 0 && law.u1 <= 2 * sum;
}

function requireUnit(quantity: string, value: number): void {
  if (!(value >= 0 && value <= 1)) throw new ModelDomainError(quantity, value, '[0, 1]');
}
