/** The search for dips in the light curves of a case: options from the case, times back on BJD. */
import { GM_SUN_M3_S2, GRAVITATIONAL_CONSTANT, R_SUN_M } from '../../orbit/constants.js';
import type { LightCurveTable } from '../../observations/photometry-types.js';
import type { Case } from '../../observations/types.js';
import { dipDataOf } from './dip-data.js';
import { searchDips, type DipProgress } from './search-dips.js';
import type { DipSearch } from './types.js';

export interface TableDips {
  /** Day that the times of `search` are counted from, BJD_TDB. */
  readonly epochBjdTdb: number;
  readonly points: number;
  readonly spanDays: number;
  readonly search: DipSearch;
}

/** Mean density of the star as the case states it, or from its mass and radius, g/cm3; `null` where neither is given. */
export function statedDensityGcc({ star }: Case): number | null {
  if (star.densityGcc != null) return star.densityGcc.value;
  if (star.massSolar === null || star.radiusSolar === null) return null;
  const volume = (4 / 3) * Math.PI * (star.radiusSolar.value * R_SUN_M) ** 3;
  return (star.massSolar.value * GM_SUN_M3_S2) / GRAVITATIONAL_CONSTANT / volume / 1000;
}

/**
 * @param tables - at least one, with points at two times or more
 * @throws RangeError for less
 */
export function searchTables(
  theCase: Case,
  tables: readonly LightCurveTable[],
  progress: DipProgress = () => undefined,
): TableDips {
  let first = Infinity;
  let last = -Infinity;
  let points = 0;
  for (const { timesBjdTdb } of tables) {
    points += timesBjdTdb.length;
    first = Math.min(first, timesBjdTdb[0] ?? Infinity);
    last = Math.max(last, timesBjdTdb.at(-1) ?? -Infinity);
  }
  const epochBjdTdb = Math.floor(0.5 * (first + last));
  const { companions, maximumCompanions, periodRangeDays } = theCase;
  const wanted = companions === 'auto' ? maximumCompanions : companions;
  const search = searchDips(
    dipDataOf(tables, epochBjdTdb),
    {
      shortestPeriodDays: periodRangeDays.low,
      longestPeriodDays: periodRangeDays.high,
      starDensityGcc: statedDensityGcc(theCase),
      maximumCompanions: Math.max(1, typeof wanted === 'number' ? wanted : wanted.length),
    },
    progress,
  );
  return { epochBjdTdb, points, spanDays: last - first, search };
}
