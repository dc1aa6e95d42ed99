/** `solution.json`: the solution for machines. */
import type { SolutionRecord } from '../solving/types.js';

/**
 * Stable text of any record: keys in the order in which the record was built, two blanks per level, typed arrays as
 * lists. A number that is not finite has no place in JSON and would silently turn into `null`, so it is a defect.
 *
 * @throws TypeError naming the key that holds a not-a-number or an infinity
 */
export function stableJson(value: unknown): string {
  const text = JSON.stringify(
    value,
    (key: string, item: unknown) => {
      if (typeof item === 'number' && !Number.isFinite(item))
        throw new TypeError(`${key} is ${item}; a record holds finite numbers, or null with a reason`);
      return ArrayBuffer.isView(item) && !(item instanceof DataView)
        ? Array.from(item as Float64Array)
        : item;
    },
    2,
  );
  return `${text}\n`;
}

export function solutionJson(record: SolutionRecord): string {
  return stableJson(record);
}
