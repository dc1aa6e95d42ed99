/** From what a case says of a table to the request for it. */
import { isAbsolute, join } from 'node:path';
import type { TableEntry } from './case-table-schema.js';
import {
  FLUX_UNITS,
  type FluxUnit,
  type LightCurveChoice,
  type MidTimeChoice,
  type TableRequest,
} from './types.js';

function isFluxUnit(unit: string | undefined): unit is FluxUnit {
  return FLUX_UNITS.some((known) => known === unit);
}

/** Leaves out what is not stated, so that a request for velocities looks as it always did. */
function stated<T extends object>(choices: T): Partial<T> {
  return Object.fromEntries(Object.entries(choices).filter(([, value]) => value !== undefined)) as Partial<T>;
}

export function toRequest(table: TableEntry, folder: string): TableRequest {
  const { error, ...others } = table.columns ?? {};
  const holdsOther = table.holds !== undefined && table.holds !== 'velocities';
  const { flux, magnitude, exposure, cycle, kind } = others;
  const isOther =
    holdsOther || [flux, magnitude, exposure, cycle, kind].some((column) => column !== undefined);
  const columns: Record<string, string> = {};
  for (const [meaning, column] of Object.entries({
    ...others,
    [isOther ? 'error' : 'velocity-error']: error,
  }))
    if (column !== undefined) columns[meaning] = String(column);
  const lightCurve = stated<LightCurveChoice>({
    fluxUnit: isFluxUnit(table.unit) ? table.unit : undefined,
    exposureDays: table.exposure,
    band: table.band,
    dilution: table.dilution,
    baseline: table.baseline,
    jitter: table.jitter,
    noise: table.noise,
  } as LightCurveChoice);
  const midTimes = stated<MidTimeChoice>({ companion: table.companion, kind: table.kind } as MidTimeChoice);
  return {
    path: isAbsolute(table.file) ? table.file : join(folder, table.file),
    instrument: table.instrument ?? null,
    timeScale: table.time?.scale ?? null,
    timeOffsetDays: table.time?.offsetDays ?? null,
    velocityUnit: table.unit === 'm/s' || table.unit === 'km/s' ? table.unit : null,
    columns,
    ...stated({ holds: table.holds, errorUnit: table['error-unit'] } as Pick<
      TableRequest,
      'holds' | 'errorUnit'
    >),
    ...(Object.keys(lightCurve).length === 0 ? {} : { lightCurve }),
    ...(Object.keys(midTimes).length === 0 ? {} : { midTimes }),
  };
}
