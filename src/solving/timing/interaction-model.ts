/**
 * Mid-times of interacting companions as a function of masses and eccentricities alone. Period and epoch of each orbit
 * are found so that the straight line through its predicted times is the one through the observed times: they are known
 * a thousand times better than what is asked for, and would be narrow curved valleys in the coordinates of a fit.
 */
import { solveInPlace } from '../../numerics/gauss-elimination.js';
import { SwiftTransits } from '../../orbit/interaction/swift-transits.js';
import type { PlanarCompanion } from '../../orbit/interaction/swift-transits.js';
import { LineLikelihood } from './line-likelihood.js';
import { observedLine } from './observed-line.js';
import type { ObservedLine } from './observed-line.js';
import type { InteractionTable } from './interaction-types.js';

/** Coordinates of one companion: ln mass ratio, e cos omega, e sin omega. */
export const COORDINATES = 3;
export const LEAST_MASS_RATIO = 1e-9;
export const LARGEST_MASS_RATIO = 0.03;
export const LARGEST_ECCENTRICITY = 0.6;

const MOST_ALIGNMENTS = 8;
/** Periods are aligned to this part, epochs to this part of the period; what is left is taken out linearly. */
const PERIOD_GOAL = 3e-8;
const EPOCH_GOAL = 1e-6;
/** Steps of difference quotients, by coordinate; of period and epoch in units of the period. */
const STEPS = [2e-3, 1e-5, 1e-5] as const;
const DEPARTURE_STEPS = [1e-6, 1e-5] as const;

export class InteractionModel {
  readonly companionCount: number;
  readonly size: number;
  /** When the elements hold, on the axis of the tables. */
  readonly epochDays: number;
  readonly lines: readonly ObservedLine[];
  /** One per table: row counts, weights and straight lines. */
  readonly likelihoods: readonly LineLikelihood[];
  /** Observed times since the epoch. */
  readonly observedDays: readonly Float64Array[];
  /** Predicted times of the last `predict`, rows of the tables, since the epoch. */
  readonly predictedDays: readonly Float64Array[];
  /** (2 per companion): departure of osculating period and conjunction from the line, days, of the last `predict`. */
  readonly departures: Float64Array;
  /** Integrations so far. */
  integrations = 0;

  private readonly cycles: readonly Int32Array[];
  private readonly swift: SwiftTransits;
  private readonly untilDays: number;
  private readonly elements: PlanarCompanion[];
  /** Predicted times that difference quotients start from. */
  private readonly base: readonly Float64Array[];
  private readonly column: readonly Float64Array[];
  /** Per table (rows x 2N): derivatives by the departures. */
  private readonly byDeparture: readonly Float64Array[];
  private readonly ownDerivatives: readonly Float64Array[];
  private readonly lineDifferences: Float64Array;
  private readonly scratch: Float64Array;
  /** Where alignment starts: a point, its departures, and how they change with the coordinates (2N x size). */
  private readonly anchorPoint: Float64Array;
  private readonly anchorDepartures: Float64Array;
  private readonly anchorSlopes: Float64Array;
  /** (2N x 2N): how straight lines through the predicted times follow the departures, at the anchor. */
  private readonly response: Float64Array;
  private readonly freshSlopes: Float64Array;
  private readonly freshResponse: Float64Array;

  /**
   * @param tables - two to five, each with at least three different cycles
   * @param extraDays - room after the last observed time, for predictions
   */
  constructor(tables: readonly InteractionTable[], extraDays = 0) {
    this.companionCount = tables.length;
    this.size = COORDINATES * tables.length;
    this.cycles = tables.map(({ cycles }) => Int32Array.from(cycles));
    this.likelihoods = tables.map(({ cycles, sigmasDays }) => new LineLikelihood(cycles, sigmasDays));
    const firstDays = Math.min(...tables.map(({ timesDays }) => Math.min(...Array.from(timesDays))));
    const lastDays = Math.max(...tables.map(({ timesDays }) => Math.max(...Array.from(timesDays))));
    const rough = tables.map((table, t) => observedLine(table, this.likelihoods[t]!, firstDays));
    this.epochDays = firstDays - 0.3 * Math.min(...rough.map(({ periodDays }) => periodDays));
    this.lines = tables.map((table, t) => observedLine(table, this.likelihoods[t]!, this.epochDays));
    this.observedDays = tables.map(({ timesDays }) =>
      Float64Array.from(timesDays, (t) => t - this.epochDays),
    );
    this.predictedDays = tables.map(({ cycles }) => new Float64Array(cycles.length));
    this.base = tables.map(({ cycles }) => new Float64Array(cycles.length));
    this.column = tables.map(({ cycles }) => new Float64Array(cycles.length));
    const count = 2 * tables.length;
    this.byDeparture = tables.map(({ cycles }) => new Float64Array(cycles.length * count));
    this.ownDerivatives = tables.map(({ cycles }) => new Float64Array(cycles.length * this.size));
    const longest = Math.max(...this.lines.map(({ periodDays }) => periodDays));
    const shortest = Math.min(...this.lines.map(({ periodDays }) => periodDays));
    this.untilDays = lastDays - this.epochDays + extraDays + 0.3 * longest;
    this.swift = new SwiftTransits(tables.length, Math.ceil((1.1 * this.untilDays) / shortest) + 10);
    this.departures = new Float64Array(count);
    this.lineDifferences = new Float64Array(count);
    this.scratch = new Float64Array(count * count);
    this.anchorPoint = new Float64Array(this.size);
    this.anchorDepartures = new Float64Array(count);
    this.anchorSlopes = new Float64Array(count * this.size);
    this.freshSlopes = new Float64Array(count * this.size);
    this.freshResponse = new Float64Array(count * count);
    this.response = new Float64Array(count * count);
    for (let d = 0; d < count; d++) this.response[d * count + d] = 1;
    this.elements = this.lines.map(() => ({
      massRatio: 0,
      periodDays: 1,
      conjunctionDays: 0,
      eCosOmega: 0,
      eSinOmega: 0,
    }));
  }

