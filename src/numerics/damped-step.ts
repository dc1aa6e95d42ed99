/** One damped Gauss-Newton step at a time from `ml-levenberg-marquardt`, in coordinates that suit it. */
import { levenbergMarquardt } from 'ml-levenberg-marquardt';
import type { LevenbergMarquardtOptions } from 'ml-levenberg-marquardt';
import { addFourRows } from './add-four-rows.js';
import { choleskyInPlace, choleskySolveInPlace } from './linear-algebra.js';

type PointFunction = (pointIndex: number) => number;

/** A squared pivot below this part of its diagonal element is rounding: sums of squares carry errors near 1e-15. */
const ROUNDING_PIVOT = 1e-14;

/**
 * A column is never taken for shorter than this part of its first length. Without the bound a parameter whose influence
 * fades on the way (an exponential that dies out) is given ever longer steps and never returns.
 */
const SHORTEST_COLUMN = 1 / 3;

/** How far along the step the bending of the residuals is measured, as a part of the step. */
const PROBE = 0.1;

/**
 * Drives the library for exactly one iteration around a given point. What it is spared that way: its plain-identity damping
 * is scale-free, because the columns of the Jacobian have unit length here (or less, see SHORTEST_COLUMN); its choice of
 * what to accept, its absolute tolerances, its clamping and its weights never come into play; nothing is evaluated twice,
 * since it is handed values that are already known. As it works point by point and allocates, it is given not the n
 * residuals but the p rows of the triangular factor of J^T·J, which lead to the same step (half the time at n = 150, p = 20).
 * Arrays are reused: one instance serves one problem size, one fit at a time.
 */
export class DampedStepEngine {
  /** Scaled coordinates of the step last taken, length parameterCount. */
  readonly step: Float64Array;
  /** J^T·r in scaled coordinates at the present point, length parameterCount. */
  readonly gradient: Float64Array;
  /** Inverse length of each Jacobian column: parameter step = scale · scaled step. */
  readonly scale: Float64Array;
  /** Whether the present J^T·J is positive definite beyond rounding, so that every parameter is determined. */
  isDetermined = false;

  private readonly parameterCount: number;
  private readonly residualCount: number;
  /** Row i: minus the i-th row of the upper factor R, J^T·J = R^T·R (minus, because the library wants the model's slopes). */
  private readonly rows: number[][];
  private readonly data: { readonly x: Float64Array; readonly y: Float64Array };
  /** Minus the solution of R^T·q = J^T·r. */
  private readonly presentModel: Float64Array;
  private readonly curvature: Float64Array;
  private readonly damped: Float64Array;
  private readonly correction: Float64Array;
  /** The step in parameters instead of scaled coordinates. */
  private readonly direction: Float64Array;
  private readonly fourRows: Float64Array;
  /** Bound on `scale` that SHORTEST_COLUMN sets; infinite until a column has shown a length. */
  private readonly largestScale: Float64Array;
  private readonly options: LevenbergMarquardtOptions;
  private readonly modelFor: (parameters: number[]) => PointFunction;

  constructor(parameterCount: number, residualCount: number) {
    this.parameterCount = parameterCount;
    this.residualCount = residualCount;
    this.step = new Float64Array(parameterCount);
    this.gradient = new Float64Array(parameterCount);
    this.scale = new Float64Array(parameterCount);
    this.curvature = new Float64Array(parameterCount * parameterCount);
    this.damped = new Float64Array(parameterCount * parameterCount);
    this.correction = new Float64Array(parameterCount);
    this.direction = new Float64Array(parameterCount);
    this.largestScale = new Float64Array(parameterCount).fill(Infinity);
    this.fourRows = new Float64Array(4 * parameterCount);
    // The library insists on two points at least; a second one that is zero with zero slopes changes nothing.
    const pointCount = Math.max(2, parameterCount);
    this.rows = Array.from({ length: pointCount }, () => new Array<number>(parameterCount).fill(0));
    this.data = {
      x: Float64Array.from({ length: pointCount }, (_, i) => i),
      y: new Float64Array(pointCount),
    };
    this.presentModel = new Float64Array(pointCount);
    const present: PointFunction = (pointIndex) => this.presentModel[pointIndex]!;
    const zero: PointFunction = () => 0;
    const rowAt = (pointIndex: number): number[] => this.rows[pointIndex]!;
    const step = this.step;
    this.modelFor = (parameters): PointFunction => {
      // The last point that the library asks for is the one its step leads to; its value is of no interest here.
      let moved = false;
      for (let j = 0; j < step.length; j++) {
        step[j] = parameters[j]!;
        if (parameters[j] !== 0) moved = true;
      }
      return moved ? zero : present;
    };
    this.options = {
      initialValues: new Float64Array(parameterCount),
      minValues: new Float64Array(parameterCount).fill(-Infinity),
      maxValues: new Float64Array(parameterCount).fill(Infinity),
      weights: 1,
      maxIterations: 1,
      errorTolerance: -1, // an error below it would end the call before the step
      gradientDifference: 1, // not used: derivatives are given
      jacobianFunction: () => rowAt,
    };
  }

