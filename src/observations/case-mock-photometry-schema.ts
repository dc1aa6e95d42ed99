/** Light curves, mid-times and limb darkening in the `mock` section of a case. */
import * as z from 'zod';
import {
  ANY,
  between,
  byShape,
  complain,
  mapping,
  NOT_NEGATIVE,
  plainFileName,
  POSITIVE,
  single,
  text,
  wholeNumber,
  word,
} from './case-values.js';
import { quoted } from './text.js';

interface RedNoiseEntry {
  readonly size: number;
  readonly time: number;
}

interface CurveEntry {
  readonly table: string;
  readonly band: string;
  readonly unit: 'relative' | 'counts';
  readonly level: number;
  readonly cadence: number;
  readonly exposure?: number | undefined;
  readonly noise: number;
  readonly 'red-noise'?: RedNoiseEntry | undefined;
}

export interface SurveyEntry extends CurveEntry {
  readonly kind: 'survey';
  readonly from: number;
  readonly span: number;
  readonly gaps: readonly { readonly after: number; readonly length: number }[];
  readonly variability?:
    { readonly size: number; readonly period: number; readonly lifetime: number } | undefined;
  readonly flagged: number;
}

export interface NightEntry extends CurveEntry {
  readonly kind: 'night';
  readonly companion: string;
  readonly after: number;
  readonly margin: number;
  readonly 'airmass-trend': number;
  readonly 'position-trend': number;
  readonly 'width-trend': number;
}

export type LightCurveEntry = SurveyEntry | NightEntry;

const letter: z.ZodType<string> = z
  .string({ error: 'a letter from b to z is expected' })
  .regex(/^[b-z]$/, { error: 'a letter from b to z is expected' })
  .default('b');

const curve = {
  table: plainFileName,
  band: text,
  unit: word(['relative', 'counts']).default('relative'),
  level: single('number', POSITIVE).default(100_000),
  cadence: single('duration', POSITIVE),
  exposure: single('duration', NOT_NEGATIVE).optional(),
  noise: single('relative flux', POSITIVE),
  'red-noise': mapping({
    size: single('relative flux', POSITIVE),
    time: single('duration', POSITIVE),
  }).optional(),
};

const exposureFits = (
  { cadence, exposure }: Pick<CurveEntry, 'cadence' | 'exposure'>,
  context: z.core.$RefinementCtx,
): void => {
  if (exposure !== undefined && exposure > cadence * (1 + 1e-9))
    complain(context, 'an exposure cannot last longer than the cadence', '', ['exposure']);
};

const survey: z.ZodType<SurveyEntry> = mapping({
  kind: z.literal('survey'),
  ...curve,
  from: single('date', POSITIVE),
  span: single('period', POSITIVE),
  gaps: z
    .array(mapping({ after: single('duration', NOT_NEGATIVE), length: single('duration', POSITIVE) }))
    .max(1000)
    .default([]),
  variability: mapping({
    size: single('relative flux', POSITIVE),
    period: single('period', POSITIVE),
    lifetime: single('period', POSITIVE),
  }).optional(),
  flagged: single('number', between(0, 0.5)).default(0),
}).superRefine((entry, context) => {
  exposureFits(entry, context);
  if (entry.span / entry.cadence > 2e6)
    complain(context, 'more than two million rows', 'shorten the span or lengthen the cadence', ['cadence']);
  if (entry.span < entry.cadence) complain(context, 'the span is shorter than the cadence', '', ['span']);
});

const night: z.ZodType<NightEntry> = mapping({
  kind: z.literal('night'),
  ...curve,
  companion: letter,
  after: single('date', POSITIVE),
  margin: single('duration', NOT_NEGATIVE).default(1.5 / 24),
  'airmass-trend': single('relative flux', ANY).default(0),
  'position-trend': single('relative flux', ANY).default(0),
  'width-trend': single('relative flux', ANY).default(0),
}).superRefine(exposureFits);

const kindOnly: z.ZodType<never> = z.unknown().transform((_, context): never => {
  complain(
    context,
    'a light curve is a mapping with kind: survey or kind: night',
    'survey watches all the time, night follows one transit from the site',
  );
  return z.NEVER;
});

export const mockLightCurve: z.ZodType<LightCurveEntry> = byShape<LightCurveEntry>((value) => {
  const kind = typeof value === 'object' && value !== null && 'kind' in value ? value.kind : undefined;
  return kind === 'survey' ? survey : kind === 'night' ? night : kindOnly;
});

export interface MidTimesEntry {
  readonly table: string;
  readonly companion: string;
  readonly count: number;
  readonly error: number;
  readonly 'error-scatter': number;
  readonly from: number;
  readonly to: number;
  readonly sources: readonly string[];
}

export const mockMidTimes: z.ZodType<MidTimesEntry> = mapping({
  table: plainFileName,
  companion: letter,
  count: wholeNumber(1, 10_000),
  error: single('duration', POSITIVE),
  'error-scatter': single('number', between(0, 1)).default(0),
  from: single('date', POSITIVE),
  to: single('date', POSITIVE),
  sources: z.array(text).max(50).default([]),
}).superRefine(({ from, to }, context) => {
  if (from >= to) complain(context, 'from must be earlier than to', '', ['to']);
});

export interface LimbEntry {
  readonly u1: number;
  readonly u2: number;
}

/** By name of the band. */
export const mockBands: z.ZodType<Readonly<Record<string, LimbEntry>>> = z
  .record(
    z.string().min(1).max(200),
    mapping({ u1: single('number', between(-1, 2)), u2: single('number', between(-1, 1)) }).superRefine(
      ({ u1, u2 }, context) => {
        if (u1 + u2 > 1 || u1 < 0 || u1 + 2 * u2 < 0)
          complain(
            context,
            `u1 ${u1} and u2 ${u2} make the star darker than black, or brighter towards the limb`,
            'u1 + u2 <= 1, u1 >= 0 and u1 + 2 u2 >= 0 are needed',
          );
      },
    ),
  )
  .default({});

/** What the tables refer to must be there. */
export function checkMockPhotometry(
  mock: {
    readonly companions: readonly { readonly 'radius-ratio'?: number | undefined }[];
    readonly bands: Readonly<Record<string, LimbEntry>>;
    readonly 'light-curves': readonly LightCurveEntry[];
    readonly 'mid-times': readonly MidTimesEntry[];
  },
  context: z.core.$RefinementCtx,
): void {
  const indexOf = ({ companion }: { companion: string }): number => companion.charCodeAt(0) - 98;
  const transits = mock.companions.some((companion) => companion['radius-ratio'] !== undefined);
  for (const [i, entry] of mock['light-curves'].entries()) {
    if (transits && !Object.hasOwn(mock.bands, entry.band))
      complain(
        context,
        `the band ${quoted(entry.band)} has no limb darkening`,
        `add to mock: bands: { ${entry.band}: { u1: 0.4, u2: 0.25 } }`,
        ['light-curves', i, 'band'],
      );
    if (entry.kind === 'night' && mock.companions[indexOf(entry)]?.['radius-ratio'] === undefined)
      complain(
        context,
        `the companion ${entry.companion} of the mock block does not transit`,
        'companions are called b, c ... in the order of the list; one that transits has radius-ratio and impact-parameter',
        ['light-curves', i, 'companion'],
      );
  }
  for (const [i, entry] of mock['mid-times'].entries())
    if (mock.companions[indexOf(entry)] === undefined)
      complain(
        context,
        `the mock block has no companion ${entry.companion}`,
        'companions are called b, c ... in the order of the list',
        ['mid-times', i, 'companion'],
      );
}