  /** All predicted mid-times of the last `predict` of one companion, since the epoch, and the cycle of the first. */
  allTimes(companion: number): { readonly firstCycle: number; readonly timesDays: Float64Array } {
    const timesDays = this.swift.times[companion]!.slice(0, this.swift.counts[companion]);
    return { firstCycle: this.firstCycleFound(companion), timesDays };
  }

  /** Osculating elements of the last `predict`; conjunctions are the first after the epoch, since the epoch. */
  osculating(companion: number): PlanarCompanion {
    return this.elements[companion]!;
  }

  /**
   * Fills `predictedDays` and `departures`.
   *
   * @returns false outside the domain, or where the motion cannot be followed or leaves the observed cycles
   */
  predict(point: Float64Array): boolean {
    const { departures, anchorPoint, anchorDepartures, anchorSlopes, size } = this;
    for (let d = 0; d < departures.length; d++) {
      let value = anchorDepartures[d]!;
      for (let j = 0; j < size; j++) value += anchorSlopes[d * size + j]! * (point[j]! - anchorPoint[j]!);
      departures[d] = value;
    }
    const correction = this.lineDifferences;
    for (let round = 0; round < MOST_ALIGNMENTS; round++) {
      if (!this.integrate(point)) return false;
      let isAligned = true;
      for (let c = 0; c < this.companionCount; c++) {
        const { periodDays } = this.lines[c]!;
        this.likelihoods[c]!.lineThrough(this.offLine(c), this.lines[c]!.firstCycle, correction, 2 * c);
        if (Math.abs(correction[2 * c]!) > PERIOD_GOAL * periodDays) isAligned = false;
        if (Math.abs(correction[2 * c + 1]!) > EPOCH_GOAL * periodDays) isAligned = false;
      }
      if (isAligned) return true;
      this.scratch.set(this.response);
      if (!solveInPlace(this.scratch, correction, departures.length, 1)) return false;
      for (let d = 0; d < departures.length; d++) departures[d]! -= correction[d]!;
    }
    return false;
  }

  /**
   * As `predict`, and with derivatives of the predicted times along the coordinates, periods and epochs following so that
   * the straight lines stay. Difference quotients, good to 6e-4 of each column (measured against central ones).
   *
   * @param derivatives - per table (rows x size), row-major, overwritten
   */
  predictWithDerivatives(point: Float64Array, derivatives: readonly Float64Array[]): boolean {
    if (!this.predict(point)) return false;
    const { size, departures, predictedDays, base, byDeparture } = this;
    const count = departures.length;
    predictedDays.forEach((times, t) => {
      base[t]!.set(times);
    });
    const kept = departures.slice();
    const response = new Float64Array(count * count);
    for (let d = 0; d < count; d++) {
      const step = DEPARTURE_STEPS[d % 2]! * this.lines[d >> 1]!.periodDays;
      departures[d] = kept[d]! + step;
      if (!this.integrate(point)) return false;
      departures[d] = kept[d]!;
      this.storeQuotients(step, byDeparture, count, d);
      this.storeLines(byDeparture, count, d, response, count, d);
    }
    const moved = point.slice();
    const slopes = new Float64Array(count * size);
    for (let j = 0; j < size; j++) {
      const step = STEPS[j % COORDINATES]!;
      moved[j] = point[j]! + step;
      if (!this.integrate(moved)) return false;
      moved[j] = point[j]!;
      // Variations are nearly linear in the masses: quotients by the mass, not its logarithm.
      this.storeQuotients(j % COORDINATES === 0 ? Math.expm1(step) : step, derivatives, size, j);
      this.storeLines(derivatives, size, j, slopes, size, j);
    }
    this.scratch.set(response);
    if (!solveInPlace(this.scratch, slopes, count, size)) return false;
    for (let e = 0; e < slopes.length; e++) slopes[e] = -slopes[e]!;
    derivatives.forEach((columns, t) => {
      const byLines = byDeparture[t]!;
      for (let i = 0; i < predictedDays[t]!.length; i++) {
        for (let j = 0; j < size; j++) {
          let sum = columns[i * size + j]!;
          for (let d = 0; d < count; d++) sum += byLines[i * count + d]! * slopes[d * size + j]!;
          columns[i * size + j] = sum;
        }
      }
    });
    this.freshSlopes.set(slopes);
    this.freshResponse.set(response);
    predictedDays.forEach((times, t) => {
      times.set(base[t]!);
    });
    return true;
  }

