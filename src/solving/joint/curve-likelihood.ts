/**
 * Likelihood of one light curve: transits of all companions, baseline coefficients integrated out segment by segment,
 * extra scatter and, where asked for, correlated noise. Gradients come along.
 */
import { upperMedian } from '../../numerics/summary.js';
import type { LinearNuisance } from '../../numerics/linear-nuisance.js';
import {
  LIGHT_CURVE_PARTIALS,
  LightCurveKernel,
  TRANSIT_COORDINATES,
} from '../../signals/transit/light-curve-kernel.js';
import type { CurveData, CurveSegment } from './joint-data.js';
import { CorrelatedNoise, whiteNoise, type SegmentNoise } from './segment-noise.js';

/** The baseline's coefficients are confined to this many times the scatter of the segment, which is no confinement. */
export const BASELINE_WIDTH = 100;
/** Averages over exposures are right to this share of the error of the mean of all points. */
const EXPOSURE_ERROR = 0.01;

/** Parameters of one evaluation; arrays are read only. */
export interface CurvePoint {
  /** (7 x companions): transit coordinates. */
  readonly coordinates: Float64Array;
  /** (companions) */
  readonly occultationDepths: Float64Array;
  u1: number;
  u2: number;
  jitter: number;
  dilution: number;
  /** Of the correlated noise. */
  amplitude: number;
  timescaleDays: number;
}

/** The nuisance of one segment: its baseline with wide priors around a flat curve at the median. */
export function segmentNuisance(
  curve: CurveData,
  { start, end, design, columns }: CurveSegment,
): LinearNuisance {
  const rows = end - start;
  const priorMean = new Float64Array(columns);
  priorMean[0] = upperMedian(curve.flux.subarray(start, end))!;
  const priorSigma = new Float64Array(columns).fill(BASELINE_WIDTH * curve.scatter);
  return { rows, columns, design, priorMean, priorSigma };
}

export class CurveLikelihood {
  readonly curve: CurveData;
  readonly kernels: readonly LightCurveKernel[];
  /** (7 x companions), overwritten at each call. */
  readonly byCoordinate: Float64Array;
  /** u1, u2. */
  readonly byLimb: Float64Array = new Float64Array(2);
  /** (companions) */
  readonly byOccultation: Float64Array;
  byJitter = 0;
  byDilution = 0;
  byAmplitude = 0;
  byTimescale = 0;
  readonly transit: Float64Array;
  readonly #loss: Float64Array;
  readonly #variances: Float64Array;
  readonly #segments: readonly SegmentNoise[];
  readonly #transits: readonly boolean[];

