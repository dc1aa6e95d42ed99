/** The calibration in words and numbers: one Markdown table per problem. */
import type { SetResult } from './judge-set.js';
import { ENOUGH_ESS } from './draw-enough.js';
import type { Exercise } from './exercises.js';
import {
  binomialError,
  coverage,
  LEVELS,
  pooledCoverage,
  rankCounts,
  scatterOverBound,
  uniformityProbability,
} from './statistics.js';

const percent = (share: number): string => (100 * share).toFixed(1);

export function problemReport({ name: title, names }: Exercise, results: readonly SetResult[]): string {
  const hasBounds = results[0]!.standardised.length > 0;
  const intervals = LEVELS.map((level) => `${percent(level)} % interval`);
  const head = ['quantity', ...intervals, 'ranks: p of χ²', ...(hasBounds ? ['scatter / bound'] : [])];
  const rows = names.map((name, q) => [
    name,
    ...LEVELS.map((level) => percent(coverage(results, q, level))),
    uniformityProbability(rankCounts(results, q)).toPrecision(2),
    ...(hasBounds
      ? [q < results[0]!.standardised.length ? scatterOverBound(results, q).toFixed(3) : '']
      : []),
  ]);
  const pooled = LEVELS.map((level) => {
    const { share, standardError } = pooledCoverage(results, level);
    return `${percent(share)} ± ${percent(standardError)}`;
  });
  rows.push(['all together', ...pooled, '', ...(hasBounds ? [''] : [])]);
  const errors = LEVELS.map((level) => percent(binomialError(level, results.length)));
  const draws = results.reduce((sum, result) => sum + result.draws, 0);
  const divergences = results.reduce((sum, result) => sum + result.divergences, 0);
  const short = results.filter(({ smallestEss }) => smallestEss < ENOUGH_ESS).length;
  const bound = hasBounds ? `, of a scatter ${percent(1 / Math.sqrt(2 * results.length))} %` : '';
  return [
    `**${title}**: ${results.length} sets; standard error of a coverage ${errors.join(' and ')} points${bound}; ` +
      `${percent(divergences / draws)} % of draws ended at the edge of the allowed orbits or diverged; ` +
      `${short} sets kept fewer than ${ENOUGH_ESS} effective draws.`,
    '',
    `| ${head.join(' | ')} |`,
    `| ${head.map((_, column) => (column === 0 ? '---' : '--:')).join(' | ')} |`,
    ...rows.map((row) => `| ${row.join(' | ')} |`),
    '',
  ].join('\n');
}
