/** The `mock` section of a case in the units used inside. */
import type { MockEntry } from './case-mock-schema.js';
import { withoutControls } from './text.js';
import type { MockPlan } from './types.js';

export function mockPlan(entry: MockEntry): MockPlan {
  const dates = entry.instruments.flatMap(({ from, to }) => [from, to]);
  return {
    site: {
      name: withoutControls(entry.site.name),
      latitudeDeg: entry.site.latitude,
      longitudeEastDeg: entry.site.longitude,
      elevationM: entry.site.elevation,
    },
    target: {
      rightAscensionDeg: entry.position['right-ascension'],
      declinationDeg: entry.position.declination,
    },
    weatherLoss: entry['weather-loss'],
    maximumAirmass: entry['maximum-airmass'],
    twilightDeg: entry.twilight,
    instruments: entry.instruments.map((instrument) => ({
      name: withoutControls(instrument.name),
      table: instrument.table,
      unit: instrument.unit,
      count: instrument.count,
      zeroPointMps: instrument['zero-point'],
      jitterMps: instrument.jitter,
      errorMps: instrument.error,
      errorScatter: instrument['error-scatter'],
      from: instrument.from,
      to: instrument.to,
    })),
    companions: entry.companions.map((companion) => ({
      periodDays: companion.period,
      eccentricity: companion.eccentricity,
      argPeriastronStarDeg: companion['argument-of-periastron'],
      timePeriastronBjdTdb: companion['time-of-periastron'],
      semiAmplitudeMps: companion['semi-amplitude'],
    })),
    slopeMpsPerYear: entry.slope,
    curvatureMpsPerYear2: entry.curvature,
    // Without a word, slope and curvature are zero in the middle of the observations.
    epochBjdTdb: entry.epoch ?? (Math.min(...dates) + Math.max(...dates)) / 2,
  };
}
