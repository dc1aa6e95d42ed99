/** Reads what a person writes for a quantity: `0.94 +- 0.03 M_sun`, `41.2 .. 41.9 d`, `112 deg`, `5480`. */
import { UsageError } from '../errors.js';
import { nearest } from './suggest.js';
import { quoted } from './text.js';
import type { ElementChoice, Measured } from './types.js';
import { allowedUnits, canonicalUnit, unitFactor, type QuantityKind } from './units.js';

/** A value, or the words that say why there is none. */
export type Reading<T> =
  | { readonly ok: true; readonly value: T }
  | { readonly ok: false; readonly message: string; readonly hint: string };

const NUMBER = String.raw`[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?`;
const NUMBER_THEN_UNIT = new RegExp(`^(${NUMBER})\\s*(.*)$`, 's');
const LONGEST = 200;

function fail<T>(message: string, hint = ''): Reading<T> {
  return { ok: false, message, hint };
}

/** `41.2 d` in canonical units. `sharedUnit` is the unit written after the other number of a pair. */
function readPart(text: string, kind: QuantityKind, sharedUnit = ''): Reading<number> {
  const trimmed = text.trim();
  const match = NUMBER_THEN_UNIT.exec(trimmed);
  if (match === null) {
    if (trimmed === '') return fail('a number is missing');
    return fail(`found ${quoted(trimmed)} where a number is expected`, `write it as ${example(kind)}`);
  }
  if (/^,\d/.test(match[2]!))
    return fail(`found ${quoted(trimmed)}: a decimal comma`, 'write the number with a decimal point');
  const unit = match[2]!.trim() === '' ? sharedUnit : match[2]!.trim();
  const factor = unitFactor(kind, unit);
  if (factor === null) {
    const allowed = allowedUnits(kind);
    const near = nearest(unit, allowed.split(', '));
    const hint =
      kind === 'number'
        ? 'leave the unit out'
        : `allowed: ${allowed}${near === null ? '' : `; did you mean "${near}"?`}`;
    return fail(`found the unit ${quoted(unit)}, which does not fit a ${kind}`, hint);
  }
  const value = Number(match[1]!) * factor;
  if (!Number.isFinite(value)) return fail(`found ${quoted(trimmed)}: the number is too large`);
  return { ok: true, value };
}

function example(kind: QuantityKind): string {
  const unit = canonicalUnit(kind);
  return unit === '' ? '0.3 or 0.3 +- 0.05' : `4.2 ${unit} or 4.2 +- 0.1 ${unit}`;
}

function unitOf(text: string): string {
  return NUMBER_THEN_UNIT.exec(text.trim())?.[2]?.trim() ?? '';
}

function plain(written: string | number): Reading<string> {
  if (typeof written === 'number')
    return Number.isFinite(written)
      ? { ok: true, value: String(written) }
      : fail(`found ${written}; a finite number is needed`);
  if (written.length > LONGEST) return fail(`found ${quoted(written)}: too long for a number`);
  return {
    ok: true,
    value: written
      .replace(/−/g, '-')
      .replace(/\u00a0/g, ' ')
      .trim(),
  };
}

/** A fixed number, `value +- sigma`, or `low .. high`, in canonical units; the order of the bounds and the sign of sigma are checked. */
export function readChoice(written: string | number, kind: QuantityKind): Reading<ElementChoice> {
  const clean = plain(written);
  if (!clean.ok) return clean;
  const text = clean.value;
  const range = text.split(/\.\.+|…/);
  const pair = text.split(/\+\s*\/?\s*-|±/);
  if (range.length > 1) {
    if (range.length !== 2 || pair.length > 1)
      return fail(`found ${quoted(text)}; a range is written low .. high`);
    const low = readPart(range[0]!, kind, unitOf(range[1]!));
    if (!low.ok) return low;
    const high = readPart(range[1]!, kind);
    if (!high.ok) return high;
    if (low.value >= high.value)
      return fail(`found ${quoted(text)}; the first number of a range must be the smaller one`);
    return { ok: true, value: { kind: 'range', low: low.value, high: high.value } };
  }
  if (pair.length > 1) {
    if (pair.length !== 2)
      return fail(`found ${quoted(text)}; a value with its uncertainty is written value +- sigma`);
    const sharedUnit = unitOf(pair[1]!);
    const value = readPart(pair[0]!, kind, sharedUnit);
    if (!value.ok) return value;
    const sigma = readPart(pair[1]!, kind, unitOf(pair[0]!));
    if (!sigma.ok) return sigma;
    if (sigma.value < 0) return fail(`found ${quoted(text)}; an uncertainty must be >= 0`);
    if (sigma.value === 0) return { ok: true, value: { kind: 'fixed', value: value.value } };
    return { ok: true, value: { kind: 'prior', value: value.value, sigma: sigma.value } };
  }
  const value = readPart(text, kind);
  return value.ok ? { ok: true, value: { kind: 'fixed', value: value.value } } : value;
}

/** `value` or `value +- sigma`; sigma is 0 when not written. */
export function readMeasured(written: string | number, kind: QuantityKind): Reading<Measured> {
  const choice = readChoice(written, kind);
  if (!choice.ok) return choice;
  if (choice.value.kind === 'range')
    return fail(
      `found the range ${quoted(String(written))}; one value is needed`,
      `write it as ${example(kind)}`,
    );
  return {
    ok: true,
    value: { value: choice.value.value, sigma: choice.value.kind === 'prior' ? choice.value.sigma : 0 },
  };
}

/** A single number without uncertainty. */
export function readSingle(written: string | number, kind: QuantityKind): Reading<number> {
  const choice = readChoice(written, kind);
  if (!choice.ok) return choice;
  if (choice.value.kind !== 'fixed')
    return fail(`found ${quoted(String(written))}; a single number is needed`);
  return { ok: true, value: choice.value.value };
}

/**
 * `0.94 +- 0.03 M_sun` in the canonical unit of `kind`.
 *
 * @throws UsageError when the text is no number, has a unit of another kind, or a negative uncertainty
 * @example parseMeasured('1 +- 0.5 km/s', 'velocity') // => { value: 1000, sigma: 500 }
 */
export function parseMeasured(text: string | number, kind: QuantityKind): Measured {
  return orUsageError(readMeasured(text, kind));
}

/**
 * `4.1 .. 4.4 d` in the canonical unit of `kind`.
 *
 * @throws UsageError when the text is no range, or `low >= high`
 * @example parseRange('1 .. 2 yr', 'period') // => { low: 365.25, high: 730.5 }
 */
export function parseRange(
  text: string,
  kind: QuantityKind,
): { readonly low: number; readonly high: number } {
  const choice = orUsageError(readChoice(text, kind));
  if (choice.kind !== 'range') throw new UsageError(`found ${quoted(text)}; a range is written low .. high`);
  return { low: choice.low, high: choice.high };
}

function orUsageError<T>(reading: Reading<T>): T {
  if (!reading.ok) throw new UsageError(reading.message, { hint: reading.hint });
  return reading.value;
}
