/**
 * Search over Keplerian shapes: at each trial frequency, eccentricity and phase the velocity is linear in K cos omega,
 * K sin omega and the background [WrightHoward2009], so that its best fit is one small linear solve. Finds orbits too
 * eccentric for a sinusoid to see. The grid is coarse; what it finds is only a start for the nonlinear fit.
 */
import { solveKeplerArray } from '../orbit/kepler-array.js';
import { TWO_PI } from '../orbit/constants.js';
import type { LinearBackground } from './linear-background.js';
import { scanData, type ScanData } from './scan-data.js';
import {
  ANCHORED_FROM,
  TRIAL_ECCENTRICITIES,
  anchorOffsets,
  shapeTable,
  shortestPeriodDays,
  swingWidth,
  type ShapeTable,
} from './shape-grid.js';

/** A start found by the scan. */
export interface ShapeStart {
  readonly frequencyPerDay: number;
  readonly eccentricity: number;
  /** Mean anomaly at the epoch, rad. */
  readonly meanAnomalyAtEpochRad: number;
  /** Coefficients of cos nu and sin nu, m/s: K cos omega and -K sin omega. */
  readonly cosAmplitude: number;
  readonly sinAmplitude: number;
  readonly power: number;
}

export interface ShapeScanSetting {
  readonly lowestFrequencyPerDay: number;
  readonly highestFrequencyPerDay: number;
  readonly spanDays: number;
  /** (n), index of the instrument of each point. */
  readonly instrumentOf: Uint16Array;
  readonly starts: number;
}

/**
 * Most points evaluated per eccentricity: about half a second. Long spans with many velocities are cut at the short
 * periods, where the sinusoids still look.
 */
const LARGEST_EFFORT = 1e8;

/** Best start per frequency cell of one resolution element. */
class CellBoard {
  readonly power: Float64Array;
  readonly starts: (ShapeStart | null)[];
  readonly #low: number;
  readonly #cellsPerFrequency: number;

  constructor(low: number, high: number, spanDays: number) {
    const cells = Math.max(1, Math.ceil((high - low) * spanDays) + 1);
    this.power = new Float64Array(cells);
    this.starts = new Array<ShapeStart | null>(cells).fill(null);
    this.#low = low;
    this.#cellsPerFrequency = spanDays;
  }

