/** Solves one simulated set and compares with a solver started from the truth. */
import { RandomStream } from '../../src/numerics/random.js';
import type { Case } from '../../src/observations/types.js';
import { Explorer } from '../../src/solving/explorer.js';
import { findCompanions } from '../../src/solving/find-companions.js';
import type { PortablePoint } from '../../src/solving/model-builder.js';
import type { RelativeElements } from '../../src/solving/parametrisations/parametrisation.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { KINDS, type Kind } from './kinds.js';
import type { SimulatedSet } from './simulate.js';

export interface SetResult {
  readonly kind: string;
  readonly index: number;
  readonly seed: number;
  readonly expected: number;
  readonly found: number;
  /** ln L of the solution minus ln L of the fit of the same structure started from the truth; null when counts differ. */
  readonly lnLBehindTruth: number | null;
  readonly periods: readonly number[];
  readonly truePeriods: readonly number[];
  readonly eccentricities: readonly number[];
  readonly trueEccentricities: readonly number[];
  readonly seconds: number;
  readonly lastFalseAlarm: number | null;
  readonly lastDeltaBic: number | null;
}

export const BARE_CASE: Case = {
  path: null,
  target: 'simulated',
  star: { massSolar: null, radiusSolar: null, effectiveTemperatureK: null },
  tables: [],
  companions: 'auto',
  maximumCompanions: 5,
  drift: 'auto',
  circular: 'auto',
  instruments: {},
  periodRangeDays: { low: null, high: null },
  mock: null,
};

export function simulatedSet(
  kind: Kind,
  index: number,
  baseSeed: number,
): { seed: number; set: SimulatedSet } {
  const seed = baseSeed + 1000 * KINDS.indexOf(kind) + index;
  return { seed, set: kind.make(RandomStream.fromSeed(seed)) };
}

export function evaluateSet(kind: Kind, index: number, baseSeed: number): SetResult {
  const { seed, set } = simulatedSet(kind, index, baseSeed);
  const started = performance.now();
  const { explorer } = explorerFor(BARE_CASE, set.velocities);
  const found = findCompanions(explorer, () => undefined);
  const seconds = (performance.now() - started) / 1000;
  const portable = explorer.portable(found.best);
  const count = portable.companions.length;
  const last = found.stages.findLast((stage) => stage.addition !== null)?.addition ?? null;
  return {
    kind: kind.name,
    index,
    seed,
    expected: kind.companions,
    found: count,
    lnLBehindTruth: count === kind.companions ? behindTruth(explorer, found.best, set) : null,
    periods: portable.companions.map((companion) => companion.periodDays),
    truePeriods: set.truth.map((companion) => companion.periodDays),
    eccentricities: portable.companions.map((companion) => companion.eccentricity),
    trueEccentricities: set.truth.map((companion) => companion.eccentricity),
    seconds,
    lastFalseAlarm: last?.falseAlarmProbability ?? null,
    lastDeltaBic: last?.deltaBic ?? null,
  };
}

/** Gain of the reported solution over the same structure started from the true elements (negative: something was missed). */
function behindTruth(
  explorer: Explorer,
  best: ReturnType<typeof findCompanions>['best'],
  set: SimulatedSet,
): number {
  const portable = explorer.portable(best);
  const epoch = explorer.builder.epochBjdTdb;
  const truths: RelativeElements[] = set.truth.map((orbit) => ({
    ...orbit,
    timePeriastronDays: orbit.timePeriastronBjdTdb - epoch,
  }));
  // Truths in the order of the companions found: nearest in log period first.
  const remaining = [...truths];
  const ordered = portable.companions.map((companion) => {
    remaining.sort(
      (a, b) =>
        Math.abs(Math.log(a.periodDays / companion.periodDays)) -
        Math.abs(Math.log(b.periodDays / companion.periodDays)),
    );
    return remaining.shift()!;
  });
  const start: PortablePoint = {
    companions: ordered,
    zeroPointsMps: portable.zeroPointsMps,
    drift: [
      set.slopeMpsPerDay + set.curvatureMpsPerDay2 * (epoch - set.epochBjdTdb),
      set.curvatureMpsPerDay2,
    ],
    jittersMps: portable.jittersMps,
  };
  const fromTruth = explorer.fit(best.plan, start);
  return best.fit.logLikelihood - fromTruth.fit.logLikelihood;
}
