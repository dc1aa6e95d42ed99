/**
 * Where fits of interacting companions begin. Near a first-order resonance the observed variation is a sinusoid with the
 * super-period whose amplitudes and phases give masses for every assumed free eccentricity [Lithwick2012]: starts are laid
 * along that degeneracy. Elsewhere a few masses and eccentricities are tried.
 */
import {
  nearestResonance,
  nearResonantVariation,
  resonanceCoefficients,
} from '../../orbit/interaction/near-resonance.js';
import { COORDINATES } from './interaction-model.js';
import type { InteractionModel } from './interaction-model.js';

/** Farthest |Delta| at which the near-resonant formula is of use. */
export const FARTHEST_RESONANCE = 0.06;
const FREE_ECCENTRICITIES = [0, 0.005, 0.012, 0.03, 0.07, 0.15];
const PHASES = 36;
const LEAST_MASS = 1e-7;
const MOST_MASS = 3e-3;

/** Fitted amplitudes of sin and cos of the longitude of conjunctions, days, for one companion. */
interface Wave {
  readonly re: number;
  readonly im: number;
  /** Mean of the inverse variances of both. */
  readonly weight: number;
}

/** Companions from the shortest period to the longest, as indices of tables. */
export function orderByPeriod(model: InteractionModel): number[] {
  return model.lines.map((_, t) => t).sort((a, b) => model.lines[a]!.periodDays - model.lines[b]!.periodDays);
}

/** Points (coordinates of the model) from which fits are worth while; the most promising first. */
export function interactionStarts(model: InteractionModel): Float64Array[] {
  const order = orderByPeriod(model);
  const pairs = order.slice(1).map((outer, at) => pairStarts(model, order[at]!, outer));
  const count = Math.max(...pairs.map((starts) => starts.length));
  return Array.from({ length: count }, (_, s) => {
    const point = new Float64Array(model.size);
    const tries = new Float64Array(model.companionCount);
    pairs.forEach((starts) => {
      const start = starts[Math.min(s, starts.length - 1)]!;
      for (const { table, logMass, eCosOmega, eSinOmega } of start) {
        tries[table]!++;
        point[COORDINATES * table]! += logMass;
        point[COORDINATES * table + 1]! += eCosOmega;
        point[COORDINATES * table + 2]! += eSinOmega;
      }
    });
    // A companion between two others is in two pairs: the mean of both.
    for (let i = 0; i < point.length; i++) point[i]! /= tries[Math.floor(i / COORDINATES)]!;
    return point;
  });
}

interface BodyStart {
  readonly table: number;
  readonly logMass: number;
  readonly eCosOmega: number;
  readonly eSinOmega: number;
}

function pairStarts(model: InteractionModel, inner: number, outer: number): BodyStart[][] {
  const innerPeriodDays = model.lines[inner]!.periodDays;
  const outerPeriodDays = model.lines[outer]!.periodDays;
  const j = nearestResonance(innerPeriodDays, outerPeriodDays, FARTHEST_RESONANCE);
  if (j === null) return plainStarts(inner, outer);
  const { f, g } = resonanceCoefficients(j);
  const innerWave = fitWave(model, inner, inner, outer, j);
  const outerWave = fitWave(model, outer, inner, outer, j);
  const starts: (readonly [number, BodyStart[]])[] = [];
  for (const size of FREE_ECCENTRICITIES) {
    let best: readonly [number, BodyStart[]] | null = null;
    for (let p = 0; p < (size === 0 ? 1 : PHASES); p++) {
      const phase = (2 * Math.PI * p) / PHASES;
      const free = { re: size * Math.cos(phase), im: size * Math.sin(phase) };
      const unit = nearResonantVariation({
        innerPeriodDays,
        outerPeriodDays,
        innerMassRatio: 1,
        outerMassRatio: 1,
        j,
        freeEccentricity: free,
      });
      const byOuter = massFor(innerWave, unit.innerDays);
      const byInner = massFor(outerWave, unit.outerDays);
      const misfit = byOuter.misfit + byInner.misfit;
      if (best !== null && misfit >= best[0]) continue;
      // The free eccentricity is shared so that both together are least; longitudes are counted from the observer.
      const share = 1 / (f * f + g * g);
      best = [
        misfit,
        [
          {
            table: inner,
            logMass: Math.log(byInner.mass),
            eCosOmega: -f * share * free.im,
            eSinOmega: f * share * free.re,
          },
          {
            table: outer,
            logMass: Math.log(byOuter.mass),
            eCosOmega: -g * share * free.im,
            eSinOmega: g * share * free.re,
          },
        ],
      ];
    }
    starts.push(best!);
  }
  return [...starts].sort(([a], [b]) => a - b).map(([, bodies]) => bodies);
}