  /** @param transits - per companion whether it transits; the others are not looked at */
  constructor(curve: CurveData, transits: readonly boolean[], starRadiusLightDays: number) {
    this.curve = curve;
    const companions = transits.length;
    const { timesDays, exposureDays } = curve;
    const errorBound = (EXPOSURE_ERROR * curve.typicalSigma) / Math.sqrt(timesDays.length);
    this.kernels = Array.from(
      { length: companions },
      () => new LightCurveKernel({ timesDays, exposureDays, starRadiusLightDays, errorBound }),
    );
    this.#transits = transits;
    this.byCoordinate = new Float64Array(TRANSIT_COORDINATES * companions);
    this.byOccultation = new Float64Array(companions);
    const n = timesDays.length;
    this.transit = new Float64Array(n).fill(1);
    this.#loss = new Float64Array(n);
    this.#variances = new Float64Array(n);
    this.#segments = curve.segments.map((segment) => {
      const flux = curve.flux.subarray(segment.start, segment.end);
      const nuisance = segmentNuisance(curve, segment);
      return curve.noise === 'white'
        ? whiteNoise(flux, nuisance)
        : new CorrelatedNoise(timesDays.subarray(segment.start, segment.end), flux, nuisance);
    });
  }

  /** Writes the relative flux of all companions into `transit`; false outside the domain. */
  predict(point: CurvePoint, withPartials: boolean): boolean {
    const loss = this.#loss.fill(0);
    for (let c = 0; c < this.kernels.length; c++) {
      if (!this.#transits[c]!) continue;
      const kernel = this.kernels[c]!;
      const isInside = kernel.evaluate(
        point.coordinates,
        c * TRANSIT_COORDINATES,
        point.u1,
        point.u2,
        point.occultationDepths[c]!,
        withPartials,
      );
      if (!isInside) return false;
      for (let m = 0; m < kernel.touchedCount; m++) loss[kernel.touched[m]!]! += kernel.loss[m]!;
    }
    const share = 1 - point.dilution;
    for (let i = 0; i < loss.length; i++) this.transit[i] = 1 - share * loss[i]!;
    return true;
  }

  #fillVariances(jitter: number): void {
    const { sigmas, averaged } = this.curve;
    const s2 = jitter * jitter;
    for (let i = 0; i < sigmas.length; i++) this.#variances[i] = sigmas[i]! * sigmas[i]! + s2 / averaged[i]!;
  }

  /** ln L with all constants; the slopes are left in the public fields. -Infinity outside the domain. */
  evaluate(point: CurvePoint): number {
    if (!this.predict(point, true)) return -Infinity;
    this.#fillVariances(point.jitter);
    this.byCoordinate.fill(0);
    this.byOccultation.fill(0);
    this.byLimb.fill(0);
    this.byJitter = 0;
    this.byDilution = 0;
    this.byAmplitude = 0;
    this.byTimescale = 0;
    const { segments, averaged } = this.curve;
    let sum = 0;
    for (let s = 0; s < segments.length; s++) {
      const { start, end } = segments[s]!;
      const model = this.transit.subarray(start, end);
      const variances = this.#variances.subarray(start, end);
      const noise = this.#segments[s]!;
      const value = noise.evaluate(model, variances, point.amplitude, point.timescaleDays);
      if (!Number.isFinite(value)) return -Infinity;
      sum += value;
      this.byAmplitude += noise.byAmplitude;
      this.byTimescale += noise.byTimescale;
      const { byModel, byVariance } = noise;
      for (let i = start; i < end; i++) {
        this.byJitter += (2 * point.jitter * byVariance[i - start]!) / averaged[i]!;
        this.byDilution += byModel[i - start]! * this.#loss[i]!;
        // From here on the slope by the loss.
        this.#loss[i] = -(1 - point.dilution) * byModel[i - start]!;
      }
    }
    this.#chain();
    return sum;
  }

  /** Slopes by coordinates from those by the loss of each point. */
  #chain(): void {
    const byLoss = this.#loss;
    for (let c = 0; c < this.kernels.length; c++) {
      if (!this.#transits[c]!) continue;
      const { touched, touchedCount, partials } = this.kernels[c]!;
      const at = c * TRANSIT_COORDINATES;
      for (let m = 0; m < touchedCount; m++) {
        const slope = byLoss[touched[m]!]!;
        const row = m * LIGHT_CURVE_PARTIALS;
        for (let d = 0; d < TRANSIT_COORDINATES; d++)
          this.byCoordinate[at + d]! += slope * partials[row + d]!;
        this.byLimb[0]! += slope * partials[row + TRANSIT_COORDINATES]!;
        this.byLimb[1]! += slope * partials[row + TRANSIT_COORDINATES + 1]!;
        this.byOccultation[c]! += slope * partials[row + TRANSIT_COORDINATES + 2]!;
      }
    }
  }

  /** Baseline (with the mean of the correlated noise) at the points of the curve, at the last evaluation. */
  baseline(): Float64Array {
    const baseline = new Float64Array(this.transit.length);
    this.curve.segments.forEach(({ start, end }, s) => {
      baseline.set(this.#segments[s]!.baseline(this.transit.subarray(start, end)), start);
    });
    return baseline;
  }

  /** Variances of the points with the extra scatter of the last evaluation. */
  get variances(): Float64Array {
    return this.#variances;
  }
}
