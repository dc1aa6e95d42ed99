/** Writes digits.md beside this file and prints it: `npx tsx test/reference/nist/print-digits.ts`. */
import { writeFileSync } from 'node:fs';
import { readAllSets } from './read-set.js';
import { scoreSet } from './score.js';

const digits = (value: number): string => value.toFixed(1);
const lines = [
  '| set | level | start | status | steps | parameters | sum of squares | deviations |',
  '| --- | --- | --- | --- | ---: | ---: | ---: | ---: |',
];
for (const set of readAllSets()) {
  for (const start of [0, 1] as const) {
    const { outcome, ...score } = scoreSet(set, start);
    const status = 'reason' in outcome ? `${outcome.status}, ${outcome.reason}` : outcome.status;
    lines.push(
      `| ${set.name} | ${set.difficulty} | ${start + 1} | ${status} | ${outcome.iterations} | ${digits(score.parameterDigits)} | ${digits(score.sumOfSquaresDigits)} | ${digits(score.deviationDigits)} |`,
    );
  }
}
const text = `${lines.join('\n')}\n`;
writeFileSync(new URL('./digits.md', import.meta.url), text);
process.stdout.write(text);
