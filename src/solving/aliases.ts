/** Where the aliases of a frequency lie [DawsonFabrycky2010]. */
import { SIDEREAL_DAY_PER_DAY, SYNODIC_MONTH_PER_DAY, YEAR_PER_DAY } from './window-function.js';

export interface Alias {
  readonly frequencyPerDay: number;
  readonly kind: string;
}

/** Sampling frequencies of observers on the ground and the combinations that are often strong. */
const SAMPLINGS: readonly { readonly frequencyPerDay: number; readonly kind: string }[] = [
  { frequencyPerDay: SIDEREAL_DAY_PER_DAY, kind: 'sidereal-day alias' },
  { frequencyPerDay: 1, kind: 'solar-day alias' },
  { frequencyPerDay: YEAR_PER_DAY, kind: 'year alias' },
  { frequencyPerDay: SYNODIC_MONTH_PER_DAY, kind: 'synodic-month alias' },
  { frequencyPerDay: 1 + SIDEREAL_DAY_PER_DAY, kind: 'half-day alias' },
  { frequencyPerDay: 2 * SIDEREAL_DAY_PER_DAY, kind: 'half-sidereal-day alias' },
  { frequencyPerDay: 2, kind: 'half-solar-day alias' },
  { frequencyPerDay: SIDEREAL_DAY_PER_DAY + YEAR_PER_DAY, kind: 'day-and-year alias' },
  { frequencyPerDay: 1 - YEAR_PER_DAY, kind: 'day-and-year alias' },
  { frequencyPerDay: 1 + SYNODIC_MONTH_PER_DAY, kind: 'day-and-month alias' },
  { frequencyPerDay: 1 - SYNODIC_MONTH_PER_DAY, kind: 'day-and-month alias' },
  { frequencyPerDay: 2 * YEAR_PER_DAY, kind: 'half-year alias' },
];

/**
 * Alias frequencies |f + n f_s| of a signal, n = +-1 for each sampling frequency, and the half and double period.
 *
 * @param resolutionPerDay - 1/span; aliases closer together than half of it are one, named by the first
 */
export function aliasesOf(frequencyPerDay: number, resolutionPerDay: number): Alias[] {
  const all: Alias[] = [];
  for (const sampling of SAMPLINGS) {
    for (const sign of [-1, 1]) {
      all.push({
        frequencyPerDay: Math.abs(frequencyPerDay + sign * sampling.frequencyPerDay),
        kind: sampling.kind,
      });
    }
  }
  all.push({ frequencyPerDay: 2 * frequencyPerDay, kind: 'half period' });
  all.push({ frequencyPerDay: frequencyPerDay / 2, kind: 'double period' });
  const distinct: Alias[] = [];
  for (const alias of all) {
    if (alias.frequencyPerDay < 0.5 * resolutionPerDay) continue;
    if (Math.abs(alias.frequencyPerDay - frequencyPerDay) < 0.75 * resolutionPerDay) continue;
    if (
      distinct.some(
        (other) => Math.abs(other.frequencyPerDay - alias.frequencyPerDay) < 0.5 * resolutionPerDay,
      )
    )
      continue;
    distinct.push(alias);
  }
  return distinct;
}

/** What a frequency is, seen from another: the kind of alias, or null. */
export function aliasKind(
  frequencyPerDay: number,
  ofFrequencyPerDay: number,
  resolutionPerDay: number,
): string | null {
  const match = aliasesOf(ofFrequencyPerDay, resolutionPerDay).find(
    (alias) => Math.abs(alias.frequencyPerDay - frequencyPerDay) < 0.6 * resolutionPerDay,
  );
  return match?.kind ?? null;
}
