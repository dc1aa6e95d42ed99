/** What the masses of a joint solution predict for the mid-times of companions that transit: they pull at each other. */
import { median } from '../../numerics/summary.js';
import type { Observations } from '../../observations/photometry-types.js';
import { MINUTES_PER_DAY, RAD_PER_DEG } from '../../orbit/constants.js';
import { companionMassSolar, massFunctionSolar } from '../../orbit/masses.js';
import type { ElementValues } from '../elements-report.js';
import { centralInterval, unknownQuantity } from '../quantities.js';
import {
  compareVariation,
  type PredictedCompanion,
  type PredictedVariation,
} from '../timing/interaction-predict.js';
import type { FittedMidTimes, PredictedInteractionRecord } from '../transit-types.js';
import type { Quantity } from '../types.js';
import type { JointResult } from './joint-result.js';
import type { JointSampled } from './joint-sampled.js';

import { averaged, departuresOf, followed, shifted, type Departure } from './integrated-orbits.js';
import { resonanceOf, superPeriodSwings } from './resonant-pairs.js';

/** So many draws are integrated. */
const FOLLOWED_DRAWS = 120;
/** So many moments. */
const EPOCHS = 8;
/** A line through two transits leaves nothing. */
const FEWEST_TRANSITS = 3;

type Comparison = PredictedInteractionRecord['comparisons'][string];

/**
 * @param midTimes - observed ones, beside the ephemeris of the solution
 * @returns `null` unless the star and at least two companions that transit have masses
 *
 * Orbits are integrated so that their mid-transits keep the periods and epochs of the solution on average, tilted as in the
 * solution, with one line of nodes; companions that do not transit are left out. Eccentricities of the solution are means,
 * while integrations need those of a moment: moments are spread over the cycle of the variation, times averaged over them
 * for the value, and draws go through them in turn, so that intervals hold what this leaves open.
 */
export function predictedInteraction(
  { settled, observations, epochBjdTdb }: JointResult,
  joint: JointSampled,
  midTimes: readonly FittedMidTimes[],
): PredictedInteractionRecord | null {
  const { recipe } = settled.fit;
  const timed = new Set(recipe.midTimes.map(({ companion }) => companion));
  const chosen = recipe.companions.flatMap(({ transits, pulls, isPeriodUnknown }, c) =>
    (transits || timed.has(c)) && pulls && !isPeriodUnknown ? [c] : [],
  );
  const starMassSolar = joint.sampled.star.massSolar;
  if (chosen.length < 2 || starMassSolar === null) return null;
  const span = spanDays(observations, epochBjdTdb);
  if (span === null) return null;
  const letters = chosen.map((c) => recipe.companions[c]!.letter);
  const cyclesOf = chosen.map((c) => cyclesWithin(joint.sampled.values.companions[c]!, span));
  const at = (
    elements: readonly ElementValues[],
    massSolar: number,
    draw: number | null,
  ): PredictedCompanion[] =>
    chosen.map((c, i) =>
      companionAt(letters[i]!, elements[c]!, massSolar, inclinationRad(joint, c, draw), cyclesOf[i]!),
    );
  const best = at(joint.sampled.values.companions, starMassSolar, null);
  const anchors = epochsAround(best, span).map((epochDays) => ({
    epochDays,
    departures: departuresOf(best, starMassSolar, epochDays),
  }));
  const runs = anchors.flatMap(({ epochDays, departures }) => {
    const run = followed(shifted(best, departures), starMassSolar, epochDays);
    return run === null ? [] : [run];
  });
  const predicted = runs.length < anchors.length ? null : averaged(runs);
  return {
    letters,
    ...resonanceOf(best),
    predictedAmplitudeMinutes: amplitudes(letters, cyclesOf, predicted, () =>
      drawnAmplitudes(joint, anchors, (draw) =>
        at(joint.sampled.draws[draw]!.companions, joint.sampled.stars[draw]!.massSolar!, draw),
      ),
    ),
    ...superPeriodSwings(best),
    comparisons: predicted === null ? {} : comparisonsOf(best, predicted, midTimes, epochBjdTdb),
  };
}

interface Anchor {
  readonly epochDays: number;
  readonly departures: readonly Departure[];
}

/** Moments over one super-period (without a resonance, the time between conjunctions), but no more than the span. */
function epochsAround(companions: readonly PredictedCompanion[], [first, last]: [number, number]): number[] {
  const periods = companions.map(({ periodDays }) => periodDays).sort((a, b) => a - b);
  const synodicDays = Math.max(
    ...periods.slice(1).map((outer, i) => 1 / Math.abs(1 / periods[i]! - 1 / outer)),
  );
  const reach = Math.min(resonanceOf(companions).superPeriod ?? synodicDays, last - first);
  const middle = 0.5 * (first + last);
  return Array.from({ length: EPOCHS }, (_, k) => middle + reach * ((k + 0.5) / EPOCHS - 0.5));
}

/** First and last of the light curves and mid-times, since the epoch. */
function spanDays({ lightCurves, midTimes }: Observations, epochBjdTdb: number): [number, number] | null {
  let [first, last] = [Infinity, -Infinity];
  for (const { timesBjdTdb } of [...lightCurves, ...midTimes])
    for (const time of timesBjdTdb) {
      first = Math.min(first, time - epochBjdTdb);
      last = Math.max(last, time - epochBjdTdb);
    }
  return first < last ? [first, last] : null;
}

