/** What a solution rests on: velocities, light curves, mid-times, alone or together. */
import type { Solved } from '../solving/types.js';
import { significant } from './numbers.js';
import { counted, listed } from './titles.js';

/** A solution without light curves counts as one of velocities, however few. */
export function hasVelocities({ velocities, photometry }: Solved): boolean {
  return velocities.count > 0 || photometry === undefined;
}

/** First and last time of all observations that were fitted, BJD_TDB, days; the epoch twice where there are none. */
export function observedSpan({ velocities, photometry, record }: Solved): { first: number; last: number } {
  let [first, last] = [Infinity, -Infinity];
  const include = (times: Float64Array): void => {
    for (const time of times) {
      if (time < first) first = time;
      if (time > last) last = time;
    }
  };
  include(velocities.timesBjdTdb);
  for (const { timesBjdTdb } of photometry?.whole ?? []) include(timesBjdTdb);
  for (const { timesBjdTdb } of photometry?.fitted ?? []) include(timesBjdTdb);
  for (const { timesBjdTdb } of photometry?.midTimes ?? []) include(timesBjdTdb);
  return last >= first ? { first, last } : { first: record.epoch, last: record.epoch };
}

/** Mid-times that came from tables; those of light curves are not counted twice. */
function tableTimes({ record }: Solved): number {
  return (record.photometry?.midTimes ?? []).reduce((sum, { count }) => sum + count, 0);
}

/** `38 velocities, three light curves with 2400 points and 14 mid-times`; plain text. */
export function observedWords(solved: Solved): string {
  const { velocities, record } = solved;
  const tables = record.photometry?.lightCurves ?? [];
  const points = tables.reduce((sum, { count }) => sum + count, 0);
  const times = tableTimes(solved);
  return listed([
    ...(velocities.count > 0 ? [`${velocities.count} velocities`] : []),
    ...(tables.length > 0
      ? [`${counted(tables.length, 'light curve')} with ${points} points in the fit`]
      : []),
    ...(times > 0 ? [counted(times, 'mid-time')] : []),
  ]);
}

/** `2.1 m/s`, `940 .. 1900 ppm of the flux`, `0.7 min of the mid-times`: rms of the residuals of each kind of data. */
export function scatterParts(solved: Solved): string[] {
  const { fit, photometry } = solved.record;
  const ppm = (photometry?.lightCurves ?? []).map(({ rms }) => rms);
  const minutes = (photometry?.midTimes ?? []).map(({ rms }) => rms);
  return [
    ...(hasVelocities(solved) ? [`${significant(fit.rms, 3)} m/s`] : []),
    ...(ppm.length > 0 ? [`${rangeWords(ppm, 'ppm')} of the flux`] : []),
    ...(minutes.length > 0 ? [`${rangeWords(minutes, 'min')} of the mid-times`] : []),
  ];
}

/** `rms 2.1 m/s, 940 ppm`; empty where nothing is known. */
export function scatterWords(solved: Solved): string {
  const parts = scatterParts(solved).map((part) => part.replace(/ of the .*/, ''));
  return parts.length === 0 ? '' : `rms ${parts.join(', ')}`;
}

/** `940 ppm`, or `940 .. 1900 ppm` over several tables. */
function rangeWords(values: readonly number[], unit: string): string {
  const [low, high] = [significant(Math.min(...values), 3), significant(Math.max(...values), 3)];
  return low === high ? `${low} ${unit}` : `${low} .. ${high} ${unit}`;
}
