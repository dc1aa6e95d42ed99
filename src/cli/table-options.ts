/** What the options of a call say about its tables. */
import { plainLabel } from '../dossier/escape.js';
import { UsageError } from '../errors.js';
import { readTimeLabel, type TimeLabel } from '../observations/index.js';
import {
  COLUMN_MEANINGS,
  FLUX_UNITS,
  TABLE_CONTENTS,
  TIME_SCALES,
  type ColumnMeaning,
  type LightCurveChoice,
  type TableContent,
  type TableRequest,
} from '../observations/types.js';
import type { CommandArguments } from './command-arguments.js';

/** `time=BJD,velocity=2` as column choices. */
export function parseColumns(text: string): TableRequest['columns'] {
  const allowed: readonly ColumnMeaning[] = COLUMN_MEANINGS;
  const columns: Record<string, string> = {};
  for (const pair of text.split(',')) {
    const [name = '', ...rest] = pair.split('=');
    const meaning = allowed.find((candidate) => candidate === name.trim().toLowerCase());
    const column = rest.join('=').trim();
    if (meaning === undefined || column === '' || meaning in columns)
      throw new UsageError(
        `--columns has "${plainLabel(pair, 60)}"${meaning !== undefined && meaning in columns ? ' a second time' : ''}`,
        {
          allowed: `MEANING=COLUMN pairs separated by commas; meanings: ${allowed.join(', ')}`,
          hint: '--columns "time=BJD,velocity=2,velocity-error=3"',
        },
      );
    columns[meaning] = column;
  }
  return columns;
}

/** `BJD_TDB`, or with the days that the table leaves out: `BJD_TDB - 2457000`. */
function timeChoice(given: CommandArguments): TimeLabel | null {
  const text = given.text('time-scale');
  if (text === null) return null;
  const label = readTimeLabel(text);
  if (label === null || label.scale === 'unknown')
    throw new UsageError(`--time-scale is "${plainLabel(text, 60)}"`, {
      allowed: TIME_SCALES.filter((scale) => scale !== 'unknown').join(', '),
      hint: 'days that the table leaves out may follow: --time-scale "BJD_TDB - 2457000"',
    });
  return label;
}

/** `light curve`, also written `light-curve`. */
function contentChoice(given: CommandArguments): TableContent | null {
  const text = given.text('holds');
  if (text === null) return null;
  const found = TABLE_CONTENTS.find(
    (content) => content.replace('-', ' ') === text.trim().toLowerCase().replace('-', ' '),
  );
  if (found !== undefined) return found;
  throw new UsageError(`--holds is "${plainLabel(text, 60)}"`, {
    allowed: TABLE_CONTENTS.join(', '),
    hint: 'tugline check TABLE --holds "light curve"',
  });
}

/** Longer exposures are none; a number without a unit was meant in seconds, perhaps. */
const LONGEST_EXPOSURE_DAYS = 0.5;

function exposureChoice(given: CommandArguments): number | null {
  const exposure = given.quantity('exposure', 'duration');
  if (exposure === null) return null;
  if (exposure.value > LONGEST_EXPOSURE_DAYS)
    throw new UsageError(`--exposure is ${exposure.value} d`, {
      allowed: `up to ${LONGEST_EXPOSURE_DAYS} d`,
      hint: 'write the unit: --exposure "60 s"',
    });
  return exposure.value;
}

/** What the options say about every table of the call. */
export function requestChoices(
  given: CommandArguments,
): Partial<TableRequest> & { readonly lightCurve: LightCurveChoice } {
  const columns = given.text('columns');
  const instrument = given.text('instrument');
  const time = timeChoice(given);
  const unit = given.choice('unit', ['m/s', 'km/s', ...FLUX_UNITS]);
  const velocityUnit = unit === 'm/s' || unit === 'km/s' ? unit : null;
  const fluxUnit = FLUX_UNITS.find((known) => known === unit) ?? null;
  const holds = contentChoice(given);
  const exposureDays = exposureChoice(given);
  const band = given.text('band');
  return {
    ...(holds === null ? {} : { holds }),
    lightCurve: {
      ...(fluxUnit === null ? {} : { fluxUnit }),
      ...(exposureDays === null ? {} : { exposureDays }),
      ...(band === null ? {} : { band }),
    },
    ...(columns === null ? {} : { columns: parseColumns(columns) }),
    ...(instrument === null ? {} : { instrument }),
    ...(time === null ? {} : { timeScale: time.scale }),
    ...(time === null || time.offsetDays === null ? {} : { timeOffsetDays: time.offsetDays }),
    ...(velocityUnit === null ? {} : { velocityUnit }),
  };
}
