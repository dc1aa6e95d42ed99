/** Numbers that tell an observer whether the program has understood a table. */
import { timeScaleError } from './time-scale.js';
import type { TimeScale, VelocityTable } from './types.js';
import { median } from './validate.js';

/** Times closer than this belong to one night. */
const NIGHT_GAP_DAYS = 0.5;
/** A longer pause ends a season: the target was behind the Sun, or nobody looked. */
const SEASON_GAP_DAYS = 60;

export interface InstrumentSummary {
  readonly name: string;
  readonly count: number;
  readonly firstBjdTdb: number;
  readonly lastBjdTdb: number;
  readonly medianVelocityMps: number;
  readonly lowestVelocityMps: number;
  readonly highestVelocityMps: number;
  readonly medianErrorMps: number;
}

export interface TableSummary {
  readonly path: string;
  readonly rows: number;
  readonly used: number;
  readonly timeScale: TimeScale;
  /** How far the dates may be off, taken as BJD_TDB. */
  readonly timeErrorSeconds: number;
  readonly firstBjdTdb: number;
  readonly lastBjdTdb: number;
  readonly spanDays: number;
  /** Median time from one row to the next, in order of time; `null` with one row. */
  readonly medianCadenceDays: number | null;
  /** Groups of rows without a pause of half a day. */
  readonly nights: number;
  /** Pauses of 60 days or more, in order of time. */
  readonly seasonGaps: readonly {
    readonly fromBjdTdb: number;
    readonly toBjdTdb: number;
    readonly days: number;
  }[];
  readonly instruments: readonly InstrumentSummary[];
  readonly lowestVelocityMps: number;
  readonly highestVelocityMps: number;
  readonly medianErrorMps: number;
}

export function describeTable(table: VelocityTable): TableSummary {
  const times = Float64Array.from(table.timesBjdTdb).sort();
  const first = times[0]!;
  const last = times.at(-1)!;
  const steps = times.subarray(1).map((time, place) => time - times[place]!);
  const [lowest, highest] = extremes(table.velocitiesMps);
  return {
    path: table.path,
    rows: table.rows,
    used: table.used,
    timeScale: table.timeScale,
    timeErrorSeconds: timeScaleError(table.timeScale).maximumSeconds,
    firstBjdTdb: first,
    lastBjdTdb: last,
    spanDays: last - first,
    medianCadenceDays: steps.length === 0 ? null : median(steps),
    nights: 1 + steps.filter((step) => step >= NIGHT_GAP_DAYS).length,
    seasonGaps: [...steps.entries()]
      .filter(([, days]) => days >= SEASON_GAP_DAYS)
      .map(([place, days]) => ({ fromBjdTdb: times[place]!, toBjdTdb: times[place + 1]!, days })),
    instruments: table.instruments.map((name, index) => describeInstrument(table, name, index)),
    lowestVelocityMps: lowest,
    highestVelocityMps: highest,
    medianErrorMps: median(table.sigmasMps),
  };
}

function describeInstrument(table: VelocityTable, name: string, index: number): InstrumentSummary {
  const own = (values: Float64Array): Float64Array =>
    values.filter((_, row) => table.instrumentOf[row] === index);
  const velocities = own(table.velocitiesMps);
  const [firstBjdTdb, lastBjdTdb] = extremes(own(table.timesBjdTdb));
  const [lowest, highest] = extremes(velocities);
  return {
    name,
    count: velocities.length,
    firstBjdTdb,
    lastBjdTdb,
    medianVelocityMps: median(velocities),
    lowestVelocityMps: lowest,
    highestVelocityMps: highest,
    medianErrorMps: median(own(table.sigmasMps)),
  };
}

/** Smallest and largest; a loop, because spreading a long array into Math.min overflows the stack. */
function extremes(values: Float64Array): [number, number] {
  let [lowest, highest] = [Infinity, -Infinity];
  for (const value of values) {
    if (value < lowest) lowest = value;
    if (value > highest) highest = value;
  }
  return [lowest, highest];
}
