/** Which companions the joint model has, and what is known of each before it is fitted. */
import { companionLetter } from '../../observations/letters.js';
import type { Case } from '../../observations/types.js';
import { conjunctionDelayDays } from '../../orbit/conversions.js';
import {
  inclinationFromImpactParameterRad,
  occultationPhase,
  totalDurationDays,
} from '../../orbit/transit-geometry.js';
import { TRANSIT_COORDINATES } from '../../signals/transit/light-curve-kernel.js';
import type { FoundTransit } from './found-transit.js';
import type { JointFit } from './joint-fit.js';
import type { PlannedCompanion } from './joint-recipe.js';
import { startFromEphemeris } from './joint-start.js';
import { AMPLITUDE, CONJUNCTION, LOG_PERIOD, SHAPE } from './natural.js';
import type { SettledVelocities } from './velocity-part.js';

/** Semi-amplitude from which a pull is fitted that the velocities alone do not show, in scales of its prior. */
const START_PULL = 10;

export function planCompanions(
  theCase: Case,
  transits: readonly FoundTransit[],
  velocity: SettledVelocities | null,
): PlannedCompanion[] {
  const listed = typeof theCase.companions === 'object' ? theCase.companions : [];
  const plan = (
    letter: string,
    start: PlannedCompanion['start'],
    found: FoundTransit | null,
    model: { readonly circular: boolean; readonly pulls: boolean },
  ): PlannedCompanion => {
    const choice = listed.find((other) => other.letter === letter) ?? null;
    return { letter, start, found, ...model, choice, occultationLagDays: lagOf(start, choice) };
  };
  if (velocity === null)
    return transits.map((found) => {
      const { letter } = found.ephemeris;
      const wanted = listed.find((other) => other.letter === letter)?.circular ?? theCase.circular;
      return plan(letter, startFromEphemeris(found.ephemeris, null), found, {
        circular: wanted !== false,
        pulls: false,
      });
    });
  const { settled, portable, founds } = velocity;
  const isOwned = ({ ephemeris }: FoundTransit): boolean =>
    founds.some((own) => own?.ephemeris.midTimeDays === ephemeris.midTimeDays);
  const unowned = transits.filter((found) => !isOwned(found));
  const taken = new Set(
    [...unowned, ...founds].flatMap((found) => (found === null ? [] : [found.ephemeris.letter])),
  );
  const freeLetter = (): string => {
    let place = 0;
    while (taken.has(companionLetter(place))) place++;
    return companionLetter(place);
  };
  const planned = portable.companions.map((companion, c) => {
    const found = founds[c] ?? null;
    const stated = listed[c]?.letter;
    const letter =
      found?.ephemeris.letter ?? (stated !== undefined && !taken.has(stated) ? stated : freeLetter());
    taken.add(letter);
    const { circular } = settled.best.plan.companions[c]!;
    const start =
      found === null
        ? {
            ...companion,
            conjunctionDays: companion.timePeriastronDays + conjunctionDelayDays(companion),
            transit: null,
          }
        : startFromEphemeris(found.ephemeris, companion);
    return plan(letter, start, found, { circular, pulls: true });
  });
  // A transit that the velocities do not show stands for itself; where its period is known, what it may pull is fitted.
  for (const found of unowned) {
    const { letter, periodDays } = found.ephemeris;
    const semiAmplitudeMps = START_PULL * velocity.part.scales.amplitudeScaleMps;
    const start = { ...startFromEphemeris(found.ephemeris, null), semiAmplitudeMps };
    planned.push(plan(letter, start, found, { circular: true, pulls: periodDays !== null }));
  }
  return planned;
}

/** From transit to occultation, days, where the case wants occultations fitted. */
function lagOf(start: PlannedCompanion['start'], choice: PlannedCompanion['choice']): number | null {
  return choice?.transit?.occultation === true
    ? start.periodDays * occultationPhase(start.eccentricity, start.argPeriastronStarRad)
    : null;
}

/** The same companions with what a fit has found of them. */
export function refinedBy(fit: JointFit, companions: readonly PlannedCompanion[]): PlannedCompanion[] {
  const { natural, density } = fit;
  density.coordinates.read(fit.maximum.position);
  const { transit, index } = density.coordinates;
  return companions.map((companion, c) => {
    const base = index.companion(c);
    const k = natural[base + SHAPE]!;
    const h = natural[base + SHAPE + 1]!;
    const orbit = {
      periodDays: Math.exp(natural[base + LOG_PERIOD]!),
      conjunctionDays: natural[base + CONJUNCTION]!,
      eccentricity: Math.hypot(k, h),
      argPeriastronStarRad: Math.hypot(k, h) > 0 ? Math.atan2(h, k) : Math.PI / 2,
      semiAmplitudeMps: natural[base + AMPLITUDE]!,
    };
    const start = {
      ...orbit,
      transit: fit.recipe.companions[c]!.transits
        ? {
            durationDays:
              durationOf(orbit, transit.subarray(c * TRANSIT_COORDINATES, (c + 1) * TRANSIT_COORDINATES)) ??
              companion.start.transit!.durationDays,
            depth: companion.start.transit!.depth,
          }
        : null,
    };
    return { ...companion, start, occultationLagDays: lagOf(start, companion.choice) };
  });
}

/** First to last contact, days; `null` where the discs do not meet. */
function durationOf(
  orbit: {
    readonly periodDays: number;
    readonly eccentricity: number;
    readonly argPeriastronStarRad: number;
  },
  transit: Float64Array,
): number | null {
  const scaled = { ...orbit, scaledSemiMajorAxis: Math.exp(transit[6]!) };
  const inclinationRad = inclinationFromImpactParameterRad(transit[5]!, scaled);
  return totalDurationDays({ ...scaled, inclinationRad }, orbit.periodDays, transit[4]!);
}
