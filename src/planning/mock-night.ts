/** A simulated night at the telescope: one transit, seen through an atmosphere that changes from hour to hour. */
import { UsageError } from '../errors.js';
import type { RandomStream } from '../numerics/random.js';
import type { MockNight } from '../observations/mock-types.js';
import type { MockPlan } from '../observations/types.js';
import { DAYS_PER_YEAR } from '../orbit/constants.js';
import type { CurveRow } from './mock-curve-table.js';
import { redNoise } from './mock-noise.js';
import { conjunctionsBetween, type TransitingOrbit } from './mock-transits.js';
import { observableWindows } from './observing-nights.js';
import { airmass, altitudeDeg, precessFromJ2000 } from './sky.js';

/** How far ahead a transit is looked for. */
const LONGEST_WAIT_DAYS = 2 * DAYS_PER_YEAR;
const TIME_DECIMALS = 6;
/** Share of the wanted margin that must be dark on either side. */
const NEEDED_MARGIN = 0.4;
/** Scintillation and extinction: scatter grows as airmass^1.75 [Young1967]. */
const SCATTER_POWER = 1.75;
/** Width of the image, pixels, at airmass 1, and its growth as airmass^0.6. */
const WIDTH_PIXELS = 3.4;
const WIDTH_POWER = 0.6;
/** Wander of width (fraction) and of position (pixels), slow and fast. */
const SEEING_WANDER = { size: 0.08, timeDays: 0.03 };
const POSITION_WANDER = { size: 0.9, timeDays: 0.08 };
const FAST_WIDTH = 0.02;
const FAST_POSITION = 0.12;

export const NIGHT_REGRESSORS: readonly string[] = ['airmass', 'x', 'y', 'width'];

export interface NightSpan {
  readonly midTransitBjdTdb: number;
  readonly timesBjdTdb: Float64Array;
  /** Airmass of the target per exposure. */
  readonly airmass: Float64Array;
}

/**
 * The first transit after the night's date that the site can follow from before the first to after the last contact, and
 * the exposures that fit into the dark.
 *
 * @throws UsageError when there is none within two years
 */
export function nightSpan(plan: MockPlan, night: MockNight, orbit: TransitingOrbit): NightSpan {
  const half = orbit.durationDays / 2;
  const need = half + NEEDED_MARGIN * night.marginDays;
  const want = half + night.marginDays;
  const transits = conjunctionsBetween(orbit, night.afterBjdTdb, night.afterBjdTdb + LONGEST_WAIT_DAYS);
  for (const { timeBjdTdb } of transits) {
    for (const { windows, barycentricMinusUtcDays } of observableWindows(
      plan,
      timeBjdTdb - want,
      timeBjdTdb + want,
    )) {
      const window = windows.find(
        ({ startBjdTdb, endBjdTdb }) => startBjdTdb <= timeBjdTdb - need && endBjdTdb >= timeBjdTdb + need,
      );
      if (window === undefined) continue;
      const exposures = Math.floor((window.endBjdTdb - window.startBjdTdb) / night.cadenceDays);
      const timesBjdTdb = Float64Array.from({ length: exposures }, (_, i) =>
        Number((window.startBjdTdb + (i + 0.5) * night.cadenceDays).toFixed(TIME_DECIMALS)),
      );
      const airmasses = timesBjdTdb.map((time) => {
        const jdUt = time - barycentricMinusUtcDays;
        return airmass(altitudeDeg(precessFromJ2000(plan.target, jdUt), plan.site, jdUt));
      });
      return { midTransitBjdTdb: timeBjdTdb, timesBjdTdb, airmass: airmasses };
    }
  }
  throw new UsageError(
    `light curve ${night.table}: no transit can be followed from the site within two years`,
    {
      allowed:
        'the target must stay within the airmass limit, in the dark, from before the first to after the last contact',
      hint: 'try another date, a smaller margin, a higher airmass or a brighter twilight',
    },
  );
}

/** @param loss - (n) loss of light at the times of the span */
export function observeNight(
  night: MockNight,
  span: NightSpan,
  loss: Float64Array,
  random: RandomStream,
): CurveRow[] {
  const days = span.timesBjdTdb.map((time) => time - span.midTransitBjdTdb);
  const seeing = redNoise(SEEING_WANDER, days, random);
  const x = redNoise(POSITION_WANDER, days, random);
  const y = redNoise(POSITION_WANDER, days, random);
  const red =
    night.redNoise === null ? new Float64Array(days.length) : redNoise(night.redNoise, days, random);
  const [x0, y0] = [random.uniformBetween(300, 1700), random.uniformBetween(300, 1700)];
  const least = Math.min(...span.airmass);
  return Array.from(days, (_, i) => {
    const thick = span.airmass[i]!;
    const width = WIDTH_PIXELS * thick ** WIDTH_POWER * Math.exp(seeing[i]! + FAST_WIDTH * random.normal());
    const dx = x[i]! + FAST_POSITION * random.normal();
    const dy = y[i]! + FAST_POSITION * random.normal();
    const air =
      night.airmassTrend * (thick - least) +
      night.positionTrend * (dx - 0.6 * dy) +
      night.widthTrend * (width - WIDTH_PIXELS);
    const sigma = night.noise * thick ** SCATTER_POWER;
    return {
      timeBjdTdb: span.timesBjdTdb[i]!,
      flux: (1 - loss[i]!) * (1 + air) + red[i]! + sigma * random.normal(),
      sigma,
      quality: 0,
      regressors: [thick, x0 + dx, y0 + dy, width],
    };
  });
}
