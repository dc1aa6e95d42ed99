/** A density multiplied by Gaussian windows in some of its coordinates. */
import type { SmoothDensity } from '../../src/numerics/sampling/density.js';

/** Weight exp(-(x - centre)^2 / (2 width^2)) on coordinate `at`. */
export interface Window {
  readonly at: number;
  readonly centre: number;
  readonly width: number;
}

export function windowedDensity(density: SmoothDensity, windows: readonly Window[]): SmoothDensity {
  return {
    size: density.size,
    evaluate(position, gradient): number {
      let value = density.evaluate(position, gradient);
      for (const { at, centre, width } of windows) {
        const z = (position[at]! - centre) / width;
        value -= 0.5 * z * z;
        gradient[at]! -= z / width;
      }
      return value;
    },
  };
}
