/**
 * What a case may say: every key, its meaning and its limits, in one place. A new section (light curves, mid-times, a site, plans)
 * is one schema here, one line in `caseSchema`, and its mapping in `case-reader.ts`.
 */
import * as z from 'zod';
import {
  ANY,
  autoOrBoolean,
  between,
  byShape,
  choice,
  complain,
  ECCENTRICITY,
  mapping,
  measured,
  NOT_NEGATIVE,
  POSITIVE,
  single,
  text,
  wholeNumber,
  word,
  yesOrNo,
} from './case-values.js';
import { checkMockStar, mockSchema, type MockEntry } from './case-mock-schema.js';
import { table, type TableEntry } from './case-table-schema.js';
import type { DriftChoice, ElementChoice, Measured } from './types.js';

export const MOST_COMPANIONS = 20;
export const DEFAULT_MOST_COMPANIONS = 5;

interface StarEntry {
  readonly mass?: Measured | undefined;
  readonly radius?: Measured | undefined;
  readonly temperature?: Measured | undefined;
  readonly density?: Measured | undefined;
}

const star: z.ZodType<StarEntry> = mapping({
  mass: measured('star mass', POSITIVE).optional(),
  radius: measured('star radius', POSITIVE).optional(),
  temperature: measured('temperature', POSITIVE).optional(),
  density: measured('density', POSITIVE).optional(),
});

export interface CompanionEntry {
  readonly letter?: string | undefined;
  readonly period?: ElementChoice | undefined;
  readonly eccentricity?: ElementChoice | undefined;
  readonly 'argument-of-periastron'?: ElementChoice | undefined;
  readonly 'time-of-periastron'?: ElementChoice | undefined;
  readonly 'time-of-inferior-conjunction'?: ElementChoice | undefined;
  readonly 'semi-amplitude'?: ElementChoice | undefined;
  readonly inclination?: Measured | undefined;
  readonly 'radius-ratio'?: ElementChoice | undefined;
  readonly 'impact-parameter'?: ElementChoice | undefined;
  readonly occultation?: boolean | undefined;
  readonly circular?: boolean | 'auto' | undefined;
}

const companionMapping: z.ZodType<CompanionEntry> = mapping({
  letter: z
    .string()
    .regex(/^[b-z]$/, { error: 'a letter from b to z is expected' })
    .optional(),
  period: choice('period', POSITIVE).optional(),
  eccentricity: choice('number', ECCENTRICITY).optional(),
  'argument-of-periastron': choice('angle', between(-360, 360)).optional(),
  'time-of-periastron': choice('date', POSITIVE).optional(),
  'time-of-inferior-conjunction': choice('date', POSITIVE).optional(),
  'semi-amplitude': choice('velocity', NOT_NEGATIVE).optional(),
  inclination: measured('angle', {
    allows: (value) => value > 0 && value < 180,
    words: 'must lie between 0 and 180 deg, both excluded',
  }).optional(),
  'radius-ratio': choice('number', POSITIVE).optional(),
  'impact-parameter': choice('number', NOT_NEGATIVE).optional(),
  occultation: yesOrNo.optional(),
  circular: autoOrBoolean.optional(),
}).superRefine((companion, context) => {
  const { eccentricity, circular } = companion;
  if (
    companion['time-of-periastron'] !== undefined &&
    companion['time-of-inferior-conjunction'] !== undefined
  ) {
    complain(
      context,
      'time-of-periastron and time-of-inferior-conjunction both set the phase of the orbit',
      'keep one of them',
      ['time-of-inferior-conjunction'],
    );
  }
  if (companion.inclination !== undefined && companion['impact-parameter'] !== undefined) {
    complain(context, 'inclination and impact-parameter both set the tilt of the orbit', 'keep one of them', [
      'impact-parameter',
    ]);
  }
  if (circular === true && eccentricity !== undefined && !isZero(eccentricity)) {
    complain(context, 'a circular orbit has eccentricity 0', 'leave out eccentricity or circular', [
      'eccentricity',
    ]);
  }
  if (circular === false && eccentricity !== undefined && isZero(eccentricity)) {
    complain(context, 'eccentricity is fixed at 0 and yet circular is false', 'leave out one of them', [
      'circular',
    ]);
  }
});

export function isZero(found: ElementChoice): boolean {
  return found.kind === 'fixed' && found.value === 0;
}

/** As many as the data pay for, a number of them, or each described. */
type CompanionsEntry = 'auto' | number | CompanionEntry[];

