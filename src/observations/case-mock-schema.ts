/** The `mock` section of a case: the truth and the circumstances of simulated observations. */
import * as z from 'zod';
import {
  ANY,
  between,
  complain,
  ECCENTRICITY,
  mapping,
  NOT_NEGATIVE,
  plainFileName,
  POSITIVE,
  single,
  text,
  wholeNumber,
  word,
} from './case-values.js';
import {
  checkMockPhotometry,
  mockBands,
  mockLightCurve,
  mockMidTimes,
  type LightCurveEntry,
  type LimbEntry,
  type MidTimesEntry,
} from './case-mock-photometry-schema.js';
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
  readonly 'radius-ratio'?: number | undefined;
  readonly 'impact-parameter'?: number | undefined;
  readonly inclination?: number | undefined;
}

const companion: z.ZodType<CompanionEntry> = mapping({
  period: single('period', POSITIVE),
  eccentricity: single('number', ECCENTRICITY).default(0),
  'argument-of-periastron': single('angle', between(-360, 360)).default(90),
  'time-of-periastron': single('date', POSITIVE),
  'semi-amplitude': single('velocity', NOT_NEGATIVE),
  'radius-ratio': single('number', {
    allows: (value) => value > 0 && value <= 2,
    words: 'must be above 0 and at most 2',
  }).optional(),
  'impact-parameter': single('number', between(-5, 5)).optional(),
  inclination: single('angle', between(0, 180)).optional(),
}).superRefine((entry, context) => {
  const paths = ['impact-parameter', 'inclination'].filter(
    (key) => entry[key as 'impact-parameter' | 'inclination'] !== undefined,
  );
  if (paths.length === 2)
    complain(context, 'impact-parameter and inclination say the same', 'keep one of them', ['inclination']);
  if (paths.length > 0 && entry['radius-ratio'] === undefined)
    complain(context, `${paths[0]!} needs a radius-ratio: without one there are no transits`, '', [
      paths[0]!,
    ]);
  if (paths.length === 0 && entry['radius-ratio'] !== undefined)
    complain(context, 'radius-ratio needs an impact-parameter or an inclination', 'impact-parameter: 0.3', [
      'radius-ratio',
    ]);
});

/** The section as read, in canonical units (angles deg, velocities m/s, dates BJD_TDB), its defaults filled in. */
export interface MockEntry {
  readonly site: SiteEntry;
  readonly position: { readonly 'right-ascension': number; readonly declination: number };
  readonly 'weather-loss': number;
  readonly 'maximum-airmass': number;
  readonly twilight: number;
  readonly instruments: readonly InstrumentEntry[];
  readonly 'light-curves': readonly LightCurveEntry[];
  readonly 'mid-times': readonly MidTimesEntry[];
  readonly bands: Readonly<Record<string, LimbEntry>>;
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
  instruments: z.array(instrument).max(50).default([]),
  'light-curves': z.array(mockLightCurve).max(50).default([]),
  'mid-times': z.array(mockMidTimes).max(50).default([]),
  bands: mockBands,
  companions: z.array(companion).max(20).default([]),
  slope: single('velocity per year', ANY).default(0),
  curvature: single('velocity per year squared', ANY).default(0),
  epoch: single('date', POSITIVE).optional(),
}).superRefine((mock, context) => {
  const { instruments } = mock;
  if (instruments.length + mock['light-curves'].length + mock['mid-times'].length === 0)
    complain(context, 'at least one instrument is needed, or a light curve, or mid-times');
  checkMockPhotometry(mock, context);
  const seen = new Set<string>();
  for (const [index, { name }] of instruments.entries()) {
    if (seen.has(name))
      complain(context, `the instrument ${quoted(name)} is listed twice`, '', ['instruments', index, 'name']);
    seen.add(name);
  }
});

/** Transits need the size and the mass of the star, which stand outside of the section. */
export function checkMockStar(
  mock: MockEntry,
  star: { readonly mass?: unknown; readonly radius?: unknown } | undefined,
  context: z.core.$RefinementCtx,
): void {
  if (star?.mass !== undefined && star.radius !== undefined) return;
  for (const [i, entry] of mock.companions.entries())
    if (entry['radius-ratio'] !== undefined)
      complain(
        context,
        'transits need the mass and the radius of the star',
        'add star: { mass: 0.9 M_sun, radius: 0.9 R_sun } to the case',
        ['mock', 'companions', i, 'radius-ratio'],
      );
}
