import { readFileSync, readdirSync } from 'node:fs';
import type { LeastSquaresProblem } from '../../../src/numerics/least-squares.js';
import { MODELS } from './models.js';

export interface CertifiedSet {
  readonly name: string;
  readonly difficulty: string;
  readonly starts: readonly [Float64Array, Float64Array];
  readonly parameters: Float64Array;
  readonly standardDeviations: Float64Array;
  readonly residualSumOfSquares: number;
  readonly degreesOfFreedom: number;
  readonly problem: LeastSquaresProblem;
}

const folder = new URL('./', import.meta.url);

export function readAllSets(): CertifiedSet[] {
  return readdirSync(folder)
    .filter((file) => file.endsWith('.dat'))
    .sort()
    .map((file) => readSet(file.slice(0, -4)));
}

/** Reads one set by the layout that its own head describes: `  b1 =  start1  start2  certified  deviation`, then the data. */
export function readSet(name: string): CertifiedSet {
  const lines = readFileSync(new URL(`${name}.dat`, folder), 'latin1').split(/\r?\n/);
  const table = lines.flatMap((line) => {
    const match = /^\s*b\d+\s*=\s*(\S+)\s+(\S+)\s+(\S+)\s+(\S+)\s*$/.exec(line);
    return match === null ? [] : [match.slice(1).map(Number)];
  });
  const column = (k: number): Float64Array => Float64Array.from(table, (row) => row[k]!);
  const headed = (heading: RegExp): number => {
    const line = lines.find((text) => heading.test(text));
    return Number(line?.split(':')[1]);
  };
  // "Data:" stands in the head as well; the table is what follows the last one.
  const firstRow = lines.findLastIndex((line) => line.startsWith('Data:')) + 1;
  const rows = lines.slice(firstRow).filter((line) => line.trim() !== '').map((line) => line.trim().split(/\s+/).map(Number)); // prettier-ignore
  if (rows.length !== headed(/^Number of Observations/)) throw new Error(`${name}: ${rows.length} rows`);
  const difficulty = /(Lower|Average|Higher) Level/.exec(lines.join('\n'))?.[1] ?? 'unknown';
  return {
    name,
    difficulty: difficulty.toLowerCase(),
    starts: [column(0), column(1)],
    parameters: column(2),
    standardDeviations: column(3),
    residualSumOfSquares: headed(/^Residual Sum of Squares/),
    degreesOfFreedom: headed(/^Degrees of Freedom/),
    problem: problemOf(name, rows, table.length),
  };
}

function problemOf(
  name: string,
  rows: readonly (readonly number[])[],
  parameterCount: number,
): LeastSquaresProblem {
  const model = MODELS[name.toLowerCase()];
  if (model === undefined) throw new Error(`no model for ${name}`);
  // Nelson's model predicts the logarithm of the response.
  const observed = rows.map((row) => (name === 'Nelson' ? Math.log(row[0]!) : row[0]!));
  const predictors = rows.map((row) => row.slice(1));
  const partials = new Float64Array(parameterCount);
  return {
    parameterCount,
    residualCount: rows.length,
    evaluate(parameters, residuals, jacobian): boolean {
      for (let i = 0; i < observed.length; i++) {
        residuals[i] = observed[i]! - model(parameters, predictors[i]!, partials);
        if (jacobian !== null)
          for (let j = 0; j < parameterCount; j++) jacobian[i * parameterCount + j] = -partials[j]!;
      }
      return true;
    },
  };
}
