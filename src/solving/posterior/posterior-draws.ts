/** Draws of the reported mode as named columns in the units of `solution.json`. */
import type { VelocitySet } from '../../observations/types.js';
import { deriveAll } from '../derived.js';
import { reportedFromPortable, type ReportedValues } from '../elements-report.js';
import type { DerivedKey, ElementKey, PosteriorColumn, PosteriorDraws } from '../types.js';
import { ELEMENT_UNITS, drawStars, type Sampled } from '../uncertainties.js';
import { derivedUnit } from '../derived.js';
import type { Case } from '../../observations/types.js';
import type { PosteriorDensity } from './posterior-density.js';
import type { ModeSample } from './sample-mode.js';

const DERIVED: readonly DerivedKey[] = ['minimumMass', 'semiMajorAxis'];

interface Column {
  readonly key: string;
  readonly unit: string;
  readonly cycle: number;
  read(values: ReportedValues, derived: readonly (readonly number[])[]): number;
}

function companionColumns(sampled: Sampled, letters: readonly string[], epochBjdTdb: number): Column[] {
  return sampled.problem.structure.companions.flatMap(({ circular }, c) => {
    const keys: readonly ElementKey[] = circular
      ? ['period', 'timeOfInferiorConjunction', 'semiAmplitude']
      : [
          'period',
          'eccentricity',
          'argumentOfPeriastron',
          'timeOfPeriastron',
          'timeOfInferiorConjunction',
          'semiAmplitude',
        ];
    const elements = keys.map((key): Column => {
      const shift = key === 'timeOfPeriastron' || key === 'timeOfInferiorConjunction' ? epochBjdTdb : 0;
      const cycle = key === 'argumentOfPeriastron' ? 360 : 0;
      return {
        key: `companions.${letters[c]!}.elements.${key}`,
        unit: ELEMENT_UNITS[key],
        cycle,
        read: (values) => shift + values.companions[c]![key],
      };
    });
    if (sampled.star.massSolar === null) return elements;
    const derived = DERIVED.map((key, k): Column => ({
      key: `companions.${letters[c]!}.derived.${key}`,
      unit: derivedUnit(key),
      cycle: 0,
      read: (_, values) => values[c]![k]!,
    }));
    return [...elements, ...derived];
  });
}

function sharedColumns(sampled: Sampled, velocities: VelocitySet): Column[] {
  const { structure, freeJitters, linearColumns } = sampled.problem;
  const plain = (key: string, unit: string, read: (values: ReportedValues) => number): Column => ({
    key,
    unit,
    cycle: 0,
    read,
  });
  const columns = velocities.instruments.flatMap((name, i) => [
    ...(linearColumns[i]! >= 0
      ? [plain(`velocity.instruments.${name}.zeroPoint`, 'm/s', (values) => values.zeroPointsMps[i]!)]
      : []),
    ...(freeJitters.includes(i)
      ? [plain(`velocity.instruments.${name}.jitter`, 'm/s', (values) => values.jittersMps[i]!)]
      : []),
  ]);
  if (structure.drift > 0)
    columns.push(plain('velocity.slope', 'm/s/yr', (values) => values.slopeMpsPerYear));
  if (structure.drift > 1)
    columns.push(plain('velocity.curvature', 'm/s/yr^2', (values) => values.curvatureMpsPerYear2));
  return columns;
}

/** All draws, chain after chain; columns that never vary (fixed by the case) are left out. */
export function posteriorDraws(
  sample: ModeSample<PosteriorDensity>,
  sampled: Sampled,
  theCase: Case,
  letters: readonly string[],
  velocities: VelocitySet,
  epochBjdTdb: number,
  seed: number,
): PosteriorDraws {
  const { density, chains, drawsPerChain, logDensities } = sample;
  const { size } = density;
  const total = chains.length * drawsPerChain;
  const columns = [...companionColumns(sampled, letters, epochBjdTdb), ...sharedColumns(sampled, velocities)];
  const values = columns.map(() => new Float64Array(total));
  const stars = drawStars(theCase, total, seed);
  chains.forEach((positions, chain) => {
    for (let d = 0; d < drawsPerChain; d++) {
      const at = chain * drawsPerChain + d;
      const reported = reportedFromPortable(
        density.portable(positions.subarray(d * size, (d + 1) * size)),
        sampled.references,
      );
      const derived = reported.companions.map((elements) =>
        deriveAll({ elements, star: stars[at]!, lastObservationDays: 0 }, DERIVED),
      );
      columns.forEach((column, k) => (values[k]![at] = column.read(reported, derived)));
    }
  });
  const best = columns.map((column) => {
    const derived = sampled.values.companions.map((elements) =>
      deriveAll({ elements, star: sampled.star, lastObservationDays: 0 }, DERIVED),
    );
    return column.read(sampled.values, derived);
  });
  const kept = columns.flatMap((column, k): PosteriorColumn[] => {
    const own = values[k]!;
    if (column.cycle > 0) {
      for (let i = 0; i < own.length; i++)
        own[i]! -= column.cycle * Math.round((own[i]! - best[k]!) / column.cycle);
    }
    if (own.every((value) => value === own[0])) return [];
    return [{ key: column.key, unit: column.unit, values: own, cycle: column.cycle }];
  });
  const logDensity = new Float64Array(total);
  logDensities.forEach((own, chain) => {
    logDensity.set(own, chain * drawsPerChain);
  });
  return { chains: chains.length, drawsPerChain, columns: kept, logDensity };
}
