/** Refuses data from which nothing can be solved. */
import { InputDataError } from '../errors.js';
import type { VelocitySet } from '../observations/types.js';

const FEWEST = 4;

/**
 * @throws InputDataError with fewer than 4 velocities, or with all of them at one time
 */
export function requireSolvable(velocities: VelocitySet): void {
  const { count, timesBjdTdb, tables } = velocities;
  const file = tables[0]?.path ?? '-';
  const issue = (code: string, message: string, hint: string): InputDataError =>
    new InputDataError([{ code, file, line: null, column: null, field: null, message, hint }]);
  if (count < FEWEST) {
    throw issue(
      'too-few-rows',
      `${count} velocities in all; an orbit needs at least ${FEWEST}`,
      'add tables, or unflag rows',
    );
  }
  if (!(timesBjdTdb[count - 1]! > timesBjdTdb[0]!)) {
    throw issue(
      'no-time-span',
      'all velocities are at one time',
      'check which column is the time (--columns)',
    );
  }
}
