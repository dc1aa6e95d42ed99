/** Holds the names that a case makes choices for against those that the tables have. */
import { placeOfChoice } from './case-places.js';
import { IssueList } from './issues.js';
import type { Observations } from './photometry-types.js';
import { didYouMean } from './suggest.js';
import { quoted } from './text.js';
import type { Case, VelocitySet } from './types.js';

/**
 * @throws InputDataError naming each unknown instrument with its line in the case, and the one that was meant or all that there are
 */
export function checkInstrumentChoices(theCase: Case, velocities: Pick<VelocitySet, 'instruments'>): void {
  const issues = new IssueList(theCase.path ?? 'case');
  addUnknown(theCase.instruments, 'instruments', 'an instrument', velocities.instruments, issues);
  issues.throwIfAny();
}

/**
 * Instruments against those of the velocities, bands against those of the light curves, letters of mid-time tables against
 * the companions that the case lists.
 *
 * @throws InputDataError with all names that nothing bears
 */
export function checkChoices(theCase: Case, observations: Observations): void {
  const issues = new IssueList(theCase.path ?? 'case');
  const bands = [...new Set(observations.lightCurves.map((table) => table.band))];
  addUnknown(
    theCase.instruments,
    'instruments',
    'an instrument',
    observations.velocities?.instruments ?? [],
    issues,
  );
  addUnknown(theCase.bands ?? {}, 'bands', 'a band', bands, issues);
  if (typeof theCase.companions === 'object') {
    const letters = theCase.companions.map((companion) => companion.letter);
    for (const { path, companion } of observations.midTimes)
      if (companion !== null && !letters.includes(companion))
        issues.add({
          code: 'unknown-companion',
          field: 'companion',
          message: `the mid-times of ${quoted(path)} belong to companion ${companion}, which the case does not list`,
          hint: `companions of the case: ${letters.join(', ')}`,
        });
  }
  issues.throwIfAny();
}

function addUnknown(
  choices: Readonly<Record<string, unknown>>,
  section: string,
  noun: string,
  known: readonly string[],
  issues: IssueList,
): void {
  for (const name of Object.keys(choices)) {
    if (known.includes(name)) continue;
    issues.add({
      code: section === 'bands' ? 'unknown-band' : 'unknown-instrument',
      ...placeOfChoice(choices, name),
      field: `${section}.${name}`,
      message: `no table has ${noun} ${quoted(name)}`,
      hint: known.length === 0 ? '' : didYouMean(name, known),
    });
  }
}
