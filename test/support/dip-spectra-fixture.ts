/** Invented spectra of a search for dips: noise, the period with its half and its double, and the last stage empty. */
import type { DipSpectrum } from '../../src/solving/transit-types.js';
import { randomSource } from './solved-fixture.js';

const LENGTH = 20_000;

/** @param periodsDays - of the companions in the order of finding; one stage each, and one more that finds nothing */
export function dipSpectra(periodsDays: readonly number[]): DipSpectrum[] {
  const random = randomSource(77);
  const periods = Float64Array.from({ length: LENGTH }, (_, i) => {
    const share = i / (LENGTH - 1);
    return 1 / (1 / 0.5 + (1 / 13.5 - 1 / 0.5) * share);
  });
  return [...periodsDays, null].map((own, index) => {
    const tops = own === null ? [] : [[own, 38, 'strongest'], [own / 2, 17, 'half period'], [2 * own, 21, 'double period']] as const; // prettier-ignore
    const efficiency = periods.map(
      (period) =>
        1.2 * random.gauss() +
        2 * random.uniform() +
        tops.reduce(
          (sum, [centre, height]) =>
            sum + height * Math.exp(-(((1 / period - 1 / centre) / (0.05 / 27)) ** 2)),
          0,
        ),
    );
    const best = efficiency.indexOf(Math.max(...efficiency));
    const peaks =
      own === null
        ? [{ periodDays: periods[best]!, efficiency: efficiency[best]!, kind: 'strongest' }]
        : tops
            .filter(([centre]) => centre < 13.5)
            .map(([periodDays, height, kind]) => ({ periodDays, efficiency: height + 1, kind }));
    return {
      title: index === 0 ? 'no companion removed' : `dips of ${'bcdef'.slice(0, index).split('').join(', ')} masked`, // prettier-ignore
      periodsDays: periods,
      efficiency,
      peaks,
    };
  });
}
