/** Which terms a baseline needs beside its constant: added one at a time while the evidence pays for them. */
import { orthonormalise, projectOut } from '../../numerics/linear-algebra.js';
import { prepareCurve, type PreparedCurve } from './prepare-curve.js';
import type { Ephemeris } from './curve-windows.js';
import { airmassLabel } from './event-dips.js';

/** A term must lower the BIC by this much. */
const MARGIN = 6;
/** Terms that are tried at most: with more, something is fitted that is no baseline. */
const MOST_TERMS = 4;
/** A regressor that is this closely tied to time or to another one is that one. */
const TWIN = 0.999;

/** What a choice of terms is judged by: the smaller the better, in the units of a BIC. */
export type BaselineScore = (curve: PreparedCurve) => number;

/** BIC of one curve with its present design: transits held, one common scale of the errors free. */
export function bicWithTransit(curve: PreparedCurve, transit: Float64Array): number {
  const { data } = curve;
  let chiSquare = 0;
  let parameters = 0;
  let count = 0;
  for (const { start, end, design, columns } of data.segments) {
    const rows = end - start;
    const weighted = (at: (row: number) => number): Float64Array =>
      Float64Array.from({ length: rows }, (_, i) => at(i) / data.sigmas[start + i]!);
    const basis = orthonormalise(
      Array.from({ length: columns }, (_, j) =>
        weighted((i) => design[i * columns + j]! * transit[start + i]!),
      ),
      new Float64Array(rows).fill(1),
    );
    const residual = weighted((i) => data.flux[start + i]!);
    projectOut(residual, basis);
    for (const value of residual) chiSquare += value * value;
    parameters += basis.length;
    count += rows;
  }
  return count * Math.log(chiSquare / count) + parameters * Math.log(count);
}

/** Terms that may enter: polynomials of time; in a single night also the regressors of the table. */
function candidates(curve: PreparedCurve): string[] {
  const terms = ['time', 'time^2'];
  if (curve.windows.length > 1) return terms;
  const kept: Float64Array[] = [curve.data.timesDays];
  for (const [label, values] of curve.table.regressors) {
    if (kept.some((other) => Math.abs(correlation(other, values)) > TWIN)) continue;
    kept.push(values);
    terms.push(label);
  }
  return terms;
}

function correlation(a: Float64Array, b: Float64Array): number {
  const n = Math.min(a.length, b.length);
  let [ma, mb] = [0, 0];
  for (let i = 0; i < n; i++) {
    ma += a[i]! / n;
    mb += b[i]! / n;
  }
  let [aa, bb, ab] = [0, 0, 0];
  for (let i = 0; i < n; i++) {
    aa += (a[i]! - ma) ** 2;
    bb += (b[i]! - mb) ** 2;
    ab += (a[i]! - ma) * (b[i]! - mb);
  }
  return aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : 1;
}

/**
 * Terms of the baseline of a curve for which the table leaves the choice to the evidence. The airmass of a single night is always
 * among them: a transit can take its curvature for its own, so that the evidence does not tell, and the depth would be wrong.
 */
export function chooseBaseline(
  curve: PreparedCurve,
  epochBjdTdb: number,
  ephemerides: readonly Ephemeris[],
  score: BaselineScore,
): string[] {
  const open = new Set(candidates(curve));
  const airmass = airmassLabel(curve.table);
  const terms: string[] = airmass !== null && open.delete(airmass) ? [airmass] : [];
  const withTerms = (list: readonly string[]): number =>
    score(prepareCurve(curve.table, epochBjdTdb, ephemerides, curve.data.band, list)!);
  let bic = withTerms(terms);
  while (terms.length < MOST_TERMS) {
    const tried = [...open]
      .filter((term) => term !== 'time^2' || terms.includes('time'))
      .map((term) => ({ term, bic: withTerms([...terms, term]) }))
      .sort((a, b) => a.bic - b.bic);
    const [best] = tried;
    if (best === undefined || !(best.bic < bic - MARGIN)) break;
    terms.push(best.term);
    open.delete(best.term);
    bic = best.bic;
  }
  return terms;
}
