import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { isoLines } from '../../../src/dossier/charts/iso-lines.js';

/** Heights of a function on a grid whose rim is 0. */
function grid(nx: number, ny: number, height: (x: number, y: number) => number): Float64Array {
  return Float64Array.from({ length: nx * ny }, (_, k) => {
    const [i, j] = [k % nx, Math.floor(k / nx)];
    return i === 0 || j === 0 || i === nx - 1 || j === ny - 1 ? 0 : height(i, j);
  });
}

/** Shoelace formula: positive when counter-clockwise with y upwards. */
function area(line: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < line.length; k += 2) {
    const next = (k + 2) % line.length;
    sum += (line[k]! * line[next + 1]! - line[next]! * line[k + 1]!) / 2;
  }
  return sum;
}

describe('isoLines', () => {
  it('draws a cone as a circle that runs counter-clockwise', () => {
    const lines = isoLines(
      grid(101, 91, (x, y) => Math.max(0, 40 - Math.hypot(x - 50, y - 45))),
      101,
      91,
      10,
    );
    expect(lines).toHaveLength(1);
    const [line] = lines;
    for (let k = 0; k < line!.length; k += 2) {
      // Linear interpolation on a cone errs by at most h²/(8 r), here 0.004; twice that is allowed.
      expect(Math.abs(Math.hypot(line![k]! - 50, line![k + 1]! - 45) - 30)).toBeLessThan(0.009);
    }
    expect(area(line!) / (Math.PI * 900)).toBeGreaterThan(0.998);
    expect(area(line!) / (Math.PI * 900)).toBeLessThan(1.0005);
  });

  it('draws a crater as two lines, the inner one clockwise', () => {
    const lines = isoLines(
      grid(81, 81, (x, y) => Math.max(0, 10 - Math.abs(Math.hypot(x - 40, y - 40) - 20))),
      81,
      81,
      5,
    );
    const areas = lines.map(area).sort((one, other) => one - other);
    expect(areas).toHaveLength(2);
    expect(Math.abs(areas[0]! / (-Math.PI * 225) - 1)).toBeLessThan(0.01); // radius 20 - 5
    expect(Math.abs(areas[1]! / (Math.PI * 625) - 1)).toBeLessThan(0.01); // radius 20 + 5
  });

  it('decides saddles by the middle of the cell, both ways', () => {
    const saddle = (value: number, high: number): Float64Array =>
      Float64Array.of(0, 0, 0, 0, 0, high, value, 0, 0, value, high, 0, 0, 0, 0, 0);
    expect(isoLines(saddle(0, 4), 4, 4, 3)).toHaveLength(2); // middle 2: two hills
    expect(isoLines(saddle(0, 4), 4, 4, 1)).toHaveLength(1); // middle 2: one ridge
    const turned = Float64Array.of(0, 0, 0, 0, 0, 0, 4, 0, 0, 4, 0, 0, 0, 0, 0, 0);
    expect(isoLines(turned, 4, 4, 3)).toHaveLength(2);
    expect(isoLines(turned, 4, 4, 1)).toHaveLength(1);
  });

  it('on any ground: every point lies at the level on an edge of the grid, every crossing is used once', () => {
    const [nx, ny] = [9, 8];
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: nx * ny, maxLength: nx * ny }),
        fc.double({ min: 0.01, max: 0.99, noNaN: true }),
        (values, level) => {
          const heights = grid(nx, ny, (i, j) => values[j * nx + i]!);
          const lines = isoLines(heights, nx, ny, level);
          let crossings = 0;
          const high = (i: number, j: number): boolean => heights[j * nx + i]! >= level;
          for (let j = 0; j < ny; j += 1) {
            for (let i = 0; i < nx; i += 1) {
              if (i + 1 < nx && high(i, j) !== high(i + 1, j)) crossings += 1;
              if (j + 1 < ny && high(i, j) !== high(i, j + 1)) crossings += 1;
            }
          }
          expect(lines.reduce((sum, line) => sum + line.length / 2, 0)).toBe(crossings);
          for (const line of lines) {
            for (let k = 0; k < line.length; k += 2) {
              const [x, y] = [line[k]!, line[k + 1]!];
              const [i, j] = [Math.floor(x), Math.floor(y)];
              const [one, other] = [heights[j * nx + i]!, heights[Math.ceil(y) * nx + Math.ceil(x)]!];
              expect(Number.isInteger(x) || Number.isInteger(y)).toBe(true);
              const share = x - i + (y - j);
              expect(Math.abs(one + share * (other - one) - level)).toBeLessThan(1e-12);
            }
          }
        },
      ),
      { seed: 20, numRuns: 200 },
    );
  });

  it('refuses ground that is high at its rim', () => {
    expect(() => isoLines(Float64Array.of(0, 2, 0, 0, 0, 0, 0, 0, 0), 3, 3, 1)).toThrow(RangeError);
  });
});