/** Mass ratio that brings a variation of unit mass closest to the observed one, and the misfit that is left. */
function massFor(
  wave: Wave,
  unit: { re: number; im: number },
): { readonly mass: number; readonly misfit: number } {
  const square = unit.re * unit.re + unit.im * unit.im;
  const best = square > 0 ? (wave.re * unit.re + wave.im * unit.im) / square : 0;
  const mass = Math.min(MOST_MASS, Math.max(LEAST_MASS, best));
  return { mass, misfit: wave.weight * ((wave.re - mass * unit.re) ** 2 + (wave.im - mass * unit.im) ** 2) };
}

/** Least squares of sin and cos of the longitude of conjunctions, beside a straight line. */
function fitWave(model: InteractionModel, table: number, inner: number, outer: number, j: number): Wave {
  const likelihood = model.likelihoods[table]!;
  const observed = model.observedDays[table]!;
  const angleAt = (t: number, which: number): number => {
    const { timeDays, periodDays, meanCycle } = model.lines[which]!;
    return 2 * Math.PI * ((t - timeDays) / periodDays + meanCycle);
  };
  const conjunctions = observed.map((t) => j * angleAt(t, outer) - (j - 1) * angleAt(t, inner));
  likelihood.evaluate(observed, 0);
  const variation = likelihood.reduced.slice();
  const sines = conjunctions.map(Math.sin);
  const cosines = conjunctions.map(Math.cos);
  likelihood.removeLine(sines);
  likelihood.removeLine(cosines);
  let ss = 0;
  let sc = 0;
  let cc = 0;
  let bs = 0;
  let bc = 0;
  for (let i = 0; i < variation.length; i++) {
    const w = likelihood.weights[i]!;
    ss += w * sines[i]! * sines[i]!;
    sc += w * sines[i]! * cosines[i]!;
    cc += w * cosines[i]! * cosines[i]!;
    bs += w * sines[i]! * variation[i]!;
    bc += w * cosines[i]! * variation[i]!;
  }
  // A slight ridge: with less than half a super-period observed, sine and line can hardly be told apart.
  const ridge = 1e-6 * (ss + cc);
  const determinant = (ss + ridge) * (cc + ridge) - sc * sc;
  return {
    re: ((cc + ridge) * bs - sc * bc) / determinant,
    im: ((ss + ridge) * bc - sc * bs) / determinant,
    weight: 0.5 * (ss + cc),
  };
}

/** Away from first-order resonances: two scales of mass, three of eccentricity, periastra apart in phase. */
function plainStarts(inner: number, outer: number): BodyStart[][] {
  const starts: BodyStart[][] = [];
  for (const mass of [3e-5, 3e-4]) {
    for (const eccentricity of [0, 0.04, 0.12]) {
      for (const phase of eccentricity === 0 ? [0] : [0, 1.57, 3.14, 4.71]) {
        const body = (table: number, turn: number): BodyStart => ({
          table,
          logMass: Math.log(mass),
          eCosOmega: eccentricity * Math.cos(phase + turn),
          eSinOmega: eccentricity * Math.sin(phase + turn),
        });
        starts.push([body(inner, 0), body(outer, 2)]);
      }
    }
  }
  return starts;
}
