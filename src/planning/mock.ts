/**
 * Simulated observations: what the instruments of a plan would have brought home, had the target's orbit been the one
 * that the plan states. Nights, seasons and gaps are those of the site; the noise is Gaussian.
 */
import { ModelDomainError, UsageError } from '../errors.js';
import { RandomStream } from '../numerics/random.js';
import { companionLetter } from '../observations/letters.js';
import type { MockInstrument, MockPlan, TableContent } from '../observations/types.js';
import { DAYS_PER_YEAR } from '../orbit/constants.js';
import { evaluateVelocity } from '../signals/evaluate-velocity.js';
import type { VelocityModelPoint } from '../signals/velocity-model.js';
import { simulatePhotometry } from './mock-photometry.js';
import { decimalsFor, mockTableText } from './mock-table.js';
import type { MockRow, TableOrigin } from './mock-table.js';
import { observableWindows } from './observing-nights.js';
import type { ObservableNight, ObservableWindow } from './observing-nights.js';
import { airmass, altitudeDeg, precessFromJ2000 } from './sky.js';
import { clearNights } from './weather.js';

/** One simulated table, ready to be written. */
export interface MockTable {
  /** A plain file name, without a folder. */
  readonly fileName: string;
  readonly holds: TableContent;
  readonly text: string;
  /** Number of observations in it. */
  readonly rows: number;
}

/** An exposure must fit into what is left of the night. */
const SHORTEST_WINDOW_DAYS = 15 / 1440;
/** Spread of the visits about the best moment, as a fraction of the window. */
const VISIT_SPREAD = 0.25;
const TIME_DECIMALS = 5;

/**
 * Simulates the tables of a plan.
 *
 * Nights are drawn without replacement from those that are dark, clear (`weatherLoss`, in spells shared by all instruments of
 * the site) and keep the target within the airmass limit for at least 15 minutes; one visit per night, at a normally
 * distributed time about the target's highest point. Formal errors are log-normal about `errorMps`, with `errorScatter` the
 * standard deviation of their logarithm; the noise is Gaussian with variance formal error² + jitter².
 * An observation is simulated at the time and with the error that are printed; rounding moves a velocity by at most 0.5 % of `errorMps`.
 *
 * Light curves have even cadence, mid-times are distinct transits; see `mock-survey.ts`, `mock-night.ts`, `mock-mid-times.ts`.
 *
 * @param seed - the same seed gives the same bytes. Each instrument has a random stream of its own, by its place in the list:
 *   changing one instrument's errors or velocities leaves the others as they were
 * @param title - name of the case (the base name of its file), for the comment lines of the tables
 * @returns one table per instrument, per light curve and per list of mid-times, in the plan's order; rows in order of time
 * @throws UsageError when there are fewer usable nights or transits than observations, or a table's file name is unusable
 * @throws ModelDomainError when a count is not a whole number >= 1, dates are in the wrong order, or an error or jitter is out of range
 */
export function simulateObservations(plan: MockPlan, seed: number, title?: string): MockTable[] {
  const { photometry } = plan;
  const count =
    plan.instruments.length + (photometry?.lightCurves.length ?? 0) + (photometry?.midTimes.length ?? 0);
  if (count === 0)
    throw new UsageError('the plan has no instrument to observe with', {
      hint: 'list at least one instrument',
    });
  checkFileNames(plan);
  const about = { seed, title: title ?? null };
  const velocities = plan.instruments.length === 0 ? [] : simulateVelocities(plan, about);
  return photometry === undefined
    ? velocities
    : [...velocities, ...simulatePhotometry(plan, photometry, about)];
}

function simulateVelocities(plan: MockPlan, about: TableOrigin): MockTable[] {
  const { seed } = about;
  plan.instruments.forEach(checkInstrument);
  const nightsOf = plan.instruments.map(({ from, to }) => observableWindows(plan, from, to));
  const night = (days: number): number => Math.floor(days + plan.site.longitudeEastDeg / 360);
  const firstNight = Math.min(...plan.instruments.map(({ from }) => night(from))) - 1;
  const lastNight = Math.max(...plan.instruments.map(({ to }) => night(to))) + 1;
  const clear = clearNights(lastNight - firstNight + 1, plan.weatherLoss, RandomStream.fromSeed(seed, 0));
  const truth = truthOf(plan);
  return plan.instruments.map((instrument, index) => {
    const usable = nightsOf[index]!.map((each) => ({
      ...each,
      windows: each.windows.filter((window) => window.endBjdTdb - window.startBjdTdb >= SHORTEST_WINDOW_DAYS),
    })).filter((each) => each.windows.length > 0 && clear[each.night - firstNight] === 1);
    const random = RandomStream.fromSeed(seed, index + 1);
    const nights = drawNights(usable, instrument, random);
    const rows = observe(plan, instrument, truth, nights, random);
    return {
      fileName: instrument.table,
      holds: 'velocities' as const,
      text: mockTableText(instrument, rows, { ...about, timeDecimals: TIME_DECIMALS }),
      rows: rows.length,
    };
  });
}

/** The truth in the units used inside. */
function truthOf(plan: MockPlan): VelocityModelPoint {
  return {
    companions: plan.companions.map(({ argPeriastronStarDeg, ...elements }) => ({
      ...elements,
      argPeriastronStarRad: (argPeriastronStarDeg * Math.PI) / 180,
    })),
    letters: plan.companions.map((_, index) => companionLetter(index)),
    zeroPointsMps: new Float64Array(0),
    jittersMps: new Float64Array(0),
    epochBjdTdb: plan.epochBjdTdb,
    slopeMpsPerDay: plan.slopeMpsPerYear / DAYS_PER_YEAR,
    curvatureMpsPerDay2: plan.curvatureMpsPerYear2 / DAYS_PER_YEAR ** 2,
  };
}

