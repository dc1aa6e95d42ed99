/**
 * Simulated survey light curves with known truth. The noise is chosen so that the folded signal-to-noise, computed from the
 * truth, lies between 8 and 100: what is counted can be found. All invented; seeds are fixed by the caller.
 */
import type { RandomStream } from '../../../src/numerics/random.js';
import { logUniform } from '../simulate.js';
import {
  anyRatio,
  dwarf,
  keepsClear,
  limbOf,
  orbitWithConjunction,
  simulateLight,
  type CompanionRecipe,
  type LightRecipe,
  type SimulatedLight,
} from './simulate.js';

export interface LightKind {
  readonly name: string;
  readonly companions: number;
  readonly sets: number;
  make(random: RandomStream): SimulatedLight;
}

const LEAST_SIGNAL = 8;
const LARGEST_SIGNAL = 100;
const CADENCES_DAYS = [2 / 1440, 10 / 1440, 30 / 1440];
/** Fewer events than this say too little of a period. */
const LEAST_EVENTS = 3;

type Draft = Omit<LightRecipe, 'sigma' | 'companions'>;

/** An undisturbed month. */
function draft(random: RandomStream, changes: Partial<Draft> = {}): Draft {
  const star = dwarf(random);
  return {
    spanDays: random.uniformBetween(24, 28),
    cadenceDays: CADENCES_DAYS[random.integerBelow(CADENCES_DAYS.length)]!,
    gaps: [],
    star,
    limb: limbOf(random),
    redNoise: null,
    variability: null,
    velocities: null,
    ...changes,
  };
}

interface Wanted {
  readonly eccentricity?: number;
  readonly semiAmplitudeMps?: number;
  /** From the radius ratio. */
  readonly impact: (random: RandomStream, radiusRatio: number) => number;
  readonly ratio?: (random: RandomStream) => number;
  readonly periodDays?: number;
}

const CENTRAL = (random: RandomStream): number => random.uniformBetween(0, 0.85);

function companion(random: RandomStream, recipe: Draft, wanted: Wanted): CompanionRecipe | null {
  const periodDays = wanted.periodDays ?? logUniform(random, 0.7, 0.3 * recipe.spanDays);
  const eccentricity = wanted.eccentricity ?? 0;
  if (!keepsClear(recipe.star, periodDays, eccentricity)) return null;
  const radiusRatio = (wanted.ratio ?? anyRatio)(random);
  return {
    orbit: orbitWithConjunction(random, {
      periodDays,
      eccentricity,
      argPeriastronStarRad: eccentricity === 0 ? Math.PI / 2 : random.uniformBetween(0, 2 * Math.PI),
      semiAmplitudeMps: wanted.semiAmplitudeMps ?? 0,
    }),
    radiusRatio,
    impactParameter: wanted.impact(random, radiusRatio),
  };
}

/** Draws until everything fits, then sets the noise for the weakest companion's signal-to-noise. */
function drawn(
  random: RandomStream,
  make: () => {
    readonly recipe: Draft;
    readonly companions: readonly (CompanionRecipe | null)[];
    readonly signal?: number;
  },
): SimulatedLight {
  for (;;) {
    const { recipe, companions, signal } = make();
    if (companions.includes(null)) continue;
    const all = companions as readonly CompanionRecipe[];
    const wanted = signal ?? logUniform(random, LEAST_SIGNAL, LARGEST_SIGNAL);
    // With unit noise first: white signal-to-noise is inversely proportional to it.
    const probe = simulateLight(random, {
      ...recipe,
      companions: all,
      sigma: 1,
      redNoise: null,
      variability: null,
      velocities: null,
    });
    const weakest = Math.min(...probe.truth.map(({ signalToNoise }) => signalToNoise));
    const sigma = weakest / wanted;
    if (!(sigma > 1e-5 && sigma < 0.02)) continue;
    const red = recipe.redNoise === null ? null : { ...recipe.redNoise, size: recipe.redNoise.size * sigma };
    const set = simulateLight(random, { ...recipe, companions: all, sigma, redNoise: red });
    const counts = set.truth.every(
      ({ signalToNoise, seen }) => signalToNoise > LEAST_SIGNAL && seen.length >= LEAST_EVENTS,
    );
    if (counts) return set;
  }
}

const SETS = 40;

