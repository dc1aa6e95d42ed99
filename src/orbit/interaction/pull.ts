/**
 * Accelerations of companions relative to their star, which is itself pulled: each companion feels the star (with the
 * sum of both masses), the others, and the others' pull on the star. Points of mass, Newton's law.
 */
import type { SecondOrderSystem } from '../../numerics/gauss-radau.js';

/** Motion in one plane: components (x, z) of body after body, au, days. */
export class PlanarPull implements SecondOrderSystem {
  readonly componentCount: number;
  readonly groupSize = 2;
  private readonly starGm: number;
  private readonly gms: Float64Array;
  private readonly inverseCubes: Float64Array;

  /** @param gms - one per companion, in the unit of `starGm` */
  constructor(starGm: number, gms: Float64Array) {
    this.starGm = starGm;
    this.gms = gms;
    this.componentCount = 2 * gms.length;
    this.inverseCubes = new Float64Array(gms.length);
  }

  accelerations(positions: Float64Array, out: Float64Array): void {
    const { gms, inverseCubes } = this;
    const count = gms.length;
    let starX = 0;
    let starZ = 0;
    for (let i = 0; i < count; i++) {
      const x = positions[2 * i]!;
      const z = positions[2 * i + 1]!;
      const square = x * x + z * z;
      const cube = 1 / (square * Math.sqrt(square));
      inverseCubes[i] = cube;
      starX += gms[i]! * cube * x;
      starZ += gms[i]! * cube * z;
    }
    for (let i = 0; i < count; i++) {
      const weight = this.starGm * inverseCubes[i]!;
      out[2 * i] = -weight * positions[2 * i]! - starX;
      out[2 * i + 1] = -weight * positions[2 * i + 1]! - starZ;
    }
    for (let i = 1; i < count; i++) {
      for (let j = 0; j < i; j++) {
        const dx = positions[2 * j]! - positions[2 * i]!;
        const dz = positions[2 * j + 1]! - positions[2 * i + 1]!;
        const square = dx * dx + dz * dz;
        const cube = 1 / (square * Math.sqrt(square));
        const onI = gms[j]! * cube;
        const onJ = gms[i]! * cube;
        out[2 * i]! += onI * dx;
        out[2 * i + 1]! += onI * dz;
        out[2 * j]! -= onJ * dx;
        out[2 * j + 1]! -= onJ * dz;
      }
    }
  }
}

/** Motion in space: components (x, y, z) of body after body, au, days. */
export class SpatialPull implements SecondOrderSystem {
  readonly componentCount: number;
  readonly groupSize = 3;
  private readonly starGm: number;
  private readonly gms: Float64Array;
  private readonly inverseCubes: Float64Array;

  /** @param gms - one per companion, in the unit of `starGm` */
  constructor(starGm: number, gms: Float64Array) {
    this.starGm = starGm;
    this.gms = gms;
    this.componentCount = 3 * gms.length;
    this.inverseCubes = new Float64Array(gms.length);
  }

  accelerations(positions: Float64Array, out: Float64Array): void {
    const { gms, inverseCubes } = this;
    const count = gms.length;
    let starX = 0;
    let starY = 0;
    let starZ = 0;
    for (let i = 0; i < count; i++) {
      const x = positions[3 * i]!;
      const y = positions[3 * i + 1]!;
      const z = positions[3 * i + 2]!;
      const square = x * x + y * y + z * z;
      const cube = 1 / (square * Math.sqrt(square));
      inverseCubes[i] = cube;
      const pull = gms[i]! * cube;
      starX += pull * x;
      starY += pull * y;
      starZ += pull * z;
    }
    for (let i = 0; i < count; i++) {
      const weight = this.starGm * inverseCubes[i]!;
      out[3 * i] = -weight * positions[3 * i]! - starX;
      out[3 * i + 1] = -weight * positions[3 * i + 1]! - starY;
      out[3 * i + 2] = -weight * positions[3 * i + 2]! - starZ;
    }
    for (let i = 1; i < count; i++) {
      for (let j = 0; j < i; j++) {
        const dx = positions[3 * j]! - positions[3 * i]!;
        const dy = positions[3 * j + 1]! - positions[3 * i + 1]!;
        const dz = positions[3 * j + 2]! - positions[3 * i + 2]!;
        const square = dx * dx + dy * dy + dz * dz;
        const cube = 1 / (square * Math.sqrt(square));
        const onI = gms[j]! * cube;
        const onJ = gms[i]! * cube;
        out[3 * i]! += onI * dx;
        out[3 * i + 1]! += onI * dy;
        out[3 * i + 2]! += onI * dz;
        out[3 * j]! -= onJ * dx;
        out[3 * j + 1]! -= onJ * dy;
        out[3 * j + 2]! -= onJ * dz;
      }
    }
  }
}
