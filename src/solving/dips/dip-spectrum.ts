/** A stage of the search as it is reported and drawn. */
import { counted } from '../../observations/text.js';
import type { DipSpectrum } from '../transit-types.js';
import type { BoxSearch } from './box-search.js';

/** Multiples of the strongest period that a fold of the same dips shows too. */
const LARGEST_MULTIPLE = 6;
const RATIO_WITHIN = 0.003;

export function spectrumOf(
  search: BoxSearch,
  efficiency: Float64Array,
  peaks: readonly number[],
  companions: number,
): DipSpectrum {
  const periodsDays = search.grid.frequenciesPerDay.map((frequency) => 1 / frequency);
  const strongest = peaks.length === 0 ? 1 : periodsDays[peaks[0]!]!;
  return {
    title:
      companions === 0
        ? 'light curve without its slow trend'
        : `dips of ${counted(companions, 'companion')} masked`,
    periodsDays,
    efficiency,
    peaks: peaks.map((index, rank) => ({
      periodDays: periodsDays[index]!,
      efficiency: efficiency[index]!,
      kind: rank === 0 ? 'strongest' : (multipleOf(periodsDays[index]! / strongest) ?? 'independent'),
    })),
  };
}

/** The same spectrum with its peaks named by the period that was found in it: `found`, a multiple or fraction of it, or `independent`. */
export function namedBy(spectrum: DipSpectrum, periodDays: number): DipSpectrum {
  return {
    ...spectrum,
    peaks: spectrum.peaks.map((peak) => {
      const multiple = multipleOf(peak.periodDays / periodDays);
      return { ...peak, kind: multiple === 'P' ? 'found' : (multiple ?? 'independent') };
    }),
  };
}

/** `2P`, `P/3`, `3P/2` ... for a ratio near that of small integers, `null` for none. */
function multipleOf(ratio: number): string | null {
  for (let p = 1; p <= LARGEST_MULTIPLE; p++)
    for (let q = 1; q <= LARGEST_MULTIPLE; q++)
      if (Math.abs((ratio * q) / p - 1) < RATIO_WITHIN) {
        if (p === q) return 'P';
        return `${p === 1 ? '' : p}P${q === 1 ? '' : `/${q}`}`;
      }
  return null;
}
