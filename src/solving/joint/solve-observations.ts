/** The main job for any mix of velocities, light curves and mid-times of one target. */
import { ConvergenceError, InputDataError } from '../../errors.js';
import type { Observations } from '../../observations/photometry-types.js';
import type { Case } from '../../observations/types.js';
import { epochOf } from '../prepare.js';
import { solveWithPosterior, type PosteriorSolveOptions } from '../solve-with-posterior.js';
import type { Solved } from '../types.js';
import { describeJoint } from './describe-joint.js';
import type { TransitSearch } from './found-transit.js';
import { drawJointCurvature, sampleJoint } from './joint-posterior.js';
import { planCompanions } from './plan-companions.js';
import { settleJoint } from './settle-joint.js';
import { searchTransits } from './transit-search.js';
import { settleVelocities } from './velocity-part.js';
import { withoutTransits } from './without-transits.js';

/** The solver's epoch: that of the velocities, else the middle of everything, rounded to half a day. */
export function epochOfAll({ velocities, lightCurves, midTimes }: Observations): number {
  if (velocities !== null) return epochOf(velocities);
  let first = Infinity;
  let last = -Infinity;
  for (const { timesBjdTdb } of [...lightCurves, ...midTimes])
    for (const time of timesBjdTdb) {
      first = Math.min(first, time);
      last = Math.max(last, time);
    }
  return Math.round(first + last) / 2;
}

/**
 * @throws InputDataError where the data cannot be solved at all; ConvergenceError where no start gives a finite model
 */
export async function solveObservations(
  theCase: Case,
  observations: Observations,
  options: PosteriorSolveOptions,
): Promise<Solved> {
  const { velocities, lightCurves, midTimes } = observations;
  if (lightCurves.length === 0 && midTimes.length === 0) {
    if (velocities === null) throw nothingObserved(theCase);
    return solveWithPosterior(theCase, velocities, options);
  }
  const progress = options.onProgress ?? ((): void => undefined);
  const share = options.quick ? 1 : 0.4;
  const epochBjdTdb = epochOfAll(observations);
  progress('searching the light curves', 0);
  const search = searchTransits(theCase, observations, epochBjdTdb, (stage, fraction) => {
    progress(stage, 0.3 * share * fraction);
  });
  const velocity =
    velocities === null
      ? null
      : settleVelocities(
          theCase,
          velocities,
          search.transits,
          epochBjdTdb,
          options.seed,
          (stage, fraction) => {
            progress(stage, share * (0.3 + 0.3 * fraction));
          },
        );
  const planned = planCompanions(theCase, search.transits, velocity);
  const hasEphemerides = search.transits.some(({ isSeen }) => isSeen) || search.sets.length > 0;
  if (!hasEphemerides) return withoutTransits(theCase, observations, search, epochBjdTdb, options);
  progress('fitting everything together', 0.65 * share);
  const settled = settleJoint(
    {
      theCase,
      observations,
      sets: search.sets,
      velocity: velocity?.part ?? null,
      noise: velocity === null ? null : velocity.portable,
      epochBjdTdb,
    },
    planned,
  );
  if (settled === null) throw noStart(search);
  const periods = settled.companions.map(({ start }) => start.periodDays);
  const sample = options.quick
    ? drawJointCurvature(settled, options.seed)
    : await sampleJoint(settled, periods, {
        seed: options.seed,
        threads: options.threads,
        limit: options.drawLimit,
        isStopped: () => options.signal?.aborted === true,
        onProgress: (part) => {
          progress('sampling', share + (0.95 - share) * part);
        },
      });
  return describeJoint({ theCase, observations, search, velocity, settled, sample, epochBjdTdb }, options);
}

function nothingObserved(theCase: Case): InputDataError {
  return new InputDataError([
    {
      code: 'no-rows',
      file: theCase.path ?? theCase.target,
      line: null,
      column: null,
      field: null,
      message: 'there is neither a velocity nor a light curve nor a mid-time',
      hint: 'name at least one table',
    },
  ]);
}

function noStart({ transits }: TransitSearch): ConvergenceError {
  const letters = transits.map(({ ephemeris }) => ephemeris.letter).join(', ');
  return new ConvergenceError(
    `no start of the joint fit gives a finite model (companions ${letters}): the ephemeris or what the case states may contradict the data`,
    {},
  );
}
