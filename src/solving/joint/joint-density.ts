/**
 * ln density of a joint model of velocities, light curves and mid-times in unbounded coordinates, with its analytic gradient:
 * the posterior, or the likelihood with only the priors that the case states.
 */
import type { SmoothDensity } from '../../numerics/sampling/density.js';
import { ORBIT_COORDINATES } from '../../signals/keplerian.js';
import { TRANSIT_COORDINATES } from '../../signals/transit/light-curve-kernel.js';
import { VelocityTerm } from '../../signals/velocity-term.js';
import type { SampledDensity } from '../posterior/sampled-density.js';
import { VelocityLikelihood } from '../posterior/velocity-likelihood.js';
import type { PriorUse } from './block.js';
import { CurveLikelihood, type CurvePoint } from './curve-likelihood.js';
import { JointCoordinates } from './joint-coordinates.js';
import type { JointRecipe } from './joint-data.js';
import { MidTimeLikelihood } from './midtime-likelihood.js';
import { CONJUNCTION, LOG_PERIOD, RELATIVE_IMPACT, SHAPE } from './natural.js';

export class JointDensity implements SampledDensity {
  readonly size: number;
  readonly recipe: JointRecipe;
  readonly coordinates: JointCoordinates;
  readonly curves: readonly CurveLikelihood[];
  readonly curvePoints: readonly CurvePoint[];
  readonly midTimes: readonly MidTimeLikelihood[];
  readonly #term: VelocityTerm | null;
  readonly #velocity: VelocityLikelihood | null;
  readonly #linear: Float64Array;
  readonly #jitters: Float64Array;
  readonly #prediction: Float64Array;
  readonly #partials: Float64Array;
  readonly #hasTransits: boolean;

  constructor(recipe: JointRecipe, use: PriorUse) {
    this.recipe = recipe;
    this.coordinates = new JointCoordinates(recipe, use);
    this.size = this.coordinates.size;
    const companions = recipe.companions.length;
    this.#hasTransits = recipe.companions.some((companion) => companion.transits);
    const { velocities, drift } = recipe;
    this.#term = velocities === null ? null : new VelocityTerm(velocities);
    this.#velocity = velocities === null ? null : new VelocityLikelihood(velocities, companions, drift);
    const n = velocities?.timesDays.length ?? 0;
    this.#linear = new Float64Array((velocities?.instrumentCount ?? 0) + drift);
    this.#jitters = new Float64Array(velocities?.instrumentCount ?? 0);
    this.#prediction = new Float64Array(n);
    this.#partials = new Float64Array(n * ORBIT_COORDINATES * companions);
    this.curves = recipe.curves.map(
      (curve) =>
        new CurveLikelihood(
          curve,
          recipe.companions.map((companion) => companion.transits),
          recipe.starRadiusLightDays,
        ),
    );
    this.curvePoints = recipe.curves.map(() => ({
      coordinates: this.coordinates.transit,
      occultationDepths: new Float64Array(companions),
      u1: 0,
      u2: 0,
      jitter: 0,
      dilution: 0,
      amplitude: 0,
      timescaleDays: 1,
    }));
    this.midTimes = recipe.midTimes.map((set) => new MidTimeLikelihood(set));
  }

  evaluate(position: Float64Array, gradient: Float64Array): number {
    const logPrior = this.coordinates.read(position);
    if (!(logPrior > -Infinity)) return -Infinity;
    const logLikelihood = this.#velocityPart() + this.#curvePart() + this.#midTimePart();
    if (!Number.isFinite(logLikelihood)) return -Infinity;
    this.coordinates.pull(position, gradient);
    return logLikelihood + logPrior - this.coordinates.logNormalisation;
  }

