import { describe, expect, it } from 'vitest';
import { RandomStream } from '../../src/numerics/random.js';
import { evaluateVelocity } from '../../src/signals/evaluate-velocity.js';
import { makeBackground, type LinearBackground } from '../../src/solving/linear-background.js';
import { Periodogram, periodogramPower, sinusoidAt } from '../../src/solving/periodogram.js';
import invented from '../reference/search/invented-velocities.json' with { type: 'json' };
import search from '../reference/search/search.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';
import { denseFit, scatteredTimes } from './helpers.js';

const FAST = { abs: 2e-9, unit: '1', why: 'sums good to 1e-10 each, divided by norms of order 0.1' };
const DIRECT = { abs: 1e-12, unit: '1', why: 'two direct ways to the same ratio of sums' };

const EPOCH = invented.rows.reduce((sum, row) => sum + row[0]!, 0) / invented.rows.length;
const TIMES = Float64Array.from(invented.rows, (row) => row[0]! - EPOCH);
const VELOCITIES = Float64Array.from(invented.rows, (row) => row[1]!);
const WEIGHTS = Float64Array.from(invented.rows, (row) => row[2]! ** -2);

function withFloatingMean(): LinearBackground {
  return makeBackground(TIMES, VELOCITIES, WEIGHTS, [new Float64Array(TIMES.length).fill(1)]);
}

const waves = (times: Float64Array, frequency: number): Float64Array[] => [
  times.map((t) => Math.cos(2 * Math.PI * frequency * t)),
  times.map((t) => Math.sin(2 * Math.PI * frequency * t)),
];

describe('one instrument with a floating mean', () => {
  it('powers and amplitudes match search.json (dense least squares in numpy)', () => {
    const background = withFloatingMean();
    expectWithin(background.chiSquare, search.chiSquareOfConstant, {
      rel: 1e-12,
      unit: '1',
      why: 'one weighted mean and a sum',
    });
    for (const [frequency, power, amplitude] of search.powers as [number, number, number][]) {
      const fit = sinusoidAt(background, frequency);
      expectWithin(fit.power, power, DIRECT);
      expectWithin(Math.hypot(fit.cosAmplitude, fit.sinAmplitude), amplitude, {
        rel: 1e-11,
        unit: 'm/s',
        why: 'conditioning of 3 columns',
      });
      const grid = { startPerDay: frequency - 7 * 1.3e-4, stepPerDay: 1.3e-4, count: 20 };
      expectWithin(periodogramPower(background, grid)[7]!, power, FAST);
    }
  });

  it('has its highest peak where search.json has it', () => {
    const grid = { startPerDay: 0.002, stepPerDay: 1e-5, count: 59801 };
    const power = periodogramPower(withFloatingMean(), grid);
    const top = power.indexOf(Math.max(...power));
    expectWithin(grid.startPerDay + top * grid.stepPerDay, search.peak.frequencyPerDay, {
      abs: 0.6e-5,
      unit: '1/d',
      why: 'half a step of the grid',
    });
    expectWithin(
      sinusoidAt(withFloatingMean(), search.peak.frequencyPerDay).power,
      search.peak.power,
      DIRECT,
    );
    expect(power.every((value) => value >= 0 && value <= 1)).toBe(true);
  });
});

