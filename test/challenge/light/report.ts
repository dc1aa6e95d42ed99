/** The table of the light curves, and a line about each that was missed or wrongly claimed. */
import type { LightResult } from './evaluate.js';
import type { LightKind } from './kinds.js';

/** ln L may stay behind a fit from the truth by this much. */
const CLOSE = 0.1;

const isClose = ({ lnLBehindTruth }: LightResult): boolean =>
  lnLBehindTruth !== null && lnLBehindTruth > -CLOSE;

interface Sums {
  readonly sets: number;
  readonly wanted: number;
  readonly searched: number;
  readonly fitted: number;
  readonly claims: number;
  readonly compared: number;
  readonly close: number;
  readonly seconds: number;
}

function sumsOf(results: readonly LightResult[]): Sums {
  const total = (of: (result: LightResult) => number): number =>
    results.reduce((sum, result) => sum + of(result), 0);
  return {
    sets: results.length,
    wanted: total(({ expected }) => expected),
    searched: total(({ searched }) => searched),
    fitted: total(({ fitted }) => fitted),
    claims: results.filter(({ falseClaims }) => falseClaims > 0).length,
    compared: results.filter(({ lnLBehindTruth }) => lnLBehindTruth !== null).length,
    close: results.filter(isClose).length,
    seconds: total(({ seconds }) => seconds) / Math.max(1, results.length),
  };
}

function row(name: string, sums: Sums): string {
  const { sets, wanted, searched, fitted, claims, compared, close, seconds } = sums;
  const share = (count: number): string =>
    wanted === 0 ? '-' : `${count} (${((100 * count) / wanted).toFixed(1)} %)`;
  return `| ${name} | ${sets} | ${wanted} | ${share(searched)} | ${share(fitted)} | ${claims} | ${wanted === 0 ? '-' : `${close} of ${compared}`} | ${seconds.toFixed(1)} |`;
}

export function lightReport(chosen: readonly LightKind[], results: readonly LightResult[]): string {
  const lines = [
    '| kind of light curve | sets | companions | same transits, search | same transits, fit | sets with false claims | ln L within 0.1 of truth start | mean s |',
    '|---|---|---|---|---|---|---|---|',
    ...chosen.map(({ name }) => row(name, sumsOf(results.filter((result) => result.kind === name)))),
    ...(chosen.some(({ companions }) => companions > 0)
      ? [row('all with companions', sumsOf(results.filter(({ expected }) => expected > 0)))]
      : []),
    '',
  ];
  for (const result of results) {
    const { expected, searched, fitted, falseClaims, lnLBehindTruth } = result;
    const isFine = searched === expected && fitted === expected && falseClaims === 0;
    if (isFine && (expected === 0 || isClose(result))) continue;
    lines.push(
      `${result.kind} #${result.index} seed ${result.seed}, ${result.points} points: truth ${result.truth || 'nothing'} | found ${result.found || 'nothing'} | ${fitted} right after the fit | ln L over truth start ${lnLBehindTruth?.toFixed(2) ?? '-'}`,
    );
  }
  return `${lines.join('\n')}\n`;
}
