/** What draws of masses and eccentricities mean for osculating elements, jitters and mid-times, observed and to come. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import { RandomStream } from '../../numerics/random.js';
import { InteractionDensity } from './interaction-density.js';
import type { InteractionDraws } from './interaction-draws.js';
import type { InteractionModel } from './interaction-model.js';
import type { InteractionSolution } from './interaction-search.js';
import type { InteractionPrediction, InteractionTable } from './interaction-types.js';

/** So many draws are integrated once more. */
const MOST_FOLLOWED = 300;
const STREAM = 2;

/** Draws of what follows from masses and eccentricities; rows of a companion's arrays belong together. */
export interface FollowedDraws {
  readonly periodsDays: readonly Float64Array[];
  /** First inferior conjunction of the osculating ellipse after the epoch, on the axis of the tables. */
  readonly conjunctionsDays: readonly Float64Array[];
  readonly jittersDays: readonly Float64Array[];
}

export interface Followed {
  readonly draws: FollowedDraws;
  readonly predictions: Omit<InteractionPrediction, 'observedSpanDays'>[];
  /** Osculating elements at the best fit, lines corrected. */
  readonly bestPeriodsDays: readonly number[];
  readonly bestConjunctionsDays: readonly number[];
}

/** @param tables - those that the model was made of */
export function followDraws(
  model: InteractionModel,
  tables: readonly InteractionTable[],
  solution: InteractionSolution,
  draws: InteractionDraws,
  eccentricityScale: number,
  seed: number,
): Followed {
  model.anchorAt(solution.point);
  model.predict(solution.point);
  const best = tables.map((table, c) => bestOf(model, table, c, solution.jittersDays[c]!));
  const density = new InteractionDensity(model, eccentricityScale);
  const random = RandomStream.fromSeed(seed, STREAM);
  const stride = Math.max(1, Math.ceil(draws.points.length / MOST_FOLLOWED));
  const periods: number[][] = tables.map(() => []);
  const conjunctions: number[][] = tables.map(() => []);
  const jitters: number[][] = tables.map(() => []);
  const spreads = best.map(({ times }) => new Spread(times.length));
  for (let d = 0; d < draws.points.length; d += stride) {
    if (!Number.isFinite(density.logDensity(draws.points[d]!))) continue;
    density.drawNuisances(random).forEach(({ jitterDays, level, slope }, c) => {
      const { firstCycle, meanCycle } = model.lines[c]!;
      const { periodDays, conjunctionDays } = model.osculating(c);
      periods[c]!.push(periodDays + slope);
      conjunctions[c]!.push(model.epochDays + conjunctionDays + level + slope * (firstCycle - meanCycle));
      jitters[c]!.push(jitterDays);
      const found = model.allTimes(c);
      const { times, cycles } = best[c]!;
      const spread = spreads[c]!;
      for (let i = 0; i < times.length; i++) {
        const at = cycles[i]! - found.firstCycle;
        const time = found.timesDays[at];
        // A future cycle just beyond the end of this draw's integration is left out of its spread.
        if (time !== undefined) spread.add(i, time + level + slope * (cycles[i]! - meanCycle) - times[i]!);
      }
    });
  }
  return {
    draws: {
      periodsDays: periods.map((values) => Float64Array.from(values)),
      conjunctionsDays: conjunctions.map((values) => Float64Array.from(values)),
      jittersDays: jitters.map((values) => Float64Array.from(values)),
    },
    predictions: best.map((b, c) => ({
      letter: tables[c]!.letter,
      cycles: b.cycles,
      timesDays: b.times.map((t) => model.epochDays + t),
      sigmasDays: spreads[c]!.deviations(),
      variationMinutes: b.variationMinutes,
      observedVariationMinutes: b.observedVariationMinutes,
      residualMinutes: b.residualMinutes,
      lineDays: b.lineDays,
    })),
    bestPeriodsDays: best.map(({ periodDays }) => periodDays),
    bestConjunctionsDays: best.map(({ conjunctionDays }) => conjunctionDays),
  };
}

interface Best {
  readonly cycles: Int32Array;
  /** Since the epoch. */
  readonly times: Float64Array;
  readonly variationMinutes: Float64Array;
  readonly observedVariationMinutes: Float64Array;
  readonly residualMinutes: Float64Array;
  readonly lineDays: readonly [number, number];
  readonly periodDays: number;
  readonly conjunctionDays: number;
}

/** The best fit along all cycles of one companion; the model's present prediction is that of the best fit. */
function bestOf(model: InteractionModel, table: InteractionTable, c: number, jitterDays: number): Best {
  const { meanCycle, timeDays, periodDays, firstCycle } = model.lines[c]!;
  const likelihood = model.likelihoods[c]!;
  const observed = model.observedDays[c]!;
  const predicted = model.predictedDays[c]!;
  likelihood.evaluate(
    observed.map((time, i) => time - predicted[i]!),
    jitterDays,
  );
  const level = likelihood.line[0]!;
  const slope = likelihood.line[1]! / likelihood.cycleScale;
  const found = model.allTimes(c);
  const cycles = Int32Array.from(found.timesDays, (_, i) => found.firstCycle + i);
  const times = found.timesDays.map((time, i) => time + level + slope * (cycles[i]! - meanCycle));
  const onLine = (cycle: number): number => timeDays + periodDays * (cycle - meanCycle);
  const element = model.osculating(c);
  return {
    cycles,
    times,
    variationMinutes: times.map((time, i) => MINUTES_PER_DAY * (time - onLine(cycles[i]!))),
    observedVariationMinutes: observed.map((time, i) => MINUTES_PER_DAY * (time - onLine(table.cycles[i]!))),
    residualMinutes: likelihood.reduced.map((r) => MINUTES_PER_DAY * r),
    lineDays: [model.epochDays + onLine(0), periodDays],
    periodDays: element.periodDays + slope,
    conjunctionDays: model.epochDays + element.conjunctionDays + level + slope * (firstCycle - meanCycle),
  };
}

/** Running standard deviations of many departures. */
class Spread {
  private readonly counts: Float64Array;
  private readonly means: Float64Array;
  private readonly squares: Float64Array;

  constructor(size: number) {
    this.counts = new Float64Array(size);
    this.means = new Float64Array(size);
    this.squares = new Float64Array(size);
  }

  add(i: number, value: number): void {
    const step = value - this.means[i]!;
    this.counts[i]!++;
    this.means[i]! += step / this.counts[i]!;
    this.squares[i]! += step * (value - this.means[i]!);
  }

  /** NaN where fewer than two values came in. */
  deviations(): Float64Array {
    return this.squares.map((square, i) =>
      this.counts[i]! > 1 ? Math.sqrt(square / (this.counts[i]! - 1)) : NaN,
    );
  }
}
