/** What went into a solution. */
import type { Observations } from '../../observations/photometry-types.js';
import type { Case } from '../../observations/types.js';
import type { SolutionRecord } from '../types.js';

/** The case file (which has no rows), then the tables by content. */
export function inputsOf(
  { path, sha256 }: Case,
  { velocities, lightCurves, midTimes }: Observations,
): SolutionRecord['provenance']['inputs'] {
  return [
    ...(path === null || sha256 === undefined ? [] : [{ path, sha256, rows: 0, used: 0 }]),
    ...[...(velocities?.tables ?? []), ...lightCurves, ...midTimes].map((table) => ({
      path: table.path,
      sha256: table.sha256,
      rows: table.rows,
      used: table.used,
    })),
  ];
}
