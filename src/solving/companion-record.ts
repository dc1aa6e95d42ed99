/** One companion of the solution as it is recorded. */
import { RandomStream } from '../numerics/random.js';
import { mutualHillSpacing, nearPeriodRatio } from '../orbit/environment.js';
import { SOLAR_MASS_IN_JUPITER } from '../orbit/constants.js';
import type { CompanionChoice } from '../observations/types.js';
import { deriveAll, derivedLack, derivedUnit, isDerivedTime, type StarDraw } from './derived.js';
import { evidenceOf, type EvidenceOptions } from './evidence.js';
import type { Explorer, PlannedFit } from './explorer.js';
import { centralInterval, unknownQuantity } from './quantities.js';
import {
  DERIVED_KEYS,
  type CompanionRecord,
  type DerivedKey,
  type ElementKey,
  type NeighbourRecord,
  type Quantity,
} from './types.js';
import type { RivalSearch } from './rivals.js';
import { ELEMENT_UNITS, elementQuantity, type Sampled } from './uncertainties.js';

export function companionRecord(
  explorer: Explorer,
  best: PlannedFit,
  sampled: Sampled,
  index: number,
  letter: string,
  rivalSearch: RivalSearch,
  options: EvidenceOptions,
): CompanionRecord {
  const keys = Object.keys(ELEMENT_UNITS) as ElementKey[];
  const { epochBjdTdb: epoch, data } = explorer.builder;
  const { timesDays } = data;
  const elements = Object.fromEntries(keys.map((key) => [key, elementQuantity(sampled, index, key, epoch)]));
  return {
    letter,
    elements: elements as Record<ElementKey, Quantity>,
    derived: derivedQuantities(
      { epochBjdTdb: epoch, lastObservationDays: timesDays[timesDays.length - 1]! },
      sampled,
      index,
      best.plan.companions[index]!.choice,
      options.seed,
    ),
    circular: best.plan.companions[index]!.circular,
    evidence: evidenceOf(explorer, best, index, options),
    rivals: rivalSearch.rivals,
    rivalsTried: rivalSearch.tried,
  };
}

export function derivedQuantities(
  when: { readonly epochBjdTdb: number; readonly lastObservationDays: number },
  sampled: Sampled,
  index: number,
  choice: CompanionChoice | null,
  seed: number,
): Record<DerivedKey, Quantity> {
  const { epochBjdTdb, lastObservationDays } = when;
  const inclination = choice?.inclinationDeg ?? null;
  const random = RandomStream.fromSeed(seed, 200 + index);
  const seen = sampled.inclinationsDeg?.[index] ?? null;
  const stated = (sigma: number): number | null =>
    inclination === null ? null : inclination.value + sigma * inclination.sigma;
  const star: StarDraw = { ...sampled.star, inclinationDeg: seen?.best ?? stated(0) };
  const best = deriveAll(
    { elements: sampled.values.companions[index]!, star, lastObservationDays },
    DERIVED_KEYS,
  );
  const columns = DERIVED_KEYS.map(() => new Float64Array(sampled.draws.length));
  sampled.draws.forEach((draw, d) => {
    const inclinationDeg = seen?.draws[d] ?? stated(inclination === null ? 0 : random.normal());
    const drawnStar: StarDraw = { ...sampled.stars[d]!, inclinationDeg };
    const values = deriveAll(
      { elements: draw.companions[index]!, star: drawnStar, lastObservationDays },
      DERIVED_KEYS,
    );
    values.forEach((value, k) => (columns[k]![d] = value));
  });
  const period = sampled.values.companions[index]!.period;
  const entries = DERIVED_KEYS.map((key, k): [DerivedKey, Quantity] => {
    const lack = derivedLack(key, star);
    if (lack !== null) return [key, unknownQuantity(derivedUnit(key), lack)];
    const shift = isDerivedTime(key) ? epochBjdTdb : 0;
    // Dates of one and the same passage: a draw that lands on the passage before or after is brought back.
    const column = isDerivedTime(key)
      ? columns[k]!.map((t) => t - period * Math.round((t - best[k]!) / period))
      : columns[k]!;
    return [
      key,
      centralInterval(
        shift + best[k]!,
        column.map((value) => shift + value),
        derivedUnit(key),
      ),
    ];
  });
  return Object.fromEntries(entries) as Record<DerivedKey, Quantity>;
}

/** Neighbours in period, side by side. */
export function neighbourRecords(
  sampled: Sampled,
  companions: readonly CompanionRecord[],
): NeighbourRecord[] {
  const order = companions
    .map((_, c) => c)
    .sort((a, b) => companions[a]!.elements.period.value! - companions[b]!.elements.period.value!);
  return order.slice(1).map((outer, position) => {
    const inner = order[position]!;
    const first = companions[inner]!;
    const second = companions[outer]!;
    return {
      letters: [first.letter, second.letter] as const,
      periodRatio: second.elements.period.value! / first.elements.period.value!,
      nearRatio: nearPeriodRatio(first.elements.period.value!, second.elements.period.value!),
      mutualHillSpacing: hillSpacing(sampled, inner, outer),
    };
  });
}

function hillSpacing(sampled: Sampled, inner: number, outer: number): Quantity {
  if (sampled.star.massSolar === null) return unknownQuantity('', 'the mass of the star is not given');
  const spacing = (values: Sampled['values'], star: StarDraw): number => {
    const [one, two] = [inner, outer].map((c) => {
      const [axis, mass] = deriveAll({ elements: values.companions[c]!, star, lastObservationDays: 0 }, [
        'semiMajorAxis',
        'minimumMass',
      ]);
      return { semiMajorAxisAu: axis!, massSolar: mass! / SOLAR_MASS_IN_JUPITER };
    });
    return mutualHillSpacing(one!, two!, star.massSolar!);
  };
  const draws = Float64Array.from(sampled.draws, (draw, d) => spacing(draw, sampled.stars[d]!));
  return centralInterval(spacing(sampled.values, sampled.star), draws, '');
}