const companionList: z.ZodType<CompanionEntry[]> = z
  .array(companionMapping)
  .min(1, { error: 'the list of companions is empty; write 0 for none' })
  .max(MOST_COMPANIONS, { error: `at most ${MOST_COMPANIONS} companions are allowed` })
  .superRefine((list, context) => {
    const letters = list.map((entry) => entry.letter).filter((letter) => letter !== undefined);
    for (const [index, entry] of list.entries()) {
      if (entry.letter !== undefined && letters.indexOf(entry.letter) !== letters.lastIndexOf(entry.letter)) {
        complain(context, `the letter ${entry.letter} is given to two companions`, '', [index, 'letter']);
      }
    }
  });

const companions: z.ZodType<CompanionsEntry> = byShape<CompanionsEntry>((value) => {
  if (Array.isArray(value)) return companionList;
  if (typeof value === 'number') return wholeNumber(0, MOST_COMPANIONS);
  return z.unknown().transform((written, context): 'auto' => {
    if (written === 'auto') return 'auto';
    complain(
      context,
      'auto, a number of companions, or a list of them is expected',
      'each entry of a list begins with "- "',
    );
    return z.NEVER;
  });
});

interface InstrumentEntry {
  readonly 'zero-point'?: ElementChoice | undefined;
  readonly jitter?: ElementChoice | undefined;
}

const instrument: z.ZodType<InstrumentEntry> = mapping({
  'zero-point': choice('velocity', ANY).optional(),
  jitter: choice('velocity', NOT_NEGATIVE).optional(),
}).superRefine((choices, context) => {
  if (choices['zero-point']?.kind === 'range')
    complain(
      context,
      'a zero point cannot be confined to a range',
      'a value fixes it, value +- sigma is a prior',
      ['zero-point'],
    );
});

interface BandEntry {
  readonly u1?: Measured | undefined;
  readonly u2?: Measured | undefined;
}

/** Of the quadratic law of limb darkening. */
const COEFFICIENT = between(-1, 2);

const band: z.ZodType<BandEntry> = mapping({
  u1: measured('number', COEFFICIENT).optional(),
  u2: measured('number', COEFFICIENT).optional(),
}).superRefine((coefficients, context) => {
  if (coefficients.u1 === undefined && coefficients.u2 === undefined)
    complain(context, 'the band states no limb darkening', 'give u1, u2 or both: u1: 0.35 +- 0.05');
});

interface SearchEntry {
  readonly 'shortest-period'?: number | undefined;
  readonly 'longest-period'?: number | undefined;
  readonly 'at-most'?: number | undefined;
}

const search: z.ZodType<SearchEntry> = mapping({
  'shortest-period': single('period', POSITIVE).optional(),
  'longest-period': single('period', POSITIVE).optional(),
  'at-most': wholeNumber(0, MOST_COMPANIONS).optional(),
}).superRefine((range, context) => {
  const [low, high] = [range['shortest-period'], range['longest-period']];
  if (low !== undefined && high !== undefined && low >= high)
    complain(context, 'shortest-period must be below longest-period', '', ['longest-period']);
});

/** A whole case as written, each value read, nothing filled in yet. */
export interface CaseEntry {
  readonly target: string;
  readonly star?: StarEntry | undefined;
  readonly tables?: readonly TableEntry[] | undefined;
  readonly companions?: CompanionsEntry | undefined;
  readonly drift?: DriftChoice | undefined;
  readonly circular?: boolean | 'auto' | undefined;
  readonly instruments?: Readonly<Record<string, InstrumentEntry>> | undefined;
  readonly bands?: Readonly<Record<string, BandEntry>> | undefined;
  readonly search?: SearchEntry | undefined;
  readonly mock?: MockEntry | undefined;
}

export const caseSchema: z.ZodType<CaseEntry> = mapping({
  target: text,
  star: star.optional(),
  tables: z.array(table).max(500, { error: 'at most 500 tables are allowed' }).optional(),
  companions: companions.optional(),
  drift: word(['auto', 'none', 'linear', 'quadratic']).optional(),
  circular: autoOrBoolean.optional(),
  instruments: z.record(z.string().min(1).max(200), instrument).optional(),
  bands: z.record(z.string().min(1).max(200), band).optional(),
  search: search.optional(),
  mock: mockSchema.optional(),
}).superRefine((theCase, context) => {
  if ((theCase.tables ?? []).length === 0 && theCase.mock === undefined) {
    complain(context, 'the case names no table', 'add tables: [ north.csv ]');
  }
  if (theCase.mock !== undefined) checkMockStar(theCase.mock, theCase.star, context);
});
