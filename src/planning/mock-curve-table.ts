/** The text of a simulated light curve. */
import { SECONDS_PER_DAY } from '../orbit/constants.js';
import type { MockLightCurve } from '../observations/mock-types.js';
import { tableText, type TableOrigin } from './mock-table.js';

/** One exposure, in units of the undisturbed star's flux. */
export interface CurveRow {
  readonly timeBjdTdb: number;
  readonly flux: number;
  readonly sigma: number;
  /** 0 is good. */
  readonly quality: number;
  readonly regressors: readonly number[];
}

const REGRESSOR_DECIMALS = [4, 2, 2, 3];

/**
 * Writes a table: time, flux and its error in the curve's unit, then the regressors, then flags where the curve can have any.
 *
 * @param regressors - their labels
 */
export function curveTableText(
  curve: MockLightCurve,
  rows: readonly CurveRow[],
  regressors: readonly string[],
  about: TableOrigin,
): string {
  const isCounts = curve.unit === 'counts';
  const level = isCounts ? curve.level : 1;
  // Three digits of the error.
  const decimals = Math.min(9, Math.max(0, 2 - Math.floor(Math.log10(curve.noise * level))));
  const isSurvey = curve.kind === 'survey';
  const timeDecimals = isSurvey ? 5 : 6;
  const unit = isCounts ? ' (counts)' : '';
  const seconds = Number((curve.exposureDays * SECONDS_PER_DAY).toFixed(3));
  return tableText(
    [`${isSurvey ? 'survey' : 'one night'} in the band ${curve.band}`],
    about,
    [`Times are mid-exposure, BJD_TDB in days; exposure ${seconds} s.`],
    ['BJD_TDB', `flux${unit}`, `flux error${unit}`, ...regressors, ...(isSurvey ? ['quality'] : [])],
    rows.map((row) => [
      row.timeBjdTdb.toFixed(timeDecimals),
      (row.flux * level).toFixed(decimals),
      (row.sigma * level).toFixed(decimals),
      ...row.regressors.map((value, i) => value.toFixed(REGRESSOR_DECIMALS[i])),
      ...(isSurvey ? [String(row.quality)] : []),
    ]),
  );
}
