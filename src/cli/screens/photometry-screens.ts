/** What was understood of a light curve, and of a table of mid-times, on a screen and as JSON. */
import type { LightCurveSummary, MidTimeSummary } from '../../observations/describe-photometry.js';
import type { LightCurveTable, MidTimeTable } from '../../observations/photometry-types.js';
import { counted } from '../../observations/text.js';
import { plainLabel } from '../../dossier/escape.js';
import { significant } from '../../dossier/numbers.js';
import type { Terminal } from '../terminal.js';
import { columnsOf } from './layout.js';
import { columnLines, day, headingOf, noticeLines, screenOf, timeScaleWords } from './table-parts.js';

const GAPS_SHOWN = 3;
const NAMES_SHOWN = 8;
const SECONDS_PER_DAY = 86_400;

const EXPOSURE_WORDS: Readonly<Record<LightCurveTable['exposureKnown'], string>> = {
  stated: 'as declared',
  column: 'from its column',
  header: 'from the comments',
  spacing: 'not stated: the usual distance of rows',
  none: 'not stated: taken as instantaneous',
};

function ppm(value: number): string {
  return `${value.toFixed(0)} ppm`;
}

/** `60 s`, `29.4 min`, `0.51 d`. */
function duration(days: number): string {
  const seconds = days * SECONDS_PER_DAY;
  if (seconds < 120) return `${significant(seconds, 4)} s`;
  return days < 0.1 ? `${significant(seconds / 60, 4)} min` : `${significant(days, 4)} d`;
}

function listed(names: readonly string[]): string {
  const shown = names.slice(0, NAMES_SHOWN).map((name) => plainLabel(name, 24));
  return [...shown, ...(names.length > NAMES_SHOWN ? [`${names.length - NAMES_SHOWN} more`] : [])].join(', ');
}

function gapWords({ gaps }: LightCurveSummary): string {
  if (gaps.length === 0) return 'none of half a day or more';
  const shown = gaps
    .slice(0, GAPS_SHOWN)
    .map((gap) => `${significant(gap.days, 3)} d from ${day(gap.fromBjdTdb)}`);
  if (gaps.length > GAPS_SHOWN) shown.push(`${gaps.length - GAPS_SHOWN} more`);
  return shown.join(', ');
}

function fluxWords({ fluxUnit, normalisation }: LightCurveTable): string {
  if (fluxUnit === 'magnitude') return `from magnitudes; 1 is magnitude ${significant(normalisation, 6)}`;
  return `${fluxUnit === 'counts' ? 'counts' : 'relative flux'}, divided by the median ${significant(normalisation, 6)}`;
}

function curveFacts(table: LightCurveTable, summary: LightCurveSummary): string[] {
  const cadence =
    summary.medianCadenceDays === null ? '' : `; median step ${duration(summary.medianCadenceDays)}`;
  const exposure = table.exposureDays === 0 ? 'instantaneous' : duration(table.exposureDays);
  const scatter = summary.pointToPointPpm === null ? '' : `; row to row ${ppm(summary.pointToPointPpm)}`;
  const errors = table.sigmasKnown === 'column' ? `median ${ppm(summary.medianErrorPpm)}` : `${ppm(summary.medianErrorPpm)}, from the scatter`; // prettier-ignore
  const regressors = [...table.regressors.keys()];
  const baseline = table.baseline === 'auto' ? 'auto' : table.baseline.length === 0 ? 'constant' : listed(table.baseline); // prettier-ignore
  return columnsOf([
    ['time scale', timeScaleWords(summary.timeScale, summary.timeErrorSeconds, table.timeOffsetDays)],
    ['span', `${day(summary.firstBjdTdb)} to ${day(summary.lastBjdTdb)}, ${significant(summary.spanDays, 5)} d${cadence}`],
    ['gaps', gapWords(summary)],
    ['exposure', `${exposure}, ${EXPOSURE_WORDS[table.exposureKnown]}`],
    ['band', plainLabel(table.band, 40)],
    ['flux', fluxWords(table)],
    ['errors', errors],
    ['scatter', `${ppm(summary.scatterPpm)} about the median${scatter}`],
    ['range', `98 % of rows from ${ppm(summary.onePercentPpm)} to ${ppm(summary.ninetyNinePercentPpm)}, all from ${ppm(summary.deepestPpm)} to ${ppm(summary.highestPpm)}`],
    ['regressors', regressors.length === 0 ? 'none' : listed(regressors)],
    ['baseline', `${baseline}; noise ${table.noise}${table.dilution.value === 0 ? '' : `; dilution ${significant(table.dilution.value, 4)}`}`],
  ]); // prettier-ignore
}

