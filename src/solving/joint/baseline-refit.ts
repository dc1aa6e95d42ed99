/** A baseline judged by refitting everything with it: what a transit may take for its own must not decide against a term. */
import type { BaselineScore } from './baseline-choice.js';
import { BASELINE_WIDTH } from './curve-likelihood.js';
import type { CurveData } from './joint-data.js';
import { JointDensity } from './joint-density.js';
import { dataCount, type JointFit } from './joint-fit.js';
import { BRIEF, maximise } from './maximise.js';

/**
 * BIC of the whole model with another design of one curve, from the maximum of the present fit on.
 *
 * @param place - of the curve in the recipe
 */
export function bicByRefit(fit: JointFit, place: number): BaselineScore {
  const { recipe, natural } = fit;
  const perCoefficient = Math.log(dataCount(recipe));
  return ({ data }) => {
    const curves = recipe.curves.map((curve, i) => (i === place ? data : curve));
    const density = new JointDensity({ ...recipe, curves }, 'stated');
    const { value } = maximise(density, density.coordinates.position(natural), BRIEF);
    return -2 * (value + volumeOf(data)) + perCoefficient * coefficientsOf(data);
  };
}

function coefficientsOf({ segments }: CurveData): number {
  return segments.reduce((sum, { columns }) => sum + columns, 0);
}

/** What integrating over the wide priors of the coefficients has cost in ln L: columns have unit spread. */
function volumeOf({ segments, scatter, typicalSigma }: CurveData): number {
  const width = (BASELINE_WIDTH * scatter) / typicalSigma;
  return segments.reduce(
    (sum, { start, end, columns }) => sum + columns * Math.log(width * Math.sqrt(end - start)),
    0,
  );
}