  /**
   * Makes the given point the present one.
   *
   * @param residuals - length residualCount
   * @param jacobian - d residual_i / d parameter_j at i·parameterCount + j
   * @returns false when a derivative is not finite; the present point is then lost
   */
  moveTo(residuals: Float64Array, jacobian: Float64Array): boolean {
    const { parameterCount: p, residualCount, scale, largestScale } = this;
    scale.fill(0);
    for (let i = 0, at = 0; i < residualCount; i++) {
      for (let j = 0; j < p; j++, at++) scale[j]! += jacobian[at]! * jacobian[at]!;
    }
    for (let j = 0; j < p; j++) {
      if (!Number.isFinite(scale[j]!)) return false;
      const inverseLength = scale[j]! > 0 ? 1 / Math.sqrt(scale[j]!) : Infinity;
      if (largestScale[j] === Infinity) largestScale[j] = inverseLength / SHORTEST_COLUMN;
      scale[j] = Math.min(inverseLength, largestScale[j]!);
      if (scale[j] === Infinity) scale[j] = 1;
    }
    this.accumulate(residuals, jacobian);
    this.factorise();
    return true;
  }

  /**
   * Solves (J^T·J + damping) step = -J^T·r from the present point; the result is in `step`.
   *
   * @returns false when the system is singular to rounding
   */
  take(damping: number): boolean {
    this.options.damping = damping;
    try {
      levenbergMarquardt(this.data, this.modelFor, this.options);
    } catch (error) {
      if (error instanceof Error && /singular/i.test(error.message)) return false;
      throw error;
    }
    return this.step.every(Number.isFinite);
  }

  /** Decrease of chi-square that the linearised model promises for `step` taken with this damping. */
  predictedDecrease(damping: number): number {
    let sum = 0;
    for (let j = 0; j < this.parameterCount; j++) {
      const component = this.step[j]!;
      sum += component * (damping * component - this.gradient[j]!);
    }
    return sum;
  }

  /** Writes the point at which `bend` wants the residuals: the present one plus a part of the step. */
  probePoint(parameters: Float64Array, probe: Float64Array): void {
    for (let j = 0; j < this.parameterCount; j++)
      probe[j] = parameters[j]! + PROBE * this.scale[j]! * this.step[j]!;
  }

  /**
   * Adds to `step` its second-order part (geodesic acceleration, Transtrum & Sethna 2012, arXiv:1201.5885, cited from memory),
   * which follows a curved valley.
   *
   * @param residuals - at the present point; `jacobian` likewise; `ahead` - residuals at `probePoint`
   * @returns twice the length of the second-order part over that of the step: above about 0.75 the step goes too far for
   *   an expansion to be trusted
   */
  bend(residuals: Float64Array, jacobian: Float64Array, ahead: Float64Array, damping: number): number {
    const { parameterCount: p, residualCount, scale, step, direction, correction, damped } = this;
    for (let j = 0; j < p; j++) {
      direction[j] = scale[j]! * step[j]!;
      correction[j] = 0;
    }
    for (let i = 0; i < residualCount; i++) {
      const from = i * p;
      let slope = 0;
      for (let j = 0; j < p; j++) slope += jacobian[from + j]! * direction[j]!;
      const secondDerivative = (2 / PROBE) * ((ahead[i]! - residuals[i]!) / PROBE - slope);
      for (let j = 0; j < p; j++) correction[j]! -= jacobian[from + j]! * secondDerivative;
    }
    for (let j = 0; j < p; j++) correction[j]! *= scale[j]!;
    damped.set(this.curvature);
    for (let j = 0; j < p; j++) damped[j * p + j]! += damping;
    if (!choleskyInPlace(damped, p)) return 0;
    choleskySolveInPlace(damped, p, correction);
    let stepSquare = 0;
    let correctionSquare = 0;
    for (let j = 0; j < p; j++) {
      stepSquare += step[j]! ** 2;
      correctionSquare += correction[j]! ** 2;
      step[j]! += 0.5 * correction[j]!;
    }
    return 2 * Math.sqrt(correctionSquare / stepSquare);
  }

  /** Curvature (lower triangle) and gradient in scaled coordinates; four residuals at a time save memory traffic. */
  private accumulate(residuals: Float64Array, jacobian: Float64Array): void {
    const { parameterCount: p, residualCount, scale, gradient, curvature, fourRows } = this;
    gradient.fill(0);
    curvature.fill(0);
    for (let i = 0; i < residualCount; i += 4) {
      const rowCount = Math.min(4, residualCount - i);
      if (rowCount < 4) fourRows.fill(0);
      for (let row = 0; row < rowCount; row++) {
        const residual = residuals[i + row]!;
        const from = (i + row) * p;
        for (let j = 0; j < p; j++) {
          const derivative = jacobian[from + j]! * scale[j]!;
          fourRows[4 * j + row] = derivative;
          gradient[j]! += derivative * residual;
        }
      }
      addFourRows(curvature, fourRows, p);
    }
  }

  /** Triangular factor that passes over directions without curvature: their row and right-hand side become zero. */
  private factorise(): void {
    const { parameterCount: p, rows, curvature, presentModel, gradient } = this;
    this.isDetermined = true;
    for (let j = 0; j < p; j++) {
      const row = rows[j]!;
      row.fill(0);
      presentModel[j] = 0;
      let pivot = curvature[j * p + j]!;
      for (let k = 0; k < j; k++) pivot -= rows[k]![j]! * rows[k]![j]!;
      if (!(pivot > ROUNDING_PIVOT * curvature[j * p + j]!)) {
        this.isDetermined = false;
        continue;
      }
      const length = Math.sqrt(pivot);
      let rightHandSide = gradient[j]!;
      for (let k = 0; k < j; k++) rightHandSide -= rows[k]![j]! * presentModel[k]!;
      row[j] = -length;
      presentModel[j] = -rightHandSide / length;
      for (let i = j + 1; i < p; i++) {
        let sum = curvature[i * p + j]!;
        for (let k = 0; k < j; k++) sum -= rows[k]![i]! * rows[k]![j]!;
        row[i] = -sum / length;
      }
    }
  }
}