/** Three instruments, a quadratic drift and the five directions of an eccentric orbit, by difference quotients. */
function crowded(seed: number): {
  background: LinearBackground;
  columns: Float64Array[];
  data: Float64Array;
} {
  const random = RandomStream.fromSeed(seed);
  const times = scatteredTimes(random, 60, 700).map((t) => t - 2459350.5);
  const weights = times.map(() => random.uniformBetween(0.2, 3));
  const data = times.map(() => 10 * random.normal());
  const instrument = times.map((_, i) => i % 3);
  const columns = [0, 1, 2].map((wanted) => instrument.map((one) => (one === wanted ? 1 : 0)));
  columns.push(
    Float64Array.from(times),
    times.map((t) => 0.5 * t * t),
  );
  const elements = [91, 0.45, 2, 13, 40];
  const velocity = ([periodDays, eccentricity, argPeriastronStarRad, timePeriastronBjdTdb, semiAmplitudeMps]: number[]): Float64Array =>
    evaluateVelocity(
      {
        companions: [{ periodDays: periodDays!, eccentricity: eccentricity!, argPeriastronStarRad: argPeriastronStarRad!, timePeriastronBjdTdb: timePeriastronBjdTdb!, semiAmplitudeMps: semiAmplitudeMps! }],
        letters: ['b'], zeroPointsMps: new Float64Array(0), jittersMps: new Float64Array(0), epochBjdTdb: 0, slopeMpsPerDay: 0, curvatureMpsPerDay2: 0,
      },
      times,
    ); // prettier-ignore
  elements.forEach((value, j) => {
    const [above, below] = [1, -1].map((sign) =>
      velocity(elements.map((element, k) => (k === j ? value + sign * 1e-6 : element))),
    );
    columns.push(above!.map((v, i) => (v - below![i]!) / 2e-6));
  });
  return { background: makeBackground(times, data, weights, columns), columns, data };
}

describe('several instruments, quadratic drift and the partials of a companion as background', () => {
  for (const seed of [1, 2, 3]) {
    it(`fast grid and direct sums match a dense solve at each frequency, seed ${seed}`, () => {
      const { background, columns, data } = crowded(seed);
      const { timesDays, weights } = background;
      const alone = denseFit(columns, data, weights);
      expectWithin(background.chiSquare, alone.chiSquare, {
        rel: 1e-9,
        unit: '1',
        why: 'conditioning of ten columns',
      });
      const grid = { startPerDay: 1 / 1050, stepPerDay: 1 / 7000, count: 14000 };
      const power = periodogramPower(background, grid);
      for (let j = 0; j < grid.count; j += 233) {
        const frequency = grid.startPerDay + j * grid.stepPerDay;
        const [cosine, sine] = waves(timesDays, frequency);
        const full = denseFit([...columns, cosine!, sine!], data, weights);
        const want = 1 - full.chiSquare / alone.chiSquare;
        expectWithin(power[j]!, want, {
          abs: 2e-7,
          unit: '1',
          why: 'near the drift and the companion a small share of the wave is left: errors of 1e-10 are amplified',
        });
        const fit = sinusoidAt(background, frequency);
        expectWithin(fit.power, want, { abs: 1e-8, unit: '1', why: 'the same, without the fast sums' });
        expectWithin(fit.cosAmplitude, full.solution.at(-2)!, {
          abs: 1e-6,
          unit: 'm/s',
          why: 'conditioning of twelve columns',
        });
      }
    });
  }

  it('the residuals are orthogonal to every column, dependent columns make no difference', () => {
    const { background, columns, data } = crowded(4);
    for (const column of columns) {
      const size = Math.sqrt(background.weights.reduce((sum, w, i) => sum + w * column[i]! ** 2, 0));
      const dot = background.weights.reduce(
        (sum, w, i) => sum + w * column[i]! * background.residuals[i]!,
        0,
      );
      expectWithin(dot / size, 0, { abs: 1e-9, unit: 'm/s', why: 'two passes of projection' });
    }
    const doubled = [
      ...columns,
      new Float64Array(60).fill(1),
      columns[3]!.map((v, i) => v + columns[7]![i]!),
      new Float64Array(60),
    ];
    const again = makeBackground(background.timesDays, data, background.weights, doubled);
    expect(again.basis).toHaveLength(background.basis.length);
    expectWithin(again.chiSquare, background.chiSquare, { rel: 1e-10, unit: '1', why: 'the same space' });
  });

  it('one preparation serves other residuals (as permutations use it)', () => {
    const { background } = crowded(5);
    const grid = { startPerDay: 0.002, stepPerDay: 1e-4, count: 3000 };
    const shared = new Periodogram(grid);
    shared.prepare(background);
    const flipped = makeBackground(
      background.timesDays,
      background.residuals.map((r, i) => (i % 2 === 0 ? r : -r)),
      background.weights,
      background.basis,
    );
    const power = new Float64Array(grid.count);
    shared.powerOf(background, flipped.residuals, flipped.chiSquare, power);
    const fresh = periodogramPower(flipped, grid);
    power.forEach((value, j) => {
      expectWithin(value, fresh[j]!, FAST);
    });
  });
});

