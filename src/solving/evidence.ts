/** How sure one companion of a solution is: with and without it, circular and eccentric. */
import { RandomStream } from '../numerics/random.js';
import { curvatureAt, gaussianDraws } from './curvature.js';
import { reportedValues } from './elements-report.js';
import type { Explorer, PlannedFit } from './explorer.js';
import { powerOfGain } from './false-alarm.js';
import { evidenceFromFits } from './addition.js';
import { gainWithNoiseFree } from './noise-free-gain.js';
import { permutationFalseAlarm, permutedMaxima } from './permutations.js';
import { centralInterval } from './quantities.js';
import type { Evidence } from './types.js';

export interface EvidenceOptions {
  readonly seed: number;
  /** Number of permutations for the false-alarm probability; 0 keeps the analytic bound. */
  readonly permutations: number;
}

/** Evidence for companion `index` of `best`. */
export function evidenceOf(
  explorer: Explorer,
  best: PlannedFit,
  index: number,
  options: EvidenceOptions,
): Evidence {
  const n = explorer.builder.data.timesDays.length;
  const base = explorer.without(best, index);
  const variants = shapesOf(explorer, best, index);
  const { deltaLogLikelihood, deltaBic, falseAlarmProbability } = evidenceFromFits(
    explorer,
    base,
    best,
    variants,
  );
  const circularGain = gainWithNoiseFree(base, variants.circular);
  const { permutations, seed } = options;
  const permuted =
    permutations > 0
      ? permutationFalseAlarm(
          permutedMaxima(explorer, base, permutations, seed),
          powerOfGain(circularGain, n),
        )
      : null;
  return {
    deltaLogLikelihood,
    deltaBic,
    falseAlarmProbability:
      permuted === null || permuted.exceeding === 0 ? falseAlarmProbability : permuted.probability,
    falseAlarmMethod:
      permuted === null
        ? 'analytic bound of Baluev 2008 with the noise level refitted, shared between sinusoids and eccentric shapes'
        : permuted.exceeding === 0
          ? `analytic bound of Baluev 2008 with the noise level refitted; none of ${permuted.count} permutations within instruments reached the power of the sinusoid, which by itself says below ${(100 * permuted.probability).toPrecision(2)} %`
          : `${permuted.count} permutations of the residuals within instruments, ${permuted.exceeding} of which reached the power of the sinusoid (analytic bound ${falseAlarmProbability.toExponential(1)})`,
    marginal: null,
    eccentricity: eccentricityEvidence(explorer, best, index, variants, options.seed),
  };
}

interface Shapes {
  readonly circular: PlannedFit | null;
  readonly eccentric: PlannedFit | null;
}

/** The solution with companion `index` circular if it is eccentric, and the other way round; null where that cannot be. */
export function otherShape(explorer: Explorer, best: PlannedFit, index: number): PlannedFit | null {
  const companion = best.plan.companions[index]!;
  if (companion.choice?.elements.eccentricity !== undefined) return null;
  const companions = best.plan.companions.map((other, c) =>
    c === index ? { ...other, circular: !other.circular } : other,
  );
  const fitted = explorer.fit({ ...best.plan, companions }, explorer.portable(best));
  return fitted.fit.status === 'failed' || !explorer.isInRange(fitted) ? null : fitted;
}

function shapesOf(explorer: Explorer, best: PlannedFit, index: number): Shapes {
  const other = otherShape(explorer, best, index);
  return best.plan.companions[index]!.circular
    ? { circular: best, eccentric: other }
    : { circular: other, eccentric: best };
}

function eccentricityEvidence(
  explorer: Explorer,
  best: PlannedFit,
  index: number,
  { circular, eccentric }: Shapes,
  seed: number,
): Evidence['eccentricity'] {
  if (circular === null || eccentric === null) return null;
  const n = explorer.builder.data.timesDays.length;
  const gain = eccentric.fit.logLikelihood - circular.fit.logLikelihood;
  const degrees = n - eccentric.fit.problem.parameterCount;
  return {
    deltaLogLikelihood: gain,
    deltaBic: circular.fit.bic - eccentric.fit.bic,
    // (chi2_ecc/chi2_circ)^((N - M)/2) [LucySweeney1971]; with the jitter refitted the ratio is exp(-2 gain/n).
    lucySweeneyProbability: degrees > 0 ? Math.exp((-Math.max(0, gain) * degrees) / n) : null,
    marginal: null,
    eccentricFit: best === eccentric ? null : eccentricElements(explorer, eccentric, index, seed),
  };
}

/** e and omega of the eccentric fit that was not chosen, so that both versions are in the report. */
function eccentricElements(
  explorer: Explorer,
  eccentric: PlannedFit,
  index: number,
  seed: number,
): NonNullable<Evidence['eccentricity']>['eccentricFit'] {
  const { problem, point } = eccentric.fit;
  const references = explorer.portable(eccentric).companions.map((companion) => ({
    periastron: companion.timePeriastronDays,
    conjunction: companion.timePeriastronDays,
  }));
  const values = reportedValues(problem, point, references).companions[index]!;
  const { covariance } = curvatureAt(problem, point);
  const draws =
    covariance === null
      ? []
      : gaussianDraws(problem, point, covariance, 1000, RandomStream.fromSeed(seed, 100 + index));
  const drawn = draws.map((draw) => reportedValues(problem, draw, references).companions[index]!);
  return {
    eccentricity: centralInterval(
      values.eccentricity,
      Float64Array.from(drawn, (d) => d.eccentricity),
      '',
    ),
    argumentOfPeriastron: centralInterval(
      values.argumentOfPeriastron,
      Float64Array.from(drawn, (d) => d.argumentOfPeriastron),
      'deg',
      360,
    ),
  };
}
