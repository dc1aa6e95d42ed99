/** The answer to the first question, in one word. */
import type { SolutionRecord } from '../solving/types.js';

/** `nothing`: the fit is sound, and no companion is needed. `unusable`: there is no fit to be cited. */
export type Verdict = 'companions' | 'nothing' | 'unusable';

export function verdictOf(record: SolutionRecord): Verdict {
  if (record.fit.status === 'failed') return 'unusable';
  if (record.companions.length === 0) return 'nothing';
  return record.fit.usable ? 'companions' : 'unusable';
}
