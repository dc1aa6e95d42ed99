/** Simulated data sets with known truth, for measuring what the solver misses. All invented; seeds are fixed by the caller. */
import type { RandomStream } from '../../src/numerics/random.js';
import {
  count,
  logUniform,
  orbit,
  sampledStrength,
  simulate,
  siteTimes,
  spacedPeriods,
  type SimulatedSet,
} from './simulate.js';

export interface Kind {
  readonly name: string;
  readonly companions: number;
  readonly sets: number;
  make(random: RandomStream): SimulatedSet;
}

export const KINDS: readonly Kind[] = [
  {
    name: 'one companion',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(400, 2000);
      const sigmaMps = random.uniformBetween(1, 5);
      const k = sigmaMps * random.uniformBetween(3, 15);
      const companion = orbit(
        random,
        logUniform(random, 3, 0.5 * spanDays),
        random.uniformBetween(0, 0.6),
        k,
      );
      return simulate(random, { count: count(random, 35, 80), spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    // An orbit whose swing through periastron fell between the observations cannot be found by anybody: the strength as
    // sampled is at least 16 sigma.
    name: 'very eccentric',
    companions: 1,
    sets: 20,
    make(random) {
      for (;;) {
        const spanDays = random.uniformBetween(500, 2000);
        const sigmaMps = random.uniformBetween(1, 5);
        const times = siteTimes(random, count(random, 45, 90), spanDays);
        const k = sigmaMps * random.uniformBetween(10, 40);
        const companion = orbit(
          random,
          logUniform(random, 15, 0.6 * spanDays),
          random.uniformBetween(0.6, 0.93),
          k,
        );
        if (sampledStrength(companion, times, sigmaMps) < 16) continue;
        return simulate(random, { count: times.length, times, spanDays, companions: [companion], sigmaMps });
      }
    },
  },
  {
    name: 'three instruments',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(600, 2500);
      const sigmaMps = random.uniformBetween(1, 3);
      const k = sigmaMps * random.uniformBetween(5, 20);
      const companion = orbit(
        random,
        logUniform(random, 3, 0.4 * spanDays),
        random.uniformBetween(0, 0.5),
        k,
      );
      return simulate(random, {
        count: count(random, 60, 110),
        spanDays,
        companions: [companion],
        sigmaMps,
        instruments: 3,
      });
    },
  },
  {
    name: 'two companions',
    companions: 2,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(800, 2500);
      const sigmaMps = random.uniformBetween(1, 3);
      const companions = spacedPeriods(random, 2, 3, 0.4 * spanDays).map((p) =>
        orbit(random, p, random.uniformBetween(0, 0.4), sigmaMps * random.uniformBetween(4, 15)),
      );
      return simulate(random, { count: count(random, 70, 120), spanDays, companions, sigmaMps });
    },
  },
  {
    name: 'three companions and drift',
    companions: 3,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(1000, 3000);
      const sigmaMps = random.uniformBetween(1, 2.5);
      const companions = spacedPeriods(random, 3, 3, 0.3 * spanDays).map((p) =>
        orbit(random, p, random.uniformBetween(0, 0.3), sigmaMps * random.uniformBetween(4, 12)),
      );
      const slopeMpsPerDay =
        (sigmaMps * random.uniformBetween(3, 12) * (random.uniform() < 0.5 ? -1 : 1)) / spanDays;
      return simulate(random, {
        count: count(random, 120, 170),
        spanDays,
        companions,
        sigmaMps,
        slopeMpsPerDay,
      });
    },
  },
  {
    name: 'period 0.55-0.95 of the span',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(800, 2500);
      const sigmaMps = random.uniformBetween(1, 4);
      const k = sigmaMps * random.uniformBetween(5, 20);
      const companion = orbit(
        random,
        spanDays * random.uniformBetween(0.55, 0.95),
        random.uniformBetween(0, 0.5),
        k,
      );
      return simulate(random, { count: count(random, 40, 80), spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    name: 'period near one day, one site',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(200, 900);
      const sigmaMps = random.uniformBetween(1, 3);
      const offset = random.uniformBetween(0.01, 0.12) * (random.uniform() < 0.5 ? -1 : 1);
      const companion = orbit(
        random,
        1 + offset,
        random.uniformBetween(0, 0.1),
        sigmaMps * random.uniformBetween(3, 12),
      );
      return simulate(random, { count: count(random, 45, 90), spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    // sigma_K = sigma sqrt(2/n) of an evenly sampled circular orbit.
    name: 'faint (K = 7 sigma_K)',
    companions: 1,
    sets: 20,
    make(random) {
      const spanDays = random.uniformBetween(400, 1200);
      const n = count(random, 60, 110);
      const sigmaMps = random.uniformBetween(1, 3);
      const companion = orbit(
        random,
        logUniform(random, 3, 0.3 * spanDays),
        random.uniformBetween(0, 0.15),
        7 * sigmaMps * Math.sqrt(2 / n),
      );
      return simulate(random, { count: n, spanDays, companions: [companion], sigmaMps });
    },
  },
  {
    name: 'nothing but noise',
    companions: 0,
    sets: 200,
    make(random) {
      const spanDays = random.uniformBetween(300, 2500);
      const instruments = 1 + random.integerBelow(3);
      const sigmaMps = random.uniformBetween(1, 5);
      return simulate(random, {
        count: count(random, 30, 110),
        spanDays,
        companions: [],
        sigmaMps,
        instruments,
      });
    },
  },
];
