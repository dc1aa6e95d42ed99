/** What a case may say of one table, whatever it holds. */
import * as z from 'zod';
import {
  byShape,
  choice,
  complain,
  describeValue,
  mapping,
  measured,
  single,
  text,
  word,
  type Limits,
} from './case-values.js';
import { didYouMean, plainWord } from './suggest.js';
import { quoted } from './text.js';
import { readTimeLabel, type TimeLabel } from './time-label.js';
import { ERROR_UNITS, FLUX_UNITS, TABLE_CONTENTS } from './types.js';
import type { ColumnMeaning, ElementChoice, ErrorUnit, FluxUnit, Measured, TableContent } from './types.js';

/** A label of the header, or a position from 1. */
type ColumnName = string | number;

const columnName: z.ZodType<ColumnName> = z.union([z.string().min(1).max(200), z.int().min(1).max(500)], {
  error: 'a label of the header, or a position from 1, is expected',
});

const timeDeclaration: z.ZodType<TimeLabel> = z
  .string({ error: 'a time scale is expected, e.g. BJD_TDB or BJD_TDB - 2450000' })
  .transform((written, context): TimeLabel => {
    const label = readTimeLabel(written);
    if (label !== null && label.scale !== 'unknown') return label;
    complain(
      context,
      `found ${quoted(written)}; a time scale is expected`,
      'one of BJD_TDB, BJD_UTC, BJD, HJD_UTC, HJD_TT, HJD, JD_UTC, JD_TT, JD, MJD, with an offset if need be: BJD_TDB - 2450000',
    );
    return z.NEVER;
  });

/** What a column may be called in a case: `error` is that of whatever the table holds. */
export type ColumnKey = Exclude<ColumnMeaning, 'velocity-error'>;

export interface TableEntry {
  readonly file: string;
  readonly holds?: TableContent | undefined;
  readonly instrument?: string | undefined;
  readonly unit?: 'm/s' | 'km/s' | FluxUnit | undefined;
  readonly 'error-unit'?: ErrorUnit | undefined;
  readonly time?: TimeLabel | undefined;
  readonly columns?: Readonly<Partial<Record<ColumnKey, ColumnName | undefined>>> | undefined;
  readonly exposure?: number | undefined;
  readonly band?: string | undefined;
  readonly dilution?: Measured | undefined;
  readonly baseline?: readonly string[] | 'auto' | undefined;
  readonly jitter?: ElementChoice | undefined;
  readonly noise?: 'white' | 'correlated' | undefined;
  readonly companion?: string | undefined;
  readonly kind?: 'transit' | 'occultation' | undefined;
}

/** `light curve`, also written `light-curve`. */
const holds: z.ZodType<TableContent> = z.unknown().transform((written, context): TableContent => {
  const found = TABLE_CONTENTS.find(
    (content) => typeof written === 'string' && plainWord(content) === plainWord(written),
  );
  if (found !== undefined) return found;
  const hint = typeof written === 'string' ? didYouMean(written, TABLE_CONTENTS) : '';
  complain(context, `found ${describeValue(written)}; one of ${TABLE_CONTENTS.join(', ')} is expected`, hint);
  return z.NEVER;
});

const EXPOSURE: Limits = {
  allows: (value) => value >= 0 && value <= 0.5,
  words: 'must lie between 0 and 0.5 d; write its unit: 60 s, 2 min',
};
const DILUTION: Limits = {
  allows: (value) => value >= 0 && value < 1,
  words: 'must be at least 0 and below 1',
};
const JITTER: Limits = { allows: (value) => value >= 0, words: 'must be >= 0' };

/** `auto`, `none`, or the terms beside a constant. */
const baseline: z.ZodType<readonly string[] | 'auto'> = byShape<readonly string[] | 'auto'>((value) => {
  if (Array.isArray(value)) return z.array(text).max(20, { error: 'at most 20 terms are allowed' });
  return text.transform((written): readonly string[] | 'auto' =>
    written === 'auto' ? 'auto' : written === 'none' ? [] : [written],
  );
});

const tableMapping: z.ZodType<TableEntry> = mapping({
  file: text,
  holds: holds.optional(),
  instrument: text.optional(),
  unit: word(['m/s', 'km/s', ...FLUX_UNITS]).optional(),
  'error-unit': word(ERROR_UNITS).optional(),
  time: timeDeclaration.optional(),
  columns: mapping({
    time: columnName.optional(),
    velocity: columnName.optional(),
    error: columnName.optional(),
    instrument: columnName.optional(),
    quality: columnName.optional(),
    flux: columnName.optional(),
    magnitude: columnName.optional(),
    exposure: columnName.optional(),
    band: columnName.optional(),
    cycle: columnName.optional(),
    source: columnName.optional(),
    kind: columnName.optional(),
  }).optional(),
  exposure: single('duration', EXPOSURE).optional(),
  band: text.optional(),
  dilution: measured('relative flux', DILUTION).optional(),
  baseline: baseline.optional(),
  jitter: choice('relative flux', JITTER).optional(),
  noise: word(['white', 'correlated']).optional(),
  companion: z
    .string()
    .regex(/^[b-z]$/, { error: 'a letter from b to z is expected' })
    .optional(),
  kind: word(['transit', 'occultation']).optional(),
});

/** A file name alone, or a mapping with what is declared of it. */
export const table: z.ZodType<TableEntry> = byShape<TableEntry>((value) =>
  typeof value === 'object' && value !== null ? tableMapping : text.transform((file) => ({ file })),
);
