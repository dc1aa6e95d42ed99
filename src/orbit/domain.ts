/** Checks of what enters the formulas of this room. */
import { ModelDomainError } from '../errors.js';

/** @throws ModelDomainError unless 0 <= e < 1 */
export function requireEccentricity(eccentricity: number): void {
  if (!(eccentricity >= 0 && eccentricity < 1)) {
    throw new ModelDomainError('eccentricity', eccentricity, '[0, 1): only bound orbits are modelled');
  }
}

/** @throws ModelDomainError unless the value is finite */
export function requireFinite(quantity: string, value: number): void {
  if (!Number.isFinite(value)) throw new ModelDomainError(quantity, value, 'the finite numbers');
}

/** @throws ModelDomainError unless the value is finite and > 0 */
export function requirePositive(quantity: string, value: number): void {
  if (!(value > 0 && value < Infinity)) {
    throw new ModelDomainError(quantity, value, 'the finite numbers above zero');
  }
}

/** @throws ModelDomainError unless the value is finite and >= 0 */
export function requireNotNegative(quantity: string, value: number): void {
  if (!(value >= 0 && value < Infinity)) {
    throw new ModelDomainError(quantity, value, 'zero and the finite numbers above it');
  }
}