export const LIGHT_KINDS: readonly LightKind[] = [
  {
    name: 'survey, any transit',
    companions: 1,
    sets: SETS,
    make: (random) =>
      drawn(random, () => {
        const recipe = draft(random);
        return { recipe, companions: [companion(random, recipe, { impact: CENTRAL })] };
      }),
  },
  {
    name: 'survey, grazing',
    companions: 1,
    sets: SETS,
    make: (random) =>
      drawn(random, () => {
        const recipe = draft(random);
        const impact = (stream: RandomStream, k: number): number => stream.uniformBetween(1 - k, 1 + 0.6 * k);
        const ratio = (stream: RandomStream): number => logUniform(stream, 0.05, 0.2);
        return { recipe, companions: [companion(random, recipe, { impact, ratio })] };
      }),
  },
  {
    name: 'survey, eccentric with velocities',
    companions: 1,
    sets: SETS,
    make: (random) =>
      drawn(random, () => {
        const sigmaMps = random.uniformBetween(1.5, 4);
        const recipe = draft(random, { velocities: { count: 25 + random.integerBelow(16), sigmaMps } });
        const wanted = {
          impact: CENTRAL,
          eccentricity: random.uniformBetween(0.1, 0.6),
          semiAmplitudeMps: sigmaMps * random.uniformBetween(5, 25),
          periodDays: logUniform(random, 2, 0.3 * recipe.spanDays),
        };
        return { recipe, companions: [companion(random, recipe, wanted)] };
      }),
  },
  {
    name: 'survey, red noise',
    companions: 1,
    sets: SETS,
    make: (random) =>
      drawn(random, () => {
        const recipe = draft(random, {
          // in units of the white noise; a tenth to a half of it
          redNoise: { size: random.uniformBetween(0.1, 0.5), timeDays: random.uniformBetween(0.5, 4) / 24 },
        });
        return {
          recipe,
          companions: [companion(random, recipe, { impact: CENTRAL })],
          signal: logUniform(random, 12, LARGEST_SIGNAL),
        };
      }),
  },
  {
    name: 'survey, spotted star',
    companions: 1,
    sets: SETS,
    make: (random) =>
      drawn(random, () => {
        const recipe = draft(random, {
          variability: {
            size: logUniform(random, 5e-4, 8e-3),
            periodDays: random.uniformBetween(4, 20),
            lifetimeDays: random.uniformBetween(15, 60),
          },
        });
        return { recipe, companions: [companion(random, recipe, { impact: CENTRAL })] };
      }),
  },
  {
    name: 'survey, a third of it missing',
    companions: 1,
    sets: SETS,
    make: (random) =>
      drawn(random, () => {
        const recipe = draft(random);
        const gaps = Array.from({ length: 5 }, () => ({
          afterDays: random.uniform() * recipe.spanDays,
          lengthDays: random.uniformBetween(0.03, 0.1) * recipe.spanDays,
        }));
        return {
          recipe: { ...recipe, gaps },
          companions: [companion(random, recipe, { impact: CENTRAL })],
        };
      }),
  },
  {
    name: 'survey, two companions',
    companions: 2,
    sets: SETS,
    make: (random) =>
      drawn(random, () => {
        const recipe = draft(random);
        const inner = logUniform(random, 1, 0.12 * recipe.spanDays);
        const outer = inner * random.uniformBetween(1.35, 2.4);
        // of comparable size, so that the weaker one is not below the noise of the stronger one's neighbourhood
        const first = anyRatio(random);
        const second = Math.min(0.2, Math.max(0.02, first * random.uniformBetween(0.6, 1.6)));
        return {
          recipe,
          companions: [
            companion(random, recipe, { impact: CENTRAL, periodDays: inner, ratio: () => first }),
            companion(random, recipe, { impact: CENTRAL, periodDays: outer, ratio: () => second }),
          ],
        };
      }),
  },
  {
    name: 'no transits, white noise',
    companions: 0,
    sets: 150,
    make: (random) =>
      simulateLight(random, { ...draft(random), companions: [], sigma: logUniform(random, 1e-4, 5e-3) }),
  },
  {
    name: 'no transits, red noise and spots',
    companions: 0,
    sets: 150,
    make(random) {
      const sigma = logUniform(random, 1e-4, 5e-3);
      const recipe = draft(random, {
        redNoise: {
          size: sigma * random.uniformBetween(0.1, 1),
          timeDays: random.uniformBetween(0.5, 6) / 24,
        },
        variability: {
          size: sigma * logUniform(random, 0.5, 20),
          periodDays: random.uniformBetween(3, 20),
          lifetimeDays: random.uniformBetween(10, 60),
        },
      });
      return simulateLight(random, { ...recipe, companions: [], sigma });
    },
  },
];
