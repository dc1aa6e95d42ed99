/** The `mock` section of a case in the units used inside. */
import type { LightCurveEntry } from './case-mock-photometry-schema.js';
import type { MockEntry } from './case-mock-schema.js';
import type { MockLightCurve, MockPhotometry, MockTransit } from './mock-types.js';
import { withoutControls } from './text.js';
import type { Measured, MockPlan } from './types.js';

/** Mass and radius of the star as the case states them. */
export interface StatedStar {
  readonly mass?: Measured | undefined;
  readonly radius?: Measured | undefined;
}

export function mockPlan(entry: MockEntry, star?: StatedStar): MockPlan {
  const dates = [
    ...entry.instruments.flatMap(({ from, to }) => [from, to]),
    ...entry['mid-times'].flatMap(({ from, to }) => [from, to]),
    ...entry['light-curves'].flatMap((curve) =>
      curve.kind === 'survey' ? [curve.from, curve.from + curve.span] : [curve.after],
    ),
  ];
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
      ...transitOf(companion),
    })),
    slopeMpsPerYear: entry.slope,
    curvatureMpsPerYear2: entry.curvature,
    // Without a word, slope and curvature are zero in the middle of the observations.
    epochBjdTdb: entry.epoch ?? (Math.min(...dates) + Math.max(...dates)) / 2,
    ...photometryOf(entry, star),
  };
}

function transitOf(companion: MockEntry['companions'][number]): { transit?: MockTransit } {
  const radiusRatio = companion['radius-ratio'];
  if (radiusRatio === undefined) return {};
  const { inclination } = companion;
  return {
    transit: {
      radiusRatio,
      path:
        inclination === undefined
          ? { kind: 'impact-parameter', value: companion['impact-parameter']! }
          : { kind: 'inclination', deg: inclination },
    },
  };
}

function photometryOf(entry: MockEntry, star: StatedStar | undefined): { photometry?: MockPhotometry } {
  if (entry['light-curves'].length + entry['mid-times'].length === 0) return {};
  const [mass, radius] = [star?.mass, star?.radius];
  return {
    photometry: {
      star:
        mass === undefined || radius === undefined
          ? null
          : { massSolar: mass.value, radiusSolar: radius.value },
      bands: entry.bands,
      lightCurves: entry['light-curves'].map(lightCurve),
      midTimes: entry['mid-times'].map((table) => ({
        table: table.table,
        companion: companionIndex(table.companion),
        count: table.count,
        errorDays: table.error,
        errorScatter: table['error-scatter'],
        fromBjdTdb: table.from,
        toBjdTdb: table.to,
        sources: table.sources.map(withoutControls),
      })),
    },
  };
}

/** Companions of the section are called b, c ... in their order. */
function companionIndex(letter: string): number {
  return letter.charCodeAt(0) - 'b'.charCodeAt(0);
}

function lightCurve(entry: LightCurveEntry): MockLightCurve {
  const red = entry['red-noise'];
  const common = {
    table: entry.table,
    band: entry.band,
    unit: entry.unit,
    level: entry.level,
    cadenceDays: entry.cadence,
    // Without a word, the shutter is open all the time.
    exposureDays: entry.exposure ?? entry.cadence,
    noise: entry.noise,
    redNoise: red === undefined ? null : { size: red.size, timeDays: red.time },
  };
  if (entry.kind === 'night')
    return {
      ...common,
      kind: 'night',
      companion: companionIndex(entry.companion),
      afterBjdTdb: entry.after,
      marginDays: entry.margin,
      airmassTrend: entry['airmass-trend'],
      positionTrend: entry['position-trend'],
      widthTrend: entry['width-trend'],
    };
  const { variability } = entry;
  return {
    ...common,
    kind: 'survey',
    fromBjdTdb: entry.from,
    spanDays: entry.span,
    gaps: entry.gaps.map(({ after, length }) => ({ afterDays: after, lengthDays: length })),
    variability:
      variability === undefined
        ? null
        : { size: variability.size, periodDays: variability.period, lifetimeDays: variability.lifetime },
    flagged: entry.flagged,
  };
}
