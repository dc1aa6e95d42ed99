/** Lines of equal height on a grid (marching squares), closed and directed. */

// Sides of a cell: 0 bottom, 1 right, 2 top, 3 left. Corners: bit 1 bottom left, 2 bottom right, 4 top right, 8 top left.
// Each entry: pairs (from, to) of sides, with the higher ground at the left of the way.
const WAYS: readonly (readonly (readonly [number, number])[])[] = [
  [], [[0, 3]], [[1, 0]], [[1, 3]], [[2, 1]], [], [[2, 0]], [[2, 3]],
  [[3, 2]], [[0, 2]], [], [[1, 2]], [[3, 1]], [[0, 1]], [[3, 0]], [],
]; // prettier-ignore

/** The two kinds of saddle, where the middle of the cell is low or high. */
const SADDLES: Readonly<Record<number, Readonly<Record<'low' | 'high', readonly (readonly [number, number])[]>>>> = {
  5: { low: [[0, 3], [2, 1]], high: [[0, 1], [2, 3]] },
  10: { low: [[1, 0], [3, 2]], high: [[3, 0], [1, 2]] },
}; // prettier-ignore

/**
 * Closed lines along which linear interpolation between grid points gives `level`; the higher ground lies at their left
 * (seen with x to the right and y upwards), so hills run counter-clockwise and hollows clockwise.
 *
 * @param heights - (ny, nx), row-major; its rim must lie below the level, or lines would leave the grid
 * @param level - a point at exactly this height counts as high
 * @returns lines of alternating x and y in steps of the grid, x in 0 .. nx - 1; the first point is not repeated
 * @throws RangeError when a point of the rim reaches the level
 */
export function isoLines(heights: Float64Array, nx: number, ny: number, level: number): Float64Array[] {
  // Each crossing lies on one edge of the grid: 2·point for the edge to the right, 2·point + 1 for the edge upwards.
  const next = new Int32Array(2 * nx * ny).fill(-1);
  const high = (i: number, j: number): boolean => heights[j * nx + i]! >= level;
  for (let i = 0; i < nx; i += 1) if (high(i, 0) || high(i, ny - 1)) throw rimError(level);
  for (let j = 0; j < ny; j += 1) if (high(0, j) || high(nx - 1, j)) throw rimError(level);
  for (let j = 0; j < ny - 1; j += 1) {
    for (let i = 0; i < nx - 1; i += 1) {
      const point = j * nx + i;
      const corners =
        (high(i, j) ? 1 : 0) +
        (high(i + 1, j) ? 2 : 0) +
        (high(i + 1, j + 1) ? 4 : 0) +
        (high(i, j + 1) ? 8 : 0);
      if (corners === 0 || corners === 15) continue;
      const edges = [2 * point, 2 * (point + 1) + 1, 2 * (point + nx), 2 * point + 1];
      const saddle = SADDLES[corners];
      const middle =
        (heights[point]! + heights[point + 1]! + heights[point + nx]! + heights[point + nx + 1]!) / 4;
      const ways = saddle === undefined ? WAYS[corners]! : saddle[middle >= level ? 'high' : 'low'];
      for (const [from, to] of ways) next[edges[from]!] = edges[to]!;
    }
  }
  const lines: Float64Array[] = [];
  for (let start = 0; start < next.length; start += 1) {
    if (next[start] === -1) continue;
    const line: number[] = [];
    for (let edge = start; next[edge] !== -1;) {
      line.push(...crossing(heights, nx, edge, level));
      const following = next[edge]!;
      next[edge] = -1;
      edge = following;
    }
    lines.push(Float64Array.from(line));
  }
  return lines;
}

function crossing(heights: Float64Array, nx: number, edge: number, level: number): [number, number] {
  const point = edge >> 1;
  const upwards = edge % 2 === 1;
  const one = heights[point]!;
  const other = heights[point + (upwards ? nx : 1)]!;
  const share = (level - one) / (other - one);
  const [i, j] = [point % nx, Math.floor(point / nx)];
  return upwards ? [i, j + share] : [i + share, j];
}

function rimError(level: number): RangeError {
  return new RangeError(`the rim of the grid reaches the level ${level}: lines could not be closed`);
}
