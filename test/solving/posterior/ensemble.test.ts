import { readFileSync } from 'node:fs';
import { describe, it } from 'vitest';
import { RandomStream } from '../../../src/numerics/random.js';
import { mean, standardDeviation } from '../../../src/numerics/summary.js';
import { NutsChain } from '../../../src/numerics/sampling/nuts.js';
import type { PortablePoint } from '../../../src/solving/model-builder.js';
import { curvatureOfDensity } from '../../../src/solving/posterior/density-curvature.js';
import type { PriorScales } from '../../../src/solving/posterior/priors.js';
import { expectWithin } from '../../support/expect-within.js';
import { densityFor } from './densities.js';

/** Made by reference/ensemble/generate.py, which shares no line with the program. */
interface Reference {
  readonly scales: PriorScales;
  readonly problems: readonly {
    readonly name: string;
    readonly circular: boolean;
    readonly truth: readonly {
      readonly periodDays: number;
      readonly meanLongitudeRad: number;
      readonly eccentricity: number;
      readonly argPeriastronStarRad: number;
      readonly semiAmplitudeMps: number;
    }[];
    readonly timesDays: readonly number[];
    readonly velocitiesMps: readonly number[];
    readonly sigmasMps: readonly number[];
    readonly expected: Readonly<
      Record<
        string,
        {
          readonly mean: number;
          readonly meanError: number;
          readonly sd: number;
          readonly sdError: number;
          readonly effectiveDraws: number;
        }
      >
    >;
  }[];
}

const reference = JSON.parse(
  readFileSync(new URL('../../reference/ensemble/ensemble.json', import.meta.url), 'utf8'),
) as Reference;
type Problem = Reference['problems'][number];

const CHAINS = 2;
const DRAWS = 4000;

function densityOf(problem: Problem): ReturnType<typeof densityFor> {
  return densityFor({
    data: {
      timesDays: Float64Array.from(problem.timesDays),
      velocitiesMps: Float64Array.from(problem.velocitiesMps),
      sigmasMps: Float64Array.from(problem.sigmasMps),
      instrumentOf: new Uint16Array(problem.timesDays.length),
      instrumentCount: 1,
    },
    companions: problem.truth.map(() => ({ circular: problem.circular })),
    scales: reference.scales,
  });
}

function startOf(problem: Problem): PortablePoint {
  return {
    companions: problem.truth.map(({ meanLongitudeRad, ...rest }) => ({
      ...rest,
      timePeriastronDays: ((rest.argPeriastronStarRad - meanLongitudeRad) * rest.periodDays) / (2 * Math.PI),
    })),
    zeroPointsMps: Float64Array.of(4),
    drift: [0, 0],
    jittersMps: Float64Array.of(2),
  };
}

/** The numbers of the reference file at one draw. */
function numbersOf(problem: Problem, point: PortablePoint): Record<string, number> {
  const numbers: Record<string, number> = {
    'zero point': point.zeroPointsMps[0]!,
    jitter: point.jittersMps[0]!,
  };
  point.companions.forEach((companion, c) => {
    const letter = 'bc'[c]!;
    const omega = companion.argPeriastronStarRad;
    const near = problem.truth[c]!.meanLongitudeRad;
    const longitude = omega - (2 * Math.PI * companion.timePeriastronDays) / companion.periodDays;
    const root = Math.sqrt(companion.eccentricity);
    numbers[`${letter} ln P`] = Math.log(companion.periodDays);
    numbers[`${letter} mean longitude`] =
      longitude - 2 * Math.PI * Math.round((longitude - near) / (2 * Math.PI));
    numbers[`${letter} e`] = companion.eccentricity;
    numbers[`${letter} sqrt(e) cos omega`] = root * Math.cos(omega);
    numbers[`${letter} sqrt(e) sin omega`] = root * Math.sin(omega);
    numbers[`${letter} K`] = companion.semiAmplitudeMps;
  });
  return numbers;
}

describe('posterior against an independent ensemble sampler (reference/ensemble/ensemble.json, emcee 3.1.4)', () => {
  it.each(reference.problems.map((problem) => [problem.name, problem] as const))('%s', (_, problem) => {
    const density = densityOf(problem);
    const start = density.position(startOf(problem));
    const covariance = curvatureOfDensity(density, start);
    const series = new Map(Object.keys(problem.expected).map((name) => [name, [] as number[]]));
    for (let chain = 0; chain < CHAINS; chain++) {
      const sampler = new NutsChain(
        density,
        { start, covariance, warmup: 300 },
        RandomStream.fromSeed(17, chain),
      );
      const { positions } = sampler.draw(DRAWS);
      for (let at = 0; at < positions.length; at += density.size) {
        const numbers = numbersOf(problem, density.portable(positions.subarray(at, at + density.size)));
        for (const [name, values] of series) values.push(numbers[name]!);
      }
    }
    for (const [name, values] of series) {
      const expected = problem.expected[name]!;
      const why = `${name}; ${expected.effectiveDraws} effective draws there, ${values.length} draws here`;
      expectWithin(mean(values), expected.mean, { abs: 0.1 * expected.sd, unit: 'of the quantity', why });
      expectWithin(standardDeviation(values), expected.sd, { rel: 0.05, unit: 'of the quantity', why });
    }
  });
});
