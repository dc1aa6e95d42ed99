/** The table of the sets of velocities, and a line about each that was missed. */
import type { SetResult } from './evaluate.js';
import type { Kind } from './kinds.js';

export function velocityReport(chosen: readonly Kind[], results: readonly SetResult[]): string {
  const lines = [
    '| kind | sets | right number | ln L within 0.1 of truth start | mean s |',
    '|---|---|---|---|---|',
  ];
  let right = 0;
  let compared = 0;
  let close = 0;
  let withSignal = 0;
  for (const kind of chosen) {
    const own = results.filter((result) => result.kind === kind.name);
    const correct = own.filter((result) => result.found === result.expected);
    const measured = own.filter((result) => result.lnLBehindTruth !== null);
    const near = measured.filter((result) => result.lnLBehindTruth! > -0.1);
    if (kind.companions > 0) {
      withSignal += own.length;
      right += correct.length;
      compared += measured.length;
      close += near.length;
    }
    const seconds = own.reduce((sum, result) => sum + result.seconds, 0) / Math.max(1, own.length);
    lines.push(
      `| ${kind.name} | ${own.length} | ${correct.length} | ${kind.companions > 0 ? `${near.length} of ${measured.length}` : '-'} | ${seconds.toFixed(2)} |`,
    );
  }
  lines.push(
    `| all with companions | ${withSignal} | ${right} (${((100 * right) / withSignal).toFixed(1)} %) | ${close} of ${compared} | |`,
    '',
  );
  for (const result of results) {
    const missed = result.lnLBehindTruth !== null && result.lnLBehindTruth <= -0.1;
    if (result.found === result.expected && !missed) continue;
    lines.push(
      `${result.kind} #${result.index} seed ${result.seed}: found ${result.found} of ${result.expected}, P ${result.periods.map((p) => p.toFixed(3)).join(' ')} (true ${result.truePeriods.map((p) => p.toFixed(3)).join(' ')}), e ${result.eccentricities.map((e) => e.toFixed(2)).join(' ')} (true ${result.trueEccentricities.map((e) => e.toFixed(2)).join(' ')}), ln L over truth start ${result.lnLBehindTruth?.toFixed(2) ?? '-'}, last FAP ${result.lastFalseAlarm?.toExponential(1) ?? '-'} dBIC ${result.lastDeltaBic?.toFixed(1) ?? '-'}`,
    );
  }
  return `${lines.join('\n')}\n`;
}
