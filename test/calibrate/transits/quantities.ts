/** The numbers of a joint model whose intervals and ranks are judged. */
import {
  AMPLITUDE,
  CONJUNCTION,
  LOG_PERIOD,
  NaturalIndex,
  RADIUS_RATIO,
  RELATIVE_IMPACT,
  SHAPE,
} from '../../../src/solving/joint/natural.js';
import type { TransitProblem } from './problems.js';

interface Quantity {
  readonly name: string;
  read(natural: Float64Array): number;
}

export function quantitiesOf({ recipe }: TransitProblem): Quantity[] {
  const index = new NaturalIndex(recipe);
  const at =
    (place: number) =>
    (natural: Float64Array): number =>
      natural[place]!;
  const ofTransits: Quantity[] = [
    { name: 'mid-transit', read: at(CONJUNCTION) },
    { name: 'ln P', read: at(LOG_PERIOD) },
    { name: 'radius ratio', read: at(RADIUS_RATIO) },
    {
      name: 'impact parameter',
      read: (natural) => Math.abs(natural[RELATIVE_IMPACT]!) * (1 + natural[RADIUS_RATIO]!),
    },
    { name: 'ln density of the star', read: at(index.logStarDensity) },
    { name: 'u1', read: at(index.band(0)) },
    { name: 'u2', read: at(index.band(0) + 1) },
    { name: 'jitter of the light curve', read: at(index.curveJitter(0)) },
  ];
  if (recipe.velocities === null) return ofTransits;
  return [
    ...ofTransits,
    { name: 'K', read: at(AMPLITUDE) },
    { name: 'e', read: (natural) => Math.hypot(natural[SHAPE]!, natural[SHAPE + 1]!) },
    { name: 'e cos ω', read: at(SHAPE) },
    { name: 'e sin ω', read: at(SHAPE + 1) },
    { name: 'zero point', read: at(index.zeroPoint(0)) },
    { name: 'jitter of the velocities', read: at(index.velocityJitter(0)) },
    { name: 'jitter of the mid-times', read: at(index.midTimeJitter(0)) },
  ];
}

export function namesOf(problem: TransitProblem): string[] {
  return quantitiesOf(problem).map(({ name }) => name);
}