  #velocityPart(): number {
    const term = this.#term;
    const likelihood = this.#velocity;
    if (term === null || likelihood === null) return 0;
    const { index, natural, byNatural, orbit, byOrbit } = this.coordinates;
    const { drift, companions } = this.recipe;
    const instruments = term.data.instrumentCount;
    for (let i = 0; i < instruments; i++) {
      this.#linear[i] = natural[index.zeroPoint(i)]!;
      this.#jitters[i] = natural[index.velocityJitter(i)]!;
    }
    for (let d = 0; d < drift; d++) this.#linear[instruments + d] = natural[index.drift + d]!;
    if (!term.predict(orbit, companions.length, this.#linear, drift, this.#prediction, this.#partials))
      return -Infinity;
    const value = likelihood.accumulate(this.#prediction, this.#partials, this.#jitters);
    for (let j = 0; j < byOrbit.length; j++) byOrbit[j]! += likelihood.byCoordinate[j]!;
    for (let i = 0; i < instruments; i++) {
      byNatural[index.zeroPoint(i)] = likelihood.byLinear[i]!;
      byNatural[index.velocityJitter(i)] = likelihood.byJitter[i]!;
    }
    for (let d = 0; d < drift; d++) byNatural[index.drift + d] = likelihood.byLinear[instruments + d]!;
    return value;
  }

  #curvePart(): number {
    if (!this.#hasTransits) return 0;
    const { index, natural, byNatural, byTransit } = this.coordinates;
    let sum = 0;
    for (let i = 0; i < this.curves.length; i++) {
      const likelihood = this.curves[i]!;
      const { band } = likelihood.curve;
      const point = this.curvePoints[i]!;
      const limb = index.band(band);
      point.u1 = natural[limb]!;
      point.u2 = natural[limb + 1]!;
      point.jitter = natural[index.curveJitter(i)]!;
      point.dilution = natural[index.dilution(i)]!;
      point.amplitude = natural[index.correlatedNoise(i)]!;
      point.timescaleDays = natural[index.correlatedNoise(i) + 1]!;
      for (let c = 0; c < point.occultationDepths.length; c++)
        point.occultationDepths[c] = natural[index.occultationDepth(c, band)]!;
      sum += likelihood.evaluate(point);
      if (!(sum > -Infinity)) return -Infinity;
      for (let j = 0; j < byTransit.length; j++) byTransit[j]! += likelihood.byCoordinate[j]!;
      byNatural[limb]! += likelihood.byLimb[0]!;
      byNatural[limb + 1]! += likelihood.byLimb[1]!;
      byNatural[index.curveJitter(i)] = likelihood.byJitter;
      byNatural[index.dilution(i)] = likelihood.byDilution;
      byNatural[index.correlatedNoise(i)] = likelihood.byAmplitude;
      byNatural[index.correlatedNoise(i) + 1] = likelihood.byTimescale;
      for (let c = 0; c < point.occultationDepths.length; c++)
        byNatural[index.occultationDepth(c, band)]! += likelihood.byOccultation[c]!;
    }
    return sum;
  }

  #midTimePart(): number {
    const { index, natural, byNatural, transit, byTransit } = this.coordinates;
    let sum = 0;
    for (let i = 0; i < this.midTimes.length; i++) {
      const likelihood = this.midTimes[i]!;
      const c = likelihood.data.companion;
      const base = index.companion(c);
      const { transits } = this.recipe.companions[c]!;
      const k = natural[base + SHAPE]!;
      const h = natural[base + SHAPE + 1]!;
      // Distances at the two conjunctions together are 2 a (1 - e^2)/(1 - h^2).
      const front = 1 - h * h;
      const lightDays = transits
        ? (2 *
            Math.exp(transit[c * TRANSIT_COORDINATES + 6]!) *
            this.recipe.starRadiusLightDays *
            (front - k * k)) /
          front
        : 0;
      sum += likelihood.evaluate(
        natural[base + LOG_PERIOD]!,
        natural[base + CONJUNCTION]!,
        k,
        h,
        natural[index.midTimeJitter(i)]!,
        lightDays,
      );
      byNatural[base + LOG_PERIOD]! += likelihood.byLogPeriod;
      byNatural[base + CONJUNCTION]! += likelihood.byConjunction;
      byNatural[base + SHAPE]! += likelihood.byK;
      byNatural[base + SHAPE + 1]! += likelihood.byH;
      byNatural[index.midTimeJitter(i)] = likelihood.byJitter;
      if (!transits) continue;
      const slope = likelihood.byLight * lightDays;
      byTransit[c * TRANSIT_COORDINATES + 6]! += slope;
      byNatural[base + SHAPE]! -= (2 * k * slope) / (front - k * k);
      byNatural[base + SHAPE + 1]! -= (2 * h * k * k * slope) / ((front - k * k) * front);
    }
    return sum;
  }

  /** Natural parameters at a position, a copy; `null` outside the domain. */
  naturalAt(position: Float64Array): Float64Array | null {
    return this.coordinates.read(position) > -Infinity ? Float64Array.from(this.coordinates.natural) : null;
  }

  /** Natural parameters as chains are judged by: impact parameters without their sign. */
  judged(position: Float64Array): number[] {
    this.coordinates.read(position);
    const { natural, index } = this.coordinates;
    const numbers = Array.from(natural);
    for (let c = 0; c < this.recipe.companions.length; c++) {
      const at = index.companion(c) + RELATIVE_IMPACT;
      numbers[at] = Math.abs(numbers[at]!);
    }
    return numbers;
  }

  /** The mirror image of a position with all mirrored coordinates positive. */
  fold(position: Float64Array): Float64Array {
    const folded = Float64Array.from(position);
    for (const at of this.coordinates.mirrored) folded[at] = Math.abs(folded[at]!);
    return folded;
  }

  /** The same density on one mirror image only: what evidences are computed from. */
  get folded(): SmoothDensity {
    const { mirrored } = this.coordinates;
    return {
      size: this.size,
      evaluate: (position, gradient) => {
        for (const at of mirrored) if (position[at]! < 0) return -Infinity;
        return this.evaluate(position, gradient);
      },
    };
  }
}
