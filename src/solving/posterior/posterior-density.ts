/**
 * The posterior of a velocity model: ln density and analytic gradient in unbounded sampling coordinates, likelihood and
 * priors together. Evaluated tens of thousands of times a second: nothing is allocated per call.
 */
import type { SmoothDensity } from '../../numerics/sampling/density.js';
import { ORBIT_COORDINATES } from '../../signals/keplerian.js';
import { VelocityTerm } from '../../signals/velocity-term.js';
import type { ModelPoint } from '../model-structure.js';
import { portableFrom, type ModelPlan, type PortablePoint } from '../model-builder.js';
import type { VelocityProblem } from '../problem.js';
import { circularMap, eccentricMap, type CompanionMap } from './companion-map.js';
import { jitterDial, type JitterDial } from './jitter-dial.js';
import type { PriorScales } from './priors.js';
import type { SampledDensity } from './sampled-density.js';
import { statedMap } from './stated-map.js';
import { VelocityLikelihood } from './velocity-likelihood.js';

/** Position vector: companions, free linear parameters (zero points, slope, curvature), free jitters. */
export class PosteriorDensity implements SampledDensity {
  readonly size: number;
  readonly #problem: VelocityProblem;
  readonly #term: VelocityTerm;
  readonly #scales: PriorScales;
  readonly #maps: readonly CompanionMap[];
  readonly #offsets: readonly number[];
  readonly #linearColumns: readonly number[];
  readonly #jitters: readonly JitterDial[];
  readonly #jitterStart: number;
  /** Coordinates of jitters for which u and -u are the same. */
  readonly #mirrored: readonly number[];
  readonly #zeroPointPriors: readonly {
    readonly at: number;
    readonly centre: number;
    readonly sigma: number;
  }[];
  readonly #coordinates: Float64Array;
  readonly #companionCoordinates: readonly Float64Array[];
  readonly #jacobians: readonly Float64Array[];
  readonly #priorGradients: readonly Float64Array[];
  readonly #linear: Float64Array;
  readonly #likelihood: VelocityLikelihood;
  readonly #jitterMps: Float64Array;
  readonly #prediction: Float64Array;
  readonly #partials: Float64Array;
  /** ln of the volume of the prior box, which evidences are measured against. */
  readonly #logNormalisation: number;

  constructor(problem: VelocityProblem, plan: ModelPlan, scales: PriorScales) {
    const { data, structure } = problem;
    this.#problem = problem;
    this.#term = new VelocityTerm(data);
    this.#scales = scales;
    this.#maps = structure.companions.map((companion, c) => {
      const choice = plan.companions[c]!.choice;
      if (companion.coordinateOf === null && choice !== null) return statedMap(companion, choice, scales);
      return companion.circular ? circularMap(scales) : eccentricMap(scales);
    });
    const offsets: number[] = [];
    let at = 0;
    for (const map of this.#maps) {
      offsets.push(at);
      at += map.size;
    }
    this.#offsets = offsets;
    this.#linearColumns = problem.linearColumns.map((column) => (column >= 0 ? at++ : -1));
    this.#jitterStart = at;
    this.#jitters = problem.freeJitters.map((instrument) =>
      jitterDial(instrument, structure.jitters[instrument]!, scales),
    );
    this.#mirrored = this.#jitters.flatMap((dial, j) => (dial.isMirrored ? [this.#jitterStart + j] : []));
    at += this.#jitters.length;
    this.size = at;
    this.#zeroPointPriors = structure.zeroPoints.flatMap((choice, i) => {
      const position = this.#linearColumns[i]!;
      return choice?.kind === 'prior' ? [{ at: position, centre: choice.value, sigma: choice.sigma }] : [];
    });
    const n = data.timesDays.length;
    const companions = this.#maps.length;
    this.#coordinates = new Float64Array(ORBIT_COORDINATES * companions);
    this.#companionCoordinates = this.#maps.map((_, c) =>
      this.#coordinates.subarray(c * ORBIT_COORDINATES, (c + 1) * ORBIT_COORDINATES),
    );
    this.#jacobians = this.#maps.map((map) => new Float64Array(ORBIT_COORDINATES * map.size));
    this.#priorGradients = this.#maps.map((map) => new Float64Array(map.size));
    this.#linear = problem.linearAt(new Float64Array(problem.parameterCount));
    this.#likelihood = new VelocityLikelihood(data, companions, structure.drift);
    this.#jitterMps = new Float64Array(data.instrumentCount);
    structure.jitters.forEach(({ lowMps, highMps }, i) => {
      if (!(highMps > lowMps)) this.#jitterMps[i] = lowMps;
    });
    this.#prediction = new Float64Array(n);
    this.#partials = new Float64Array(n * ORBIT_COORDINATES * companions);
    this.#logNormalisation = this.#priorVolume();
  }

  #priorVolume(): number {
    const { instrumentCount } = this.#problem.data;
    const scales = this.#scales;
    let sum = this.#maps.reduce((total, map) => total + map.logNormalisation, 0);
    this.#linearColumns.forEach((position, l) => {
      if (position < 0) return;
      const halfWidth =
        l < instrumentCount
          ? scales.zeroPointHalfWidthMps
          : l === instrumentCount
            ? scales.slopeHalfWidthMpsPerDay
            : scales.curvatureHalfWidthMpsPerDay2;
      sum += Math.log(2 * halfWidth);
    });
    for (const dial of this.#jitters) sum += dial.logNormalisation;
    return sum;
  }

  evaluate(position: Float64Array, gradient: Float64Array): number {
    const { structure } = this.#problem;
    let logPrior = 0;
    for (let c = 0; c < this.#maps.length; c++) {
      const value = this.#maps[c]!.toCoordinates(
        position,
        this.#offsets[c]!,
        this.#companionCoordinates[c]!,
        this.#jacobians[c]!,
        this.#priorGradients[c]!,
      );
      if (value === -Infinity) return -Infinity;
      logPrior += value;
    }
    for (let l = 0; l < this.#linear.length; l++) {
      const at = this.#linearColumns[l]!;
      if (at >= 0) this.#linear[l] = position[at]!;
    }
    for (let j = 0; j < this.#jitters.length; j++) {
      const dial = this.#jitters[j]!;
      const u = position[this.#jitterStart + j]!;
      logPrior += dial.logPrior(u);
      this.#jitterMps[dial.instrument] = dial.value(u);
    }
    if (!(logPrior > -Infinity)) return -Infinity;
    const companions = this.#maps.length;
    if (
      !this.#term.predict(
        this.#coordinates,
        companions,
        this.#linear,
        structure.drift,
        this.#prediction,
        this.#partials,
      )
    )
      return -Infinity;
    const { byCoordinate, byLinear, byJitter } = this.#likelihood;
    const logLikelihood = this.#likelihood.accumulate(this.#prediction, this.#partials, this.#jitterMps);
    gradient.fill(0);
    for (let c = 0; c < companions; c++) {
      const map = this.#maps[c]!;
      const jacobian = this.#jacobians[c]!;
      const prior = this.#priorGradients[c]!;
      const offset = this.#offsets[c]!;
      for (let j = 0; j < map.size; j++) {
        let sum = prior[j]!;
        for (let d = 0; d < ORBIT_COORDINATES; d++)
          sum += byCoordinate[c * ORBIT_COORDINATES + d]! * jacobian[d * map.size + j]!;
        gradient[offset + j] = sum;
      }
    }
    for (let l = 0; l < this.#linear.length; l++) {
      const at = this.#linearColumns[l]!;
      if (at >= 0) gradient[at] = byLinear[l]!;
    }
    for (const prior of this.#zeroPointPriors) {
      const z = (position[prior.at]! - prior.centre) / prior.sigma;
      logPrior -= 0.5 * z * z;
      gradient[prior.at]! -= z / prior.sigma;
    }
    for (let j = 0; j < this.#jitters.length; j++) {
      const dial = this.#jitters[j]!;
      const at = this.#jitterStart + j;
      const u = position[at]!;
      gradient[at] = byJitter[dial.instrument]! * dial.slope(u) + dial.logPriorSlope(u);
    }
    return logLikelihood + logPrior - this.#logNormalisation;
  }

  /** The mirror image of a position with all mirrored coordinates positive. */
  fold(position: Float64Array): Float64Array {
    const folded = Float64Array.from(position);
    for (const at of this.#mirrored) folded[at] = Math.abs(folded[at]!);
    return folded;
  }

  /**
   * The same density on the side where all jitter coordinates are positive, and nothing on the other: one of the mirror
   * images, over which the prior is normalised. What evidences are computed from.
   */
  get folded(): SmoothDensity {
    const mirrored = this.#mirrored;
    return {
      size: this.size,
      evaluate: (position, gradient) => {
        for (const at of mirrored) if (position[at]! < 0) return -Infinity;
        return this.evaluate(position, gradient);
      },
    };
  }

  /** Sampling position of a portable point. */
  position(portable: PortablePoint): Float64Array {
    const position = new Float64Array(this.size);
    this.#maps.forEach((map, c) => {
      map.fromElements(portable.companions[c]!, position, this.#offsets[c]!);
    });
    const instruments = this.#problem.data.instrumentCount;
    this.#linearColumns.forEach((at, l) => {
      if (at >= 0)
        position[at] = l < instruments ? portable.zeroPointsMps[l]! : portable.drift[l - instruments]!;
    });
    this.#jitters.forEach((dial, j) => {
      position[this.#jitterStart + j] = dial.position(portable.jittersMps[dial.instrument]!);
    });
    return position;
  }

  /** The model's point at a sampling position. */
  modelPoint(position: Float64Array): ModelPoint {
    const parameters = new Float64Array(this.#problem.parameterCount);
    const portable = this.portable(position);
    this.#problem.structure.companions.forEach((companion, c) => {
      companion.fromElements(portable.companions[c]!, parameters, this.#problem.companionOffsets[c]!);
    });
    this.#problem.linearColumns.forEach((column, l) => {
      if (column >= 0) parameters[column] = position[this.#linearColumns[l]!]!;
    });
    return { parameters, jittersMps: portable.jittersMps };
  }

  /** Elements, zero points, drift and jitters at a sampling position. */
  portable(position: Float64Array): PortablePoint {
    this.#maps.forEach((map, c) => {
      map.toCoordinates(
        position,
        this.#offsets[c]!,
        this.#companionCoordinates[c]!,
        this.#jacobians[c]!,
        this.#priorGradients[c]!,
      );
    });
    const linear = this.#linear.map((fixed, l) => {
      const at = this.#linearColumns[l]!;
      return at >= 0 ? position[at]! : fixed;
    });
    const jittersMps = Float64Array.from(this.#jitterMps);
    this.#jitters.forEach((dial, j) => {
      jittersMps[dial.instrument] = dial.value(position[this.#jitterStart + j]!);
    });
    return portableFrom(this.#coordinates, this.#maps.length, linear, jittersMps);
  }

  /** Numbers whose chains are judged: free of wrapping and of mirror images. */
  judged(position: Float64Array): number[] {
    const portable = this.portable(position);
    return [
      ...portable.companions.flatMap((companion) => {
        const root = Math.sqrt(companion.eccentricity);
        const omega = companion.argPeriastronStarRad;
        const longitude = omega - (2 * Math.PI * companion.timePeriastronDays) / companion.periodDays;
        return [
          Math.log(companion.periodDays),
          companion.eccentricity,
          root * Math.cos(omega),
          root * Math.sin(omega),
          Math.cos(longitude),
          Math.sin(longitude),
          Math.log(companion.semiAmplitudeMps),
        ];
      }),
      ...portable.zeroPointsMps,
      ...portable.drift,
      ...portable.jittersMps,
    ];
  }
}
