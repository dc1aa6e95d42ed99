/** The `mock` section of a case: the truth and the circumstances of simulated observations. */
import * as z from 'zod';
import {
  ANY,
  between,
  complain,
  ECCENTRICITY,
  mapping,
  NOT_NEGATIVE,
  POSITIVE,
  single,
  text,
  wholeNumber,
  word,
} from './case-values.js';
import { quoted } from './text.js';

interface SiteEntry {
  readonly name: string;
  readonly latitude: number;
  readonly longitude: number;
  readonly elevation: number;
}

const site: z.ZodType<SiteEntry> = mapping({
  name: text,
  latitude: single('angle', between(-90, 90)),
  longitude: single('angle', between(-180, 360)), // positive east
  elevation: single('height', between(-500, 9000)),
});

/** `mock` writes into its own folder only: a name with a path in it is refused. */
const plainFileName: z.ZodType<string> = text.superRefine((name, context) => {
  if (/[/\\]|^\.\.?$|[\u0000-\u001f]/.test(name))
    complain(context, `found ${quoted(name)}; a plain file name is expected, without a folder`);
});

interface InstrumentEntry {
  readonly name: string;
  readonly table: string;
  readonly unit: 'm/s' | 'km/s';
  readonly count: number;
  readonly 'zero-point': number;
  readonly jitter: number;
  readonly error: number;
  readonly 'error-scatter': number;
  readonly from: number;
  readonly to: number;
}

const instrument: z.ZodType<InstrumentEntry> = mapping({
  name: text,
  table: plainFileName,
  unit: word(['m/s', 'km/s']).default('m/s'),
  count: wholeNumber(1, 100_000),
  'zero-point': single('velocity', ANY).default(0),
  jitter: single('velocity', NOT_NEGATIVE).default(0),
  error: single('velocity', POSITIVE),
  'error-scatter': single('number', between(0, 1)).default(0),
  from: single('date', POSITIVE),
  to: single('date', POSITIVE),
}).superRefine(({ from, to }, context) => {
  if (from >= to) complain(context, 'from must be earlier than to', '', ['to']);
});

interface CompanionEntry {
  readonly period: number;
  readonly eccentricity: number;
  readonly 'argument-of-periastron': number;
  readonly 'time-of-periastron': number;
  readonly 'semi-amplitude': number;
}

const companion: z.ZodType<CompanionEntry> = mapping({
  period: single('period', POSITIVE),
  eccentricity: single('number', ECCENTRICITY).default(0),
  'argument-of-periastron': single('angle', between(-360, 360)).default(90),
  'time-of-periastron': single('date', POSITIVE),
  'semi-amplitude': single('velocity', NOT_NEGATIVE),
});

/** The section as read, in canonical units (angles deg, velocities m/s, dates BJD_TDB), its defaults filled in. */
export interface MockEntry {
  readonly site: SiteEntry;
  readonly position: { readonly 'right-ascension': number; readonly declination: number };
  readonly 'weather-loss': number;
  readonly 'maximum-airmass': number;
  readonly twilight: number;
  readonly instruments: readonly InstrumentEntry[];
  readonly companions: readonly CompanionEntry[];
  readonly slope: number;
  readonly curvature: number;
  readonly epoch?: number | undefined;
}

export const mockSchema: z.ZodType<MockEntry> = mapping({
  site,
  position: mapping({
    'right-ascension': single('angle', between(0, 360)),
    declination: single('angle', between(-90, 90)),
  }),
  'weather-loss': single('number', between(0, 0.99)).default(0.3),
  'maximum-airmass': single('number', between(1, 10)).default(2),
  twilight: single('angle', between(-18, 0)).default(-12),
  instruments: z.array(instrument).min(1, { error: 'at least one instrument is needed' }).max(50),
  companions: z.array(companion).max(20).default([]),
  slope: single('velocity per year', ANY).default(0),
  curvature: single('velocity per year squared', ANY).default(0),
  epoch: single('date', POSITIVE).optional(),
}).superRefine(({ instruments }, context) => {
  const seen = new Set<string>();
  for (const [index, { name }] of instruments.entries()) {
    if (seen.has(name))
      complain(context, `the instrument ${quoted(name)} is listed twice`, '', ['instruments', index, 'name']);
    seen.add(name);
  }
});
