/** A simulated table of mid-transit times, such as observers collect over the years. */
import { UsageError } from '../errors.js';
import type { RandomStream } from '../numerics/random.js';
import type { MockMidTimes } from '../observations/mock-types.js';
import { tableText, type TableOrigin } from './mock-table.js';
import { conjunctionsBetween } from './mock-transits.js';

/** About a second. */
const TIME_DECIMALS = 5;

/**
 * Distinct transits at random; formal errors are log-normal about `errorDays`, the noise is Gaussian with the printed error.
 * Cycles count from the first transit of the table.
 *
 * @returns text and number of rows
 * @throws UsageError when there are fewer transits between the dates than wanted
 */
export function observeMidTimes(
  wanted: MockMidTimes,
  orbit: { readonly periodDays: number; readonly conjunctionBjdTdb: number },
  random: RandomStream,
  about: TableOrigin,
): { readonly text: string; readonly rows: number } {
  const { table, count, errorDays, errorScatter, fromBjdTdb, toBjdTdb, sources } = wanted;
  const transits = conjunctionsBetween(orbit, fromBjdTdb, toBjdTdb);
  if (transits.length < count)
    throw new UsageError(
      `mid-times ${table}: ${count} are asked for, but only ${transits.length} transits happen between the dates`,
      { hint: 'lower the count or widen the dates' },
    );
  const order = Uint32Array.from(transits, (_, index) => index);
  random.shuffle(order);
  const chosen = [...order.subarray(0, count).sort()].map((index) => transits[index]!);
  const decimals = Math.max(TIME_DECIMALS, Math.min(9, 1 - Math.floor(Math.log10(errorDays))));
  const hasSources = sources.length > 0;
  const rows = chosen.map(({ cycle, timeBjdTdb }) => {
    const drawn = errorDays * Math.exp(errorScatter * random.normal());
    const error = Math.max(10 ** -decimals, Number(drawn.toFixed(decimals)));
    return [
      (timeBjdTdb + error * random.normal()).toFixed(decimals),
      error.toFixed(decimals),
      String(cycle - chosen[0]!.cycle),
      ...(hasSources ? [plainCell(sources[random.integerBelow(sources.length)]!)] : []),
    ];
  });
  return {
    rows: rows.length,
    text: tableText(
      ['mid-transit times'],
      about,
      ['Times are mid-transit, BJD_TDB in days; cycles count from the first of them.'],
      ['BJD_TDB', 'error (d)', 'cycle', ...(hasSources ? ['source'] : [])],
      rows,
    ),
  };
}

/** A label that needs no quotes between commas. */
function plainCell(label: string): string {
  return label.replace(/[\s",;\p{Cc}\u2028\u2029]+/gu, ' ').trim();
}