  /** Makes later alignments start from here. Returns false outside the domain. */
  anchorAt(point: Float64Array): boolean {
    if (!this.predictWithDerivatives(point, this.ownDerivatives)) return false;
    this.anchorPoint.set(point);
    this.anchorDepartures.set(this.departures);
    this.anchorSlopes.set(this.freshSlopes);
    this.response.set(this.freshResponse);
    return true;
  }

  private storeQuotients(step: number, out: readonly Float64Array[], width: number, column: number): void {
    this.predictedDays.forEach((times, t) => {
      const before = this.base[t]!;
      const columns = out[t]!;
      for (let i = 0; i < times.length; i++) columns[i * width + column] = (times[i]! - before[i]!) / step;
    });
  }

  /** Straight lines through a column of every table: changes of period and epoch. */
  private storeLines(
    columns: readonly Float64Array[],
    width: number,
    column: number,
    out: Float64Array,
    outWidth: number,
    outColumn: number,
  ): void {
    const line = new Float64Array(2);
    columns.forEach((values, c) => {
      const single = this.column[c]!;
      for (let i = 0; i < single.length; i++) single[i] = values[i * width + column]!;
      this.likelihoods[c]!.lineThrough(single, this.lines[c]!.firstCycle, line, 0);
      out[2 * c * outWidth + outColumn] = line[0]!;
      out[(2 * c + 1) * outWidth + outColumn] = line[1]!;
    });
  }

  /** Predicted times minus the observed line; the array is reused. */
  private offLine(companion: number): Float64Array {
    const { timeDays, periodDays, meanCycle } = this.lines[companion]!;
    const predicted = this.predictedDays[companion]!;
    const cycles = this.cycles[companion]!;
    const out = this.column[companion]!;
    for (let i = 0; i < out.length; i++)
      out[i] = predicted[i]! - timeDays - periodDays * (cycles[i]! - meanCycle);
    return out;
  }

  private integrate(point: Float64Array): boolean {
    const { elements, departures, lines, swift, cycles, predictedDays } = this;
    for (let c = 0; c < elements.length; c++) {
      const logMass = point[COORDINATES * c]!;
      const eCosOmega = point[COORDINATES * c + 1]!;
      const eSinOmega = point[COORDINATES * c + 2]!;
      const massRatio = Math.exp(logMass);
      if (!(massRatio >= LEAST_MASS_RATIO && massRatio <= LARGEST_MASS_RATIO)) return false;
      if (!(Math.hypot(eCosOmega, eSinOmega) <= LARGEST_ECCENTRICITY)) return false;
      const line = lines[c]!;
      const periodDays = line.periodDays + departures[2 * c]!;
      const firstDays = line.timeDays + line.periodDays * (line.firstCycle - line.meanCycle);
      // A departure that large is no departure any more: the orbits are torn apart.
      if (!(Math.abs(departures[2 * c]!) < 0.2 * line.periodDays)) return false;
      if (!(Math.abs(departures[2 * c + 1]!) < 0.4 * line.periodDays)) return false;
      elements[c] = {
        massRatio,
        periodDays,
        conjunctionDays: firstDays + departures[2 * c + 1]!,
        eCosOmega,
        eSinOmega,
      };
    }
    this.integrations++;
    if (!swift.follow(elements, this.untilDays)) return false;
    for (let c = 0; c < elements.length; c++) {
      const first = this.firstCycleFound(c);
      const out = predictedDays[c]!;
      for (let i = 0; i < out.length; i++) {
        const at = cycles[c]![i]! - first;
        if (!(at >= 0 && at < swift.counts[c]!)) return false;
        out[i] = swift.times[c]![at]!;
      }
    }
    return true;
  }

  private firstCycleFound(companion: number): number {
    const { firstCycle, meanCycle, timeDays, periodDays } = this.lines[companion]!;
    const onLine = timeDays + periodDays * (firstCycle - meanCycle);
    return firstCycle + Math.round((this.swift.times[companion]![0]! - onLine) / periodDays);
  }
}