/** Heading, columns, facts and notices of a table. */
function tableScreenOf(
  table: LightCurveTable | MidTimeTable,
  content: string,
  facts: readonly string[],
  paint: Terminal['paint'],
): string {
  const notices = noticeLines(table.notices, paint);
  const body = [
    '',
    ...columnLines(table.columns),
    '',
    ...facts,
    ...(notices.length === 0 ? [] : ['', ...notices]),
  ];
  return screenOf(headingOf(table.path, table.rows, table.used, content), body, paint);
}

export function lightCurveScreen(
  table: LightCurveTable,
  summary: LightCurveSummary,
  paint: Terminal['paint'],
): string {
  return tableScreenOf(table, 'a light curve', curveFacts(table, summary), paint);
}

/** The same for scripts, without the arrays of the observations. */
export function lightCurveJson(table: LightCurveTable, summary: LightCurveSummary): object {
  return {
    content: table.content,
    ...summary,
    sha256: table.sha256,
    name: table.name,
    band: table.band,
    fluxUnit: table.fluxUnit,
    normalisation: table.normalisation,
    sigmasKnown: table.sigmasKnown,
    exposureDays: table.exposureDays,
    exposureKnown: table.exposureKnown,
    regressors: [...table.regressors.keys()],
    dilution: table.dilution,
    baseline: table.baseline,
    jitter: table.jitter,
    noise: table.noise,
    timeOffsetDays: table.timeOffsetDays,
    columns: table.columns,
    notices: table.notices,
  };
}

function midTimeFacts(table: MidTimeTable, summary: MidTimeSummary): string[] {
  const { cycles } = summary;
  const sources = [...new Set(table.sources.filter((source) => source !== ''))];
  return columnsOf([
    ['time scale', timeScaleWords(summary.timeScale, summary.timeErrorSeconds, table.timeOffsetDays)],
    ['span', `${day(summary.firstBjdTdb)} to ${day(summary.lastBjdTdb)}, ${significant(summary.spanDays, 5)} d`],
    ['events', `${counted(summary.transits, 'transit')}, ${counted(summary.occultations, 'occultation')}`],
    ['errors', `median ${significant(summary.medianErrorSeconds, 3)} s; ${significant(summary.smallestErrorSeconds, 3)} to ${significant(summary.largestErrorSeconds, 3)} s`],
    ['cycles', cycles === null ? 'no column: to be counted from the times' : `${cycles.first} to ${cycles.last}`],
    ['companion', table.companion ?? 'not said: the only one, or b'],
    ['sources', sources.length === 0 ? 'not said' : listed(sources)],
  ]); // prettier-ignore
}

export function midTimeScreen(
  table: MidTimeTable,
  summary: MidTimeSummary,
  paint: Terminal['paint'],
): string {
  return tableScreenOf(table, 'mid-times', midTimeFacts(table, summary), paint);
}

/** The same for scripts, without the arrays of the observations. */
export function midTimeJson(table: MidTimeTable, summary: MidTimeSummary): object {
  return {
    content: table.content,
    ...summary,
    sha256: table.sha256,
    companion: table.companion,
    timeOffsetDays: table.timeOffsetDays,
    columns: table.columns,
    notices: table.notices,
  };
}