function drawNights(
  usable: readonly ObservableNight[],
  instrument: MockInstrument,
  random: RandomStream,
): ObservableNight[] {
  const { name, count } = instrument;
  if (usable.length < count)
    throw new UsageError(
      `instrument ${name}: ${count} observations are asked for, but only ${usable.length} nights are usable`,
      {
        allowed: `at most one observation per night that is dark, clear and has the target within the airmass limit`,
        hint: 'lower the count, widen the dates, allow a higher airmass or a brighter twilight, or lose fewer nights to weather',
      },
    );
  // the first `count` places of a shuffle, without shuffling the rest
  const order = Uint32Array.from(usable, (_, index) => index);
  for (let place = 0; place < count; place += 1) {
    const other = place + random.integerBelow(order.length - place);
    const chosen = order[other]!;
    order[other] = order[place]!;
    order[place] = chosen;
  }
  return [...order.subarray(0, count).sort()].map((index) => usable[index]!);
}

function observe(
  plan: MockPlan,
  instrument: MockInstrument,
  truth: VelocityModelPoint,
  nights: readonly ObservableNight[],
  random: RandomStream,
): MockRow[] {
  const decimals = decimalsFor(instrument.errorMps);
  const timesBjdTdb = Float64Array.from(nights, ({ windows }) =>
    Number(visitTime(pickWindow(windows, random), random).toFixed(TIME_DECIMALS)),
  );
  const modelMps = evaluateVelocity(truth, timesBjdTdb);
  return nights.map((night, index) => {
    const timeBjdTdb = timesBjdTdb[index]!;
    const drawnMps = instrument.errorMps * Math.exp(instrument.errorScatter * random.normal());
    // never printed as zero, which would claim a perfect measurement
    const errorMps = Math.max(10 ** -decimals, Number(drawnMps.toFixed(decimals)));
    const noiseMps = random.normal() * Math.hypot(errorMps, instrument.jitterMps);
    const jdUt = timeBjdTdb - night.barycentricMinusUtcDays;
    const altitude = altitudeDeg(precessFromJ2000(plan.target, jdUt), plan.site, jdUt);
    return {
      timeBjdTdb,
      velocityMps: instrument.zeroPointMps + modelMps[index]! + noiseMps,
      errorMps,
      airmass: airmass(altitude),
    };
  });
}

/** One of a night's windows, the longer the likelier. */
function pickWindow(windows: readonly ObservableWindow[], random: RandomStream): ObservableWindow {
  const lengths = windows.map(({ startBjdTdb, endBjdTdb }) => endBjdTdb - startBjdTdb);
  let left = random.uniform() * lengths.reduce((sum, length) => sum + length, 0);
  for (const [index, length] of lengths.entries()) {
    left -= length;
    if (left < 0) return windows[index]!;
  }
  return windows.at(-1)!;
}

/** Near the best moment of a window; at least two of five draws fall inside, wherever that moment is. */
function visitTime({ startBjdTdb, endBjdTdb, bestBjdTdb }: ObservableWindow, random: RandomStream): number {
  for (;;) {
    const time = bestBjdTdb + VISIT_SPREAD * (endBjdTdb - startBjdTdb) * random.normal();
    if (time >= startBjdTdb && time <= endBjdTdb) return time;
  }
}

function checkInstrument(instrument: MockInstrument): void {
  const { name, count, errorMps, errorScatter, jitterMps } = instrument;
  const refuse = (what: string, found: number, allowed: string): never => {
    throw new ModelDomainError(`${what} of instrument ${name}`, found, allowed);
  };
  if (!(Number.isInteger(count) && count >= 1))
    refuse('number of observations', count, 'the whole numbers from 1');
  if (!(errorMps > 0 && errorMps < Infinity)) refuse('formal error', errorMps, '(0, infinity) m/s');
  if (!(errorScatter >= 0 && errorScatter < Infinity))
    refuse('scatter of the formal errors', errorScatter, '[0, infinity)');
  if (!(jitterMps >= 0 && jitterMps < Infinity)) refuse('jitter', jitterMps, '[0, infinity) m/s');
}

function checkFileNames({ instruments, photometry }: MockPlan): void {
  const seen = new Map<string, string>();
  const wanted = [
    ...instruments.map(({ name, table }) => ({ who: `instrument ${name}`, table })),
    ...(photometry?.lightCurves ?? []).map(({ table }, i) => ({ who: `light curve ${i + 1}`, table })),
    ...(photometry?.midTimes ?? []).map(({ table }, i) => ({ who: `mid-times ${i + 1}`, table })),
  ];
  for (const { who, table } of wanted) {
    if (!/^[^/\\\p{Cc}]+$/u.test(table) || /^\.+$/.test(table))
      throw new UsageError(`${who}: "${table}" cannot be the file name of a table`, {
        allowed: 'a plain file name such as north.csv; the folder is chosen with --out',
      });
    // some file systems do not tell North.csv from north.csv
    const other = seen.get(table.toLowerCase());
    if (other !== undefined)
      throw new UsageError(
        `${who}: ${other.startsWith('instrument') ? 'another instrument' : other} already writes the table "${table}"`,
        { hint: 'give each instrument a table of its own' },
      );
    seen.set(table.toLowerCase(), who);
  }
}
