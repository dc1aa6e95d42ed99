/** A truth from priors times windows, and data from that truth. */
import { RandomStream } from '../../../src/numerics/random.js';
import { periastronFromInferiorConjunction } from '../../../src/orbit/conversions.js';
import { lossOfLight, type TransitingOrbit } from '../../../src/planning/mock-transits.js';
import { evaluateVelocity } from '../../../src/signals/evaluate-velocity.js';
import { JointCoordinates } from '../../../src/solving/joint/joint-coordinates.js';
import type { JointRecipe } from '../../../src/solving/joint/joint-data.js';
import {
  AMPLITUDE,
  CONJUNCTION,
  LOG_PERIOD,
  NaturalIndex,
  RADIUS_RATIO,
  SHAPE,
} from '../../../src/solving/joint/natural.js';
import type { TransitProblem } from './problems.js';

/** Spread of the level of the light from one event to the next. */
const LEVEL_SPREAD = 1e-3;
/** ln of the largest prior density in the coordinates: that of the logit of q1 and of q2 in the middle, a quarter each. */
const LARGEST_LOG_PRIOR = 2 * Math.log(0.25);

export interface SimulatedTransits {
  /** In the coordinates of the posterior. */
  readonly position: Float64Array;
  readonly natural: Float64Array;
  readonly recipe: JointRecipe;
}

/** By rejection from the windows. */
function drawPosition(
  problem: TransitProblem,
  coordinates: JointCoordinates,
  random: RandomStream,
): Float64Array {
  const { windows } = problem;
  if (windows.length !== coordinates.size)
    throw new Error(`${windows.length} windows for ${coordinates.size} coordinates`);
  for (;;) {
    const position = Float64Array.from(windows, ({ centre, width }) => centre + width * random.normal());
    const excess = coordinates.read(position) - LARGEST_LOG_PRIOR;
    if (excess > 1e-9) throw new Error(`a prior density of e^${excess} times what is taken for the largest`);
    if (random.uniform() < Math.exp(excess)) return position;
  }
}

export function simulateTransits(problem: TransitProblem, random: RandomStream): SimulatedTransits {
  const { recipe } = problem;
  const coordinates = new JointCoordinates(recipe, 'all');
  const position = drawPosition(problem, coordinates, random);
  coordinates.read(position);
  const natural = Float64Array.from(coordinates.natural);
  const index = new NaturalIndex(recipe);
  const orbit = orbitOf(natural, coordinates.transit);
  const [curve] = recipe.curves;
  const loss = lossOfLight(
    [orbit],
    { u1: natural[index.band(0)]!, u2: natural[index.band(0) + 1]! },
    { timesBjdTdb: curve!.timesDays, exposureDays: curve!.exposureDays },
    0,
  );
  const flux = new Float64Array(loss.length);
  const jitter = natural[index.curveJitter(0)]!;
  for (const { start, end } of curve!.segments) {
    const level = 1 + LEVEL_SPREAD * random.normal();
    for (let i = start; i < end; i++)
      flux[i] = level * (1 - loss[i]!) + Math.hypot(curve!.sigmas[i]!, jitter) * random.normal();
  }
  return {
    position,
    natural,
    recipe: {
      ...recipe,
      curves: [{ ...curve!, flux }],
      velocities:
        recipe.velocities === null
          ? null
          : { ...recipe.velocities, velocitiesMps: velocitiesOf(recipe, natural, orbit, random) },
      midTimes: recipe.midTimes.map((set, i) => ({
        ...set,
        timesDays: set.cycles.map(
          (cycle, row) =>
            orbit.conjunctionBjdTdb +
            cycle * orbit.periodDays +
            Math.hypot(set.sigmasDays[row]!, natural[index.midTimeJitter(i)]!) * random.normal(),
        ),
      })),
    },
  };
}

/** The one companion; day 0 stands for a date. */
function orbitOf(natural: Float64Array, transit: Float64Array): TransitingOrbit {
  const k = natural[SHAPE]!;
  const h = natural[SHAPE + 1]!;
  const shape = {
    periodDays: Math.exp(natural[LOG_PERIOD]!),
    eccentricity: Math.hypot(k, h),
    argPeriastronStarRad: k === 0 && h === 0 ? Math.PI / 2 : Math.atan2(h, k),
  };
  const conjunctionBjdTdb = natural[CONJUNCTION]!;
  return {
    ...shape,
    conjunctionBjdTdb,
    timePeriastronBjdTdb: periastronFromInferiorConjunction({
      ...shape,
      timeInferiorConjunctionBjdTdb: conjunctionBjdTdb,
    }),
    radiusRatio: natural[RADIUS_RATIO]!,
    impactParameter: transit[5]!,
    scaledSemiMajorAxis: Math.exp(transit[6]!),
    durationDays: 0,
  };
}

function velocitiesOf(
  recipe: JointRecipe,
  natural: Float64Array,
  orbit: TransitingOrbit,
  random: RandomStream,
): Float64Array {
  const index = new NaturalIndex(recipe);
  const { timesDays, sigmasMps } = recipe.velocities!;
  const model = evaluateVelocity(
    {
      companions: [{ ...orbit, semiAmplitudeMps: natural[AMPLITUDE]! }],
      letters: ['b'],
      zeroPointsMps: new Float64Array(0),
      jittersMps: new Float64Array(0),
      epochBjdTdb: 0,
      slopeMpsPerDay: 0,
      curvatureMpsPerDay2: 0,
    },
    timesDays,
  );
  const jitter = natural[index.velocityJitter(0)]!;
  return model.map(
    (v, i) => v + natural[index.zeroPoint(0)]! + Math.hypot(sigmasMps[i]!, jitter) * random.normal(),
  );
}