  offer(frequencyPerDay: number, eccentricity: number, meanAnomalyAtEpochRad: number, power: number): void {
    const cell = Math.round((frequencyPerDay - this.#low) * this.#cellsPerFrequency);
    if (!(power > (this.power[cell] ?? Infinity))) return;
    this.power[cell] = power;
    this.starts[cell] = {
      frequencyPerDay,
      eccentricity,
      meanAnomalyAtEpochRad,
      cosAmplitude: NaN,
      sinAmplitude: NaN,
      power,
    };
  }

  /** The strongest cells, each higher than its neighbours. */
  strongest(count: number): ShapeStart[] {
    const power = this.power;
    const peaks: ShapeStart[] = [];
    for (let c = 0; c < power.length; c++) {
      const start = this.starts[c];
      if (!start) continue;
      if ((power[c - 1] ?? 0) > power[c]! || (power[c + 1] ?? 0) > power[c]!) continue;
      peaks.push(start);
    }
    return peaks.sort((a, b) => b.power - a.power).slice(0, count);
  }
}

/**
 * Best gain in chi-square over the given phases of one shape at one frequency.
 *
 * @param position - (n), M at the epoch-free phase, in cells of the table
 * @param phases - offsets in cells; the first `phaseCount` are tried
 * @param best - (2), overwritten: gain in chi-square, phase
 */
function bestPhase(
  data: ScanData,
  table: ShapeTable,
  position: Float64Array,
  phases: Float64Array,
  phaseCount: number,
  best: Float64Array,
): void {
  const { weights, weightedResiduals, groupStarts, inverseGroupWeights, totalWeight } = data;
  const { cosNu, sinNu } = table;
  const mask = table.size - 1;
  const groups = inverseGroupWeights.length;
  best[0] = 0;
  for (let p = 0; p < phaseCount; p++) {
    const phase = phases[p]!;
    let cc = 0;
    let cs = 0;
    let yc = 0;
    let ys = 0;
    let meanCc = 0;
    let meanCs = 0;
    let meanSs = 0;
    for (let g = 0; g < groups; g++) {
      let wcSum = 0;
      let wsSum = 0;
      const end = groupStarts[g + 1]!;
      for (let i = groupStarts[g]!; i < end; i++) {
        const at = (position[i]! + phase) & mask;
        const c = cosNu[at]!;
        const s = sinNu[at]!;
        const wc = weights[i]! * c;
        const y = weightedResiduals[i]!;
        wcSum += wc;
        wsSum += weights[i]! * s;
        cc += wc * c;
        cs += wc * s;
        yc += y * c;
        ys += y * s;
      }
      const inverse = inverseGroupWeights[g]!;
      meanCc += wcSum * wcSum * inverse;
      meanCs += wcSum * wsSum * inverse;
      meanSs += wsSum * wsSum * inverse;
    }
    // cos^2 + sin^2 = 1 gives the norm of the sine from that of the cosine.
    const ss = totalWeight - cc - meanSs;
    cc -= meanCc;
    cs -= meanCs;
    const determinant = cc * ss - cs * cs;
    if (!(determinant > 1e-6 * (cc + ss) * (cc + ss))) continue;
    const gain = (ss * yc * yc + cc * ys * ys - 2 * cs * yc * ys) / determinant;
    if (gain > best[0]) {
      best[0] = gain;
      best[1] = phase;
    }
  }
}

/**
 * Scans Keplerian shapes and returns the strongest starts, one per resolution element of frequency.
 *
 * The power is exact for a background of zero points; drift and companions are projected out of the data but not of
 * the trial shapes, which can only underrate a start.
 */
export function scanShapes(background: LinearBackground, setting: ShapeScanSetting): ShapeStart[] {
  const { chiSquare } = background;
  if (background.timesDays.length < 6 || !(chiSquare > 0)) return [];
  const data = scanData(background, setting.instrumentOf);
  const n = data.timesDays.length;
  const { lowestFrequencyPerDay: low, highestFrequencyPerDay: high, spanDays: span } = setting;
  const board = new CellBoard(low, high, span);
  const position = new Float64Array(n);
  const phases = new Float64Array(512);
  const best = new Float64Array(2);

  for (const eccentricity of TRIAL_ECCENTRICITIES) {
    const width = swingWidth(eccentricity);
    const stepPerDay = Math.min(0.25, width) / (1.2 * span);
    const top = Math.min(high, 1 / shortestPeriodDays(eccentricity));
    const table = shapeTable(eccentricity);
    const { size } = table;
    const anchored = eccentricity > ANCHORED_FROM;
    const offsets = anchorOffsets(eccentricity);
    const uniformPhases = Math.ceil(1.5 / width);
    const trialsPerStep = anchored ? data.anchors.length * offsets.length : uniformPhases;
    const affordable = Math.floor(LARGEST_EFFORT / (trialsPerStep * n));
    const steps = Math.min(Math.floor((top - low) / stepPerDay), affordable);
    for (let step = 0; step <= steps; step++) {
      const frequency = low + step * stepPerDay;
      for (let i = 0; i < n; i++) {
        const turns = frequency * data.timesDays[i]!;
        position[i] = (turns - Math.floor(turns)) * size;
      }
      let phaseCount = 0;
      if (anchored) {
        for (const anchor of data.anchors) {
          for (const offset of offsets) {
            const phase = offset * size - position[anchor]!;
            phases[phaseCount++] = phase - Math.floor(phase / size) * size;
          }
        }
      } else {
        for (let p = 0; p < uniformPhases; p++) phases[phaseCount++] = (p / uniformPhases) * size;
      }
      bestPhase(data, table, position, phases, phaseCount, best);
      board.offer(frequency, eccentricity, (TWO_PI * best[1]!) / size, best[0]! / chiSquare);
    }
  }
  return board.strongest(setting.starts).map((start) => withAmplitudes(background, start));
}

/** The linear amplitudes of a start, against the residuals (background not refitted: the nonlinear fit does that). */
function withAmplitudes(background: LinearBackground, start: ShapeStart): ShapeStart {
  const { timesDays, weights, residuals } = background;
  const n = timesDays.length;
  const meanAnomalies = Float64Array.from(
    timesDays,
    (t) => start.meanAnomalyAtEpochRad + TWO_PI * start.frequencyPerDay * t,
  );
  const sinE = new Float64Array(n);
  const cosE = new Float64Array(n);
  const e = start.eccentricity;
  solveKeplerArray(meanAnomalies, e, sinE, cosE);
  const eta = Math.sqrt(1 - e * e);
  let sums = [0, 0, 0, 0, 0, 0, 0, 0]; // w, c, s, cc, cs, ss, yc, ys
  for (let i = 0; i < n; i++) {
    const inverse = 1 / (1 - e * cosE[i]!);
    const c = (cosE[i]! - e) * inverse;
    const s = eta * sinE[i]! * inverse;
    const w = weights[i]!;
    const y = residuals[i]!;
    const add = [w, w * c, w * s, w * c * c, w * c * s, w * s * s, w * y * c, w * y * s];
    sums = sums.map((value, index) => value + add[index]!);
  }
  const [total, c, s, cc, cs, ss, yc, ys] = sums as [
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  const a = cc - (c * c) / total;
  const b = cs - (c * s) / total;
  const d = ss - (s * s) / total;
  const determinant = a * d - b * b;
  if (!(determinant > 0)) return { ...start, cosAmplitude: 1, sinAmplitude: 0 };
  return {
    ...start,
    cosAmplitude: (d * yc - b * ys) / determinant,
    sinAmplitude: (a * ys - b * yc) / determinant,
  };
}
