/** Builds problems from what a case allows, and carries points from one model to another. */
import type { Case, CompanionChoice, ElementChoice, InstrumentChoice } from '../observations/types.js';
import { ORBIT_COORDINATES } from '../signals/keplerian.js';
import { VelocityTerm, type DriftDegree, type VelocityData } from '../signals/velocity-term.js';
import type { ModelFit } from './fit-model.js';
import {
  coordinatesToElements,
  type Parametrisation,
  type RelativeElements,
} from './parametrisations/parametrisation.js';
import { regularParametrisation } from './parametrisations/regular.js';
import { statedParametrisation } from './parametrisations/stated.js';
import { VelocityProblem } from './problem.js';
import type { JitterSetting, ModelPoint } from './model-structure.js';

/** One companion of a model: what the case says about it, and whether e = 0 is imposed. */
export interface CompanionPlan {
  readonly choice: CompanionChoice | null;
  readonly circular: boolean;
}

export interface ModelPlan {
  readonly companions: readonly CompanionPlan[];
  readonly drift: DriftDegree;
}

/** A point that does not depend on the parametrisation. `drift` holds slope (m/s/d) and curvature (m/s/d^2). */
export interface PortablePoint {
  readonly companions: readonly RelativeElements[];
  readonly zeroPointsMps: Float64Array;
  readonly drift: readonly [number, number];
  readonly jittersMps: Float64Array;
}

/** Jitter is confined to at most this many times the scatter of the data. */
const LARGEST_JITTER_MPS = 1e7;

export class ModelBuilder {
  readonly term: VelocityTerm;
  readonly data: VelocityData;
  readonly epochBjdTdb: number;
  readonly #zeroPoints: readonly InstrumentChoice['zeroPointMps'][];
  readonly #jitters: readonly JitterSetting[];

  constructor(data: VelocityData, instruments: readonly string[], theCase: Case, epochBjdTdb: number) {
    this.term = new VelocityTerm(data);
    this.data = data;
    this.epochBjdTdb = epochBjdTdb;
    this.#zeroPoints = instruments.map((name) => theCase.instruments[name]?.zeroPointMps ?? null);
    this.#jitters = instruments.map((name, index) => {
      const choice = theCase.instruments[name]?.jitterMps ?? null;
      if (choice !== null) return jitterSetting(choice);
      // One or two velocities say nothing of their own scatter: the zero point absorbs one.
      let count = 0;
      for (const instrument of data.instrumentOf) if (instrument === index) count++;
      return { lowMps: 0, highMps: count < 3 ? 0 : LARGEST_JITTER_MPS, prior: null, isStated: false };
    });
  }

  problem(plan: ModelPlan): VelocityProblem {
    return new VelocityProblem(this.term, {
      companions: plan.companions.map((companion) => this.#parametrisation(companion)),
      drift: plan.drift,
      zeroPoints: this.#zeroPoints,
      jitters: this.#jitters,
    });
  }

  #parametrisation(plan: CompanionPlan): Parametrisation {
    const stated = plan.choice === null ? [] : Object.keys(plan.choice.elements);
    return plan.choice === null || stated.length === 0
      ? regularParametrisation(plan.circular)
      : statedParametrisation(plan.choice.elements, plan.circular, this.epochBjdTdb);
  }

  /** The point of a problem nearest to a portable one. */
  point(problem: VelocityProblem, portable: PortablePoint): ModelPoint {
    const parameters = new Float64Array(problem.parameterCount);
    problem.structure.companions.forEach((companion, c) => {
      companion.fromElements(portable.companions[c]!, parameters, problem.companionOffsets[c]!);
    });
    problem.linearColumns.forEach((column, l) => {
      if (column < 0) return;
      const instruments = this.data.instrumentCount;
      parameters[column] = l < instruments ? portable.zeroPointsMps[l]! : portable.drift[l - instruments]!;
    });
    const jittersMps = portable.jittersMps.map((jitter, instrument) => {
      const setting = this.#jitters[instrument]!;
      return Math.min(setting.highMps, Math.max(setting.lowMps, jitter));
    });
    return { parameters, jittersMps };
  }

  /** The best point of a fit, free of its parametrisation. */
  portable(fit: ModelFit): PortablePoint {
    return portableOf(fit.problem, fit.point);
  }

  /** Start without companions: weighted medians as zero points, no drift, scatter as jitter. */
  emptyPoint(): PortablePoint {
    const { instrumentCount, instrumentOf, velocitiesMps } = this.data;
    const zeroPointsMps = new Float64Array(instrumentCount);
    const jittersMps = new Float64Array(instrumentCount);
    for (let instrument = 0; instrument < instrumentCount; instrument++) {
      const own = velocitiesMps.filter((_, i) => instrumentOf[i] === instrument).sort();
      const median = own.length > 0 ? own[Math.floor(own.length / 2)]! : 0;
      zeroPointsMps[instrument] = median;
      const deviations = own.map((value) => Math.abs(value - median)).sort();
      jittersMps[instrument] = own.length > 1 ? 1.48 * deviations[Math.floor(own.length / 2)]! : 0;
    }
    return { companions: [], zeroPointsMps, drift: [0, 0], jittersMps };
  }
}

export function portableOf(problem: VelocityProblem, point: ModelPoint): PortablePoint {
  return portableFrom(
    problem.coordinatesAt(point.parameters),
    problem.structure.companions.length,
    problem.linearAt(point.parameters),
    point.jittersMps,
  );
}

/**
 * @param coordinates - (5 x companions), orbit coordinates
 * @param linear - zero points, then slope and curvature as far as there are any
 * @param jittersMps - one per instrument, which also says how many zero points there are
 */
export function portableFrom(
  coordinates: Float64Array,
  companions: number,
  linear: Float64Array,
  jittersMps: Float64Array,
): PortablePoint {
  const instruments = jittersMps.length;
  return {
    companions: Array.from({ length: companions }, (_, c) =>
      coordinatesToElements(coordinates, c * ORBIT_COORDINATES),
    ),
    zeroPointsMps: linear.slice(0, instruments),
    drift: [linear[instruments] ?? 0, linear[instruments + 1] ?? 0],
    jittersMps,
  };
}

function jitterSetting(choice: ElementChoice): JitterSetting {
  switch (choice.kind) {
    case 'fixed':
      return { lowMps: choice.value, highMps: choice.value, prior: null, isStated: true };
    case 'range':
      return { lowMps: choice.low, highMps: choice.high, prior: null, isStated: true };
    case 'prior':
      return {
        lowMps: 0,
        highMps: LARGEST_JITTER_MPS,
        prior: { centre: choice.value, sigma: choice.sigma },
        isStated: true,
      };
  }
}
