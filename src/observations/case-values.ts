/** Building blocks of the case schema: quantities with units, choices, and unions that keep precise messages. */
import * as z from 'zod';
import { readChoice, readMeasured, readSingle, type Reading } from './quantity.js';
import { didYouMean } from './suggest.js';
import { quoted } from './text.js';
import type { ElementChoice, Measured } from './types.js';
import type { QuantityKind } from './units.js';

/** What a custom issue carries beside its message. */
export interface IssueParams {
  readonly hint?: string;
}

type Context = z.core.$RefinementCtx;

export function complain(context: Context, message: string, hint = '', path: (string | number)[] = []): void {
  context.addIssue({ code: 'custom', message, params: { hint } satisfies IssueParams, path });
}

/** A mapping that knows no other keys. For an unknown key the message is the list of the allowed ones; `case-issues.ts` makes a sentence of it. */
export function mapping<const S extends z.core.$ZodLooseShape>(shape: S): z.ZodObject<S, z.core.$strict> {
  const keys = Object.keys(shape).join(', ');
  return z.strictObject(shape, { error: (issue) => (issue.code === 'unrecognized_keys' ? keys : undefined) });
}

/** Says what a value is, for "found ...". */
export function describeValue(value: unknown): string {
  if (value === undefined || value === null) return 'nothing';
  if (typeof value === 'string') return quoted(value);
  if (typeof value === 'number' || typeof value === 'boolean') return String(value);
  return Array.isArray(value) ? 'a list' : 'a mapping';
}

/** Limits of a quantity in canonical units; the sentence stands in the message. */
export interface Limits {
  readonly allows: (value: number) => boolean;
  readonly words: string;
}

export const POSITIVE: Limits = { allows: (value) => value > 0, words: 'must be > 0' };
export const NOT_NEGATIVE: Limits = { allows: (value) => value >= 0, words: 'must be >= 0' };
export const ANY: Limits = { allows: () => true, words: '' };
export const between = (low: number, high: number): Limits => ({
  allows: (value) => value >= low && value <= high,
  words: `must lie between ${low} and ${high}`,
});
export const ECCENTRICITY: Limits = {
  allows: (value) => value >= 0 && value < 1,
  words: 'must be at least 0 and below 1 (bound orbits only)',
};

function quantity<T>(
  kind: QuantityKind,
  limits: Limits,
  read: (written: string | number, kind: QuantityKind) => Reading<T>,
  bounds: (value: T) => number[],
): z.ZodType<T> {
  return z.unknown().transform((written, context): T => {
    if (typeof written !== 'string' && typeof written !== 'number') {
      complain(context, `found ${describeValue(written)}; a ${kind} is expected`);
      return z.NEVER;
    }
    const reading = read(written, kind);
    if (!reading.ok) {
      complain(context, reading.message, reading.hint);
      return z.NEVER;
    }
    if (!bounds(reading.value).every(limits.allows)) {
      complain(context, `found ${quoted(String(written))}; it ${limits.words}`);
      return z.NEVER;
    }
    return reading.value;
  });
}

/** `0.94 +- 0.03 M_sun`. */
export function measured(kind: QuantityKind, limits: Limits): z.ZodType<Measured> {
  return quantity(kind, limits, readMeasured, ({ value }) => [value]);
}

/** `180 m`. */
export function single(kind: QuantityKind, limits: Limits = ANY): z.ZodType<number> {
  return quantity(kind, limits, readSingle, (value) => [value]);
}

/** A fixed number, a range, or a value with its uncertainty (a prior). */
export function choice(kind: QuantityKind, limits: Limits = ANY): z.ZodType<ElementChoice> {
  return quantity(kind, limits, readChoice, (read) =>
    read.kind === 'range' ? [read.low, read.high] : [read.value],
  );
}

/** One of several words, with "did you mean". */
export function word<const W extends string>(words: readonly W[]): z.ZodType<W> {
  return z.unknown().transform((written, context): W => {
    const found = words.find((candidate) => candidate === written);
    if (found !== undefined) return found;
    complain(
      context,
      `found ${describeValue(written)}; one of ${words.join(', ')} is expected`,
      typeof written === 'string' ? didYouMean(written, words) : '',
    );
    return z.NEVER;
  });
}

/** Non-empty text of at most 200 characters. A number is taken as text (`target: 4711`). */
export const text: z.ZodType<string> = z.unknown().transform((written, context): string => {
  const value = typeof written === 'number' ? String(written) : written;
  if (typeof value === 'string' && value.trim() !== '' && value.length <= 200) return value.trim();
  complain(context, `found ${describeValue(written)}; text of 1 to 200 characters is expected`);
  return z.NEVER;
});

/** `mock` writes into its own folder only: a name with a path in it is refused. */
export const plainFileName: z.ZodType<string> = text.superRefine((name, context) => {
  if (/[/\\]|^\.\.?$|[\u0000-\u001f]/.test(name))
    complain(context, `found ${quoted(name)}; a plain file name is expected, without a folder`);
});

export function wholeNumber(low: number, high: number): z.ZodType<number> {
  return z.unknown().transform((written, context): number => {
    if (typeof written === 'number' && Number.isInteger(written) && written >= low && written <= high)
      return written;
    complain(context, `found ${describeValue(written)}; a whole number from ${low} to ${high} is expected`);
    return z.NEVER;
  });
}

/** `auto`, `true` or `false` (also `yes` and `no`). */
export const autoOrBoolean: z.ZodType<boolean | 'auto'> = z
  .unknown()
  .transform((written, context): boolean | 'auto' => {
    if (written === true || written === 'yes') return true;
    if (written === false || written === 'no') return false;
    if (written === 'auto') return 'auto';
    complain(context, `found ${describeValue(written)}; auto, true or false is expected`);
    return z.NEVER;
  });

/** `true` or `false` (also `yes` and `no`). */
export const yesOrNo: z.ZodType<boolean> = z.unknown().transform((written, context): boolean => {
  if (written === true || written === 'yes') return true;
  if (written === false || written === 'no') return false;
  complain(context, `found ${describeValue(written)}; true or false is expected`);
  return z.NEVER;
});

/** Checks a value with the schema that its shape asks for, so that the messages are those of that schema alone. */
export function byShape<T>(schemaFor: (value: unknown) => z.ZodType<T>): z.ZodType<T> {
  return z.unknown().transform((value, context): T => {
    const result = schemaFor(value).safeParse(value);
    if (result.success) return result.data;
    for (const { input, ...issue } of result.error.issues)
      context.addIssue({ ...issue, input: input ?? value } as Parameters<Context['addIssue']>[0]);
    return z.NEVER;
  });
}
