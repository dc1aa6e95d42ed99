/** What a table holds: velocities, a light curve or mid-times. By declaration, by its labels, or by its values; never by a guess. */
import { isNumeric, namesOf } from './column-plan.js';
import { contentByValues, type ValueReading } from './content-values.js';
import type { IssueList } from './issues.js';
import { errorRank, readLabel, velocityRank } from './labels.js';
import {
  cycleRank,
  fluxRank,
  kindRank,
  magnitudeRank,
  midTimeRank,
  namesMidTime,
  namesTimeError,
  photometricErrorRank,
  sourceRank,
} from './photometry-labels.js';
import type { TextTable } from './table-text.js';
import { quoted } from './text.js';
import { readTimeLabel } from './time-label.js';
import type { TableContent, TableRequest } from './types.js';

export interface ContentReading {
  readonly content: TableContent;
  /** For a headerless table that was recognised by its values: what stands where. */
  readonly values: ValueReading | null;
}

/** @returns `null` when the table does not say what it holds; the issues ask for a declaration */
export function decideContent(
  table: TextTable,
  request: TableRequest,
  issues: IssueList,
): ContentReading | null {
  const declared = request.holds ?? contentOfColumns(request.columns);
  const { labels } = namesOf(table);
  if (declared !== null) {
    const values =
      labels === null && Object.keys(request.columns).length === 0 ? contentByValues(table, declared) : null;
    return { content: declared, values: values !== null && values.content === declared ? values : null };
  }
  if (labels === null) {
    if (Object.keys(request.columns).length > 0) return { content: 'velocities', values: null };
    const values = contentByValues(table, null);
    if (values === null) return { content: 'velocities', values: null };
    if (values.content !== null) return { content: values.content, values };
    issues.add({
      code: 'content-unclear',
      line: table.firstLine,
      message: `the table has no header, and its numbers may be ${values.message}`,
      hint: 'say what it holds: --holds velocities, --holds "light curve" or --holds mid-times (in a case: holds)',
    });
    return null;
  }
  const found = contentOfLabels(labels, table);
  if (found !== null && found !== 'both') return { content: found, values: null };
  if (found === null && looksLikeTruncatedVelocities(labels)) return { content: 'velocities', values: null };
  const list = labels.map((label) => quoted(label)).join(', ').slice(0, 400); // prettier-ignore
  issues.add({
    code: 'content-unclear',
    line: table.firstLine,
    message:
      found === 'both'
        ? `the table has both velocities and a light curve, each with its errors; its labels are ${list}`
        : `neither a velocity, nor a flux or magnitude, nor mid-times were recognised; the labels are ${list}`,
    hint: 'say what it holds, --holds velocities, --holds "light curve" or --holds mid-times, or name its column: --columns velocity=LABEL, flux=LABEL or magnitude=LABEL',
  });
  return null;
}

/** Columns that only one kind of table has. */
function contentOfColumns(columns: TableRequest['columns']): TableContent | null {
  if (columns.velocity !== undefined || columns['velocity-error'] !== undefined) return 'velocities';
  if (columns.flux !== undefined || columns.magnitude !== undefined || columns.exposure !== undefined)
    return 'light curve';
  return columns.cycle !== undefined || columns.kind !== undefined ? 'mid-times' : null;
}

function contentOfLabels(labels: readonly string[], table: TextTable): TableContent | 'both' | null {
  const velocity = labels.find((label) => velocityRank(readLabel(label).word) !== null);
  const flux = labels.find((label) => fluxRank(label) !== null || magnitudeRank(label) !== null);
  if (velocity !== undefined && flux !== undefined) {
    // Velocities often come with an indicator or a magnitude beside them, light curves seldom with a velocity.
    const ownsError = labels.some((label) => photometricErrorRank(label, flux) === 0);
    const velocityOwnsError = labels.some(
      (label) => errorRank(readLabel(label).word, readLabel(velocity).word) === 0,
    );
    if (!ownsError) return 'velocities';
    return velocityOwnsError ? 'both' : 'light curve';
  }
  if (velocity !== undefined) return 'velocities';
  if (flux !== undefined) return 'light curve';
  return holdsMidTimes(labels, table) ? 'mid-times' : null;
}

/** A time with an error, and nothing measured at that time. */
function holdsMidTimes(labels: readonly string[], table: TextTable): boolean {
  const times = labels.filter((label) => midTimeRank(label) !== null && cycleRank(label) === null);
  const time = times.find(namesMidTime) ?? times[0] ?? labels.find((label) => readTimeLabel(label) !== null);
  if (time === undefined) return false;
  if (labels.some(namesMidTime)) return true;
  if (labels.some((label) => namesTimeError(label, time))) return true;
  const others = labels.filter((label) => label !== time && isNumeric(table, labels.indexOf(label)));
  const unexplained = others.filter(
    (label) =>
      errorRank(readLabel(label).word, '') === null &&
      cycleRank(label) === null &&
      !isResidual(label) &&
      kindRank(label) === null &&
      sourceRank(label) === null,
  );
  return unexplained.length === 0 && others.some((label) => errorRank(readLabel(label).word, '') !== null);
}

/** `O-C`, which many lists of mid-times carry along. */
function isResidual(label: string): boolean {
  return /^\s*(o\s*[-−–]\s*c|omc|oc|residuals?)\b/i.test(label);
}

/** A table with a velocity's error and no velocity: the reader of velocities says best what is missing. */
function looksLikeTruncatedVelocities(labels: readonly string[]): boolean {
  return labels.some((label) => readLabel(label).unit !== null || readLabel(label).strangeUnit !== null);
}