function cyclesWithin(
  { period, timeOfInferiorConjunction }: ElementValues,
  span: [number, number],
): number[] {
  const first = Math.ceil((span[0] - timeOfInferiorConjunction) / period);
  const last = Math.floor((span[1] - timeOfInferiorConjunction) / period);
  return Array.from({ length: Math.max(1, last - first + 1) }, (_, k) => first + k);
}

/** Edge-on where only mid-times show that it transits. */
function inclinationRad({ sampled }: JointSampled, companion: number, draw: number | null): number {
  const seen = sampled.inclinationsDeg?.[companion] ?? null;
  if (seen === null) return Math.PI / 2;
  return RAD_PER_DEG * (draw === null ? seen.best : seen.draws[draw]!);
}

function companionAt(
  letter: string,
  { period, eccentricity, argumentOfPeriastron, timeOfInferiorConjunction, semiAmplitude }: ElementValues,
  starMassSolar: number,
  inclination: number,
  cycles: readonly number[],
): PredictedCompanion {
  const massFunction = massFunctionSolar({
    semiAmplitudeMps: Math.max(0, semiAmplitude),
    periodDays: period,
    eccentricity,
  });
  const massSolar = companionMassSolar({
    massFunctionSolar: massFunction,
    starMassSolar,
    sinInclination: Math.sin(inclination),
  });
  return {
    letter,
    periodDays: period,
    conjunctionDays: timeOfInferiorConjunction,
    eccentricity,
    argPeriastronStarRad: RAD_PER_DEG * argumentOfPeriastron,
    massRatio: massSolar / starMassSolar,
    inclinationRad: inclination,
    cycles,
  };
}

/** (draws followed) x (companions): amplitudes, NaN where a draw cannot be followed. */
function drawnAmplitudes(
  { sampled }: JointSampled,
  anchors: readonly Anchor[],
  companionsOf: (draw: number) => PredictedCompanion[],
): (readonly number[])[] {
  const count = sampled.draws.length;
  const stride = Math.max(1, Math.floor(count / FOLLOWED_DRAWS));
  const rows: (readonly number[])[] = [];
  for (let draw = 0; draw < count && rows.length < FOLLOWED_DRAWS; draw += stride) {
    const { epochDays, departures } = anchors[rows.length % anchors.length]!;
    const companions = shifted(companionsOf(draw), departures);
    const found = followed(companions, sampled.stars[draw]!.massSolar!, epochDays);
    rows.push(companions.map((_, i) => found?.[i]!.amplitudeMinutes ?? NaN));
  }
  return rows;
}

function amplitudes(
  letters: readonly string[],
  cyclesOf: readonly (readonly number[])[],
  predicted: readonly PredictedVariation[] | null,
  draw: () => (readonly number[])[],
): Record<string, Quantity> {
  const rows = predicted === null ? [] : draw();
  return Object.fromEntries(
    letters.map((letter, i): [string, Quantity] => {
      if (predicted === null)
        return [
          letter,
          unknownQuantity(
            'min',
            'the companions of this solution meet so closely that they cannot be followed',
          ),
        ];
      if (cyclesOf[i]!.length < FEWEST_TRANSITS)
        return [letter, unknownQuantity('min', 'fewer than three of its transits fall within the data')];
      return [
        letter,
        centralInterval(
          predicted[i]!.amplitudeMinutes,
          Float64Array.from(rows, (row) => row[i]!),
          'min',
        ),
      ];
    }),
  );
}

function comparisonsOf(
  companions: readonly PredictedCompanion[],
  predicted: readonly PredictedVariation[],
  midTimes: readonly FittedMidTimes[],
  epochBjdTdb: number,
): Record<string, Comparison> {
  const entries = companions.flatMap(
    ({ letter, conjunctionDays, periodDays, cycles }, i): [string, Comparison][] => {
      const own = midTimes.find((times) => times.letter === letter);
      if (own === undefined) return [];
      const rows = Array.from(own.timesBjdTdb, (time, row) => ({
        time: time - epochBjdTdb,
        sigma: own.sigmasDays[row]!,
        isTransit: own.isOccultation[row] === 0,
      })).flatMap(({ time, sigma, isTransit }) => {
        const cycle = Math.round((time - conjunctionDays) / periodDays);
        const model = predicted[i]!.timesDays[cycle - cycles[0]!];
        return isTransit && model !== undefined ? [{ time, sigma, cycle, model }] : [];
      });
      if (rows.length < FEWEST_TRANSITS) return [];
      const sigmas = Float64Array.from(rows, ({ sigma }) => sigma);
      const { chiSquare, chiSquareLine } = compareVariation(
        rows.map(({ cycle }) => cycle),
        rows.map(({ time }) => time),
        sigmas,
        rows.map(({ model }) => model),
      );
      const medianErrorMinutes = MINUTES_PER_DAY * median(sigmas);
      return [[letter, { count: rows.length, medianErrorMinutes, chiSquareLine, chiSquare }]];
    },
  );
  return Object.fromEntries(entries);
}