describe('frequencies that cannot be told from the background', () => {
  it('have no power: frequency 0, the sampling itself, a circular companion already in the model', () => {
    const random = RandomStream.fromSeed(8);
    const nights = Float64Array.from({ length: 40 }, (_, i) => 2 * i - 30 + (i % 3));
    const weights = nights.map(() => random.uniformBetween(0.5, 2));
    const data = nights.map(() => random.normal());
    const mean = new Float64Array(40).fill(1);
    const background = makeBackground(nights, data, weights, [mean]);
    // Every date is a whole number of days: 1/d and 2/d cannot be told from a constant.
    for (const frequency of [0, 1, 2]) expect(sinusoidAt(background, frequency).power).toBe(0);
    const nothing = { abs: 1e-9, unit: '1', why: 'what rounding of the fast sums leaves' };
    for (const value of periodogramPower(background, { startPerDay: 0, stepPerDay: 1, count: 3 })) {
      expectWithin(value, 0, nothing);
    }
    // Below and above 1/d the same wave: power is mirrored.
    expectWithin(sinusoidAt(background, 0.87).power, sinusoidAt(background, 0.13).power, DIRECT);
    const withCompanion = makeBackground(nights, data, weights, [mean, ...waves(nights, 0.213)]);
    expect(sinusoidAt(withCompanion, 0.213).power).toBe(0);
    const grid = { startPerDay: 0.113, stepPerDay: 0.01, count: 20 };
    expectWithin(periodogramPower(withCompanion, grid)[10]!, 0, nothing);
  });

  it('a perfect sinusoid has power 1, velocities that the background explains have no power anywhere', () => {
    const times = Float64Array.from({ length: 25 }, (_, i) => 3.3 * i + Math.sin(5 * i) - 40);
    const ones = new Float64Array(25).fill(1);
    const pure = times.map((t) => 4 + 7 * Math.cos(2 * Math.PI * 0.0731 * t + 1));
    const fit = sinusoidAt(makeBackground(times, pure, ones, [ones]), 0.0731);
    expectWithin(fit.power, 1, { abs: 1e-12, unit: '1', why: 'exact but for rounding' });
    expectWithin(fit.cosAmplitude, 7 * Math.cos(1), { abs: 1e-11, unit: 'm/s', why: 'as simulated' });
    expectWithin(fit.sinAmplitude, -7 * Math.sin(1), { abs: 1e-11, unit: 'm/s', why: 'as simulated' });
  });

  it('is unchanged by the order of the rows, by an offset and, scaled, by the unit', () => {
    const { background } = crowded(9);
    const { timesDays, weights, residuals } = background;
    const ones = new Float64Array(60).fill(1);
    const order = Float64Array.from({ length: 60 }, (_, i) => i);
    RandomStream.fromSeed(10).shuffle(order);
    const take = (values: Float64Array): Float64Array => Float64Array.from(order, (i) => values[i]!);
    const plain = makeBackground(timesDays, residuals, weights, [ones]);
    const other = makeBackground(
      take(timesDays),
      take(residuals).map((r) => 1000 * r + 12345),
      take(weights),
      [ones],
    );
    for (const frequency of [0.003, 0.0417, 0.31, 0.9973]) {
      expectWithin(sinusoidAt(other, frequency).power, sinusoidAt(plain, frequency).power, DIRECT);
    }
  });
});
