/** Draws of a joint model as everything downstream reads them. */
import type { Case, VelocitySet } from '../../observations/types.js';
import type { VelocityData } from '../../signals/velocity-term.js';
import { ModelBuilder, type ModelPlan } from '../model-builder.js';
import { drawStars, starOf, type Sampled } from '../uncertainties.js';
import type { JointSample } from './joint-posterior.js';
import { jointValues, portableAt, referencesOf, type JointValues, type References } from './joint-values.js';
import type { SettledJoint } from './settle-joint.js';
import type { SettledVelocities } from './velocity-part.js';

/** Draws carried into derived quantities. */
const KEPT_DRAWS = 8000;

export interface JointSampled {
  readonly best: JointValues;
  readonly draws: readonly JointValues[];
  readonly references: References;
  /** The same for what knows velocities only. */
  readonly sampled: Sampled;
  /** The plan of the velocity model with the shapes that the joint fit chose. */
  readonly plan: ModelPlan;
}

const NO_VELOCITIES: VelocityData = {
  timesDays: new Float64Array(0),
  velocitiesMps: new Float64Array(0),
  sigmasMps: new Float64Array(0),
  instrumentOf: new Uint16Array(0),
  instrumentCount: 0,
};

export function emptyVelocitySet(timeScale: VelocitySet['timeScale']): VelocitySet {
  return {
    count: 0,
    timesBjdTdb: new Float64Array(0),
    velocitiesMps: new Float64Array(0),
    sigmasMps: new Float64Array(0),
    instrumentOf: new Uint16Array(0),
    instruments: [],
    tableOf: new Uint16Array(0),
    lines: new Uint32Array(0),
    tables: [],
    timeScale,
    notices: [],
  };
}

export function jointSampled(
  theCase: Case,
  settled: SettledJoint,
  sample: JointSample,
  velocity: SettledVelocities | null,
  epochBjdTdb: number,
  seed: number,
): JointSampled {
  const { fit, companions } = settled;
  const references = referencesOf(fit.density, fit.maximum.position);
  const best = jointValues(fit.density, fit.maximum.position, references);
  const { density, chains, drawsPerChain } = sample;
  const { size } = density;
  const every = Math.max(1, Math.ceil((chains.length * drawsPerChain) / KEPT_DRAWS));
  const draws = chains.flatMap((positions) =>
    Array.from({ length: Math.floor(drawsPerChain / every) }, (_, d) => {
      const at = d * every * size;
      return jointValues(density, positions.subarray(at, at + size), references);
    }),
  );
  const plan: ModelPlan = {
    companions: companions.map(({ circular }, c) => ({
      choice: velocity?.part.plan.companions[c]?.choice ?? null,
      circular,
    })),
    drift: velocity?.part.plan.drift ?? 0,
  };
  const builder =
    velocity?.part.explorer.builder ?? new ModelBuilder(NO_VELOCITIES, [], theCase, epochBjdTdb);
  const problem = builder.problem(plan);
  const portable = portableAt(fit.density, fit.maximum.position);
  return {
    best,
    draws,
    references,
    plan,
    sampled: {
      problem,
      references,
      values: best.reported,
      draws: draws.map(({ reported }) => reported),
      stars: drawStars(theCase, draws.length, seed),
      star: starOf(theCase),
      curvature: { covariance: null, size: 0, source: 'none' },
      point: builder.point(problem, portable),
      inclinationsDeg: companions.map((_, c) =>
        best.transits[c] === null
          ? null
          : {
              best: best.transits[c]!.inclinationDeg,
              draws: Float64Array.from(draws, ({ transits }) => transits[c]!.inclinationDeg),
            },
      ),
    },
  };
}
