/** Solves one simulated light curve blindly and compares with the truth. */
import { RandomStream } from '../../../src/numerics/random.js';
import type { Case } from '../../../src/observations/types.js';
import { BARE_CASE } from '../evaluate.js';
import { judge } from './judge.js';
import { LIGHT_KINDS, type LightKind } from './kinds.js';
import type { SimulatedLight, Truth } from './simulate.js';
import {
  fitFromTruth,
  fittedEphemerides,
  searchedEphemerides,
  solveLight,
  type LightSolution,
} from './solve.js';

export interface LightResult {
  readonly kind: string;
  readonly index: number;
  readonly seed: number;
  readonly points: number;
  readonly expected: number;
  /** Companions whose period and transits are right: by the search, and after the fit. */
  readonly searched: number;
  readonly fitted: number;
  readonly falseClaims: number;
  /** ln L of the solution minus ln L of the same model fitted from the truth; null unless all companions were found. */
  readonly lnLBehindTruth: number | null;
  readonly seconds: number;
  /** What was put in and what came out, in words. */
  readonly truth: string;
  readonly found: string;
}

/** Seeds of light curves lie apart from those of velocities. */
const SEED_OFFSET = 500_000;

export function simulatedLight(
  kind: LightKind,
  index: number,
  baseSeed: number,
): { seed: number; set: SimulatedLight } {
  const seed = baseSeed + SEED_OFFSET + 1000 * LIGHT_KINDS.indexOf(kind) + index;
  return { seed, set: kind.make(RandomStream.fromSeed(seed)) };
}

/** Every other star is known to 3 and 2 per cent, the others not at all. */
function caseOf({ star }: SimulatedLight, index: number): Case {
  if (index % 2 === 0) return BARE_CASE;
  const { massSolar, radiusSolar } = star;
  return {
    ...BARE_CASE,
    star: {
      massSolar: { value: massSolar, sigma: 0.03 * massSolar },
      radiusSolar: { value: radiusSolar, sigma: 0.02 * radiusSolar },
      effectiveTemperatureK: null,
    },
  };
}

export function evaluateLight(kind: LightKind, index: number, baseSeed: number): LightResult {
  const { seed, set } = simulatedLight(kind, index, baseSeed);
  const began = performance.now();
  const solution = solveLight(caseOf(set, index), set);
  const seconds = (performance.now() - began) / 1000;
  const searched = judge(searchedEphemerides(solution), set.truth);
  const ephemerides = fittedEphemerides(solution);
  const fitted = judge(ephemerides, set.truth);
  const countOf = (matches: readonly number[]): number => matches.filter((match) => match >= 0).length;
  const isComplete =
    set.truth.length > 0 && fitted.falseClaims === 0 && countOf(fitted.matches) === set.truth.length;
  return {
    kind: kind.name,
    index,
    seed,
    points: set.observations.lightCurves[0]!.timesBjdTdb.length,
    expected: kind.companions,
    searched: countOf(searched.matches),
    fitted: countOf(fitted.matches),
    falseClaims: searched.falseClaims,
    lnLBehindTruth: isComplete
      ? behindTruth(
          solution,
          set,
          set.truth.map((truth, t) => ({ truth, companion: ephemerides[fitted.matches[t]!]!.companion })),
        )
      : null,
    seconds,
    truth: set.truth.map(truthInWords).join('; '),
    found: foundInWords(solution),
  };
}

function behindTruth(
  solution: LightSolution,
  set: SimulatedLight,
  pairs: readonly { readonly truth: Truth; readonly companion: number }[],
): number {
  const { fit } = solution.settled!;
  const truthOf = fit.recipe.companions.map((_, c) => pairs.find(({ companion }) => companion === c)?.truth);
  const fromTruth = fitFromTruth(solution, set, truthOf);
  return fromTruth === null ? Infinity : fit.maximum.value - fromTruth.maximum.value;
}

function truthInWords(truth: Truth): string {
  const { periodDays, radiusRatio, impactParameter, eccentricity, signalToNoise, seen } = truth;
  return `P ${periodDays.toFixed(4)} k ${radiusRatio.toFixed(3)} b ${impactParameter.toFixed(2)} e ${eccentricity.toFixed(2)} S/N ${signalToNoise.toFixed(1)} in ${seen.length} events`;
}

function foundInWords({ searched }: LightSolution): string {
  return searched
    .map(({ ephemeris, candidate }) => {
      const strength =
        candidate === null
          ? ''
          : ` S/N ${candidate.signalToNoise.toFixed(1)} FAP ${candidate.falseAlarmProbability.toExponential(1)}`;
      return `P ${ephemeris.periodDays?.toFixed(4) ?? 'unknown'}${strength}`;
    })
    .join('; ');
}
