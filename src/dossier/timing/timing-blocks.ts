/** Parts of a report about the mid-times of one companion: what `timing` says of it, level by level. */
import type { PredictionRecord, TimingModelRecord, TimingRecord } from '../../solving/timing/types.js';
import { escapeMarkdown, markdownCode } from '../escape.js';
import { fixedPlaces, formatProbability, formatQuantity, significant, typographicMinus } from '../numbers.js';
import { inputsTable, madeBy } from '../sections/making.js';
import type { ReportChart } from '../sections/section.js';
import { markdownTable } from '../sections/section.js';
import { MODEL_WORDS, timingQuantities, timingText } from './timing-titles.js';

/** What the blocks are made from, of one companion. */
export type TimingFindings = Omit<TimingRecord, 'schema' | 'version' | 'target' | 'provenance'>;

function preferredOf(record: TimingFindings): TimingModelRecord {
  return record.models.find(({ name }) => name === record.preferred)!;
}

function quantitiesTable(model: TimingModelRecord, record: TimingFindings): string {
  const rows = timingQuantities(model).map(([key, words, quantity]) => [
    escapeMarkdown(key === 'time' ? `mid-transit at cycle ${record.referenceCycle}` : words),
    timingText(key, quantity, 'markdown'),
  ]);
  rows.push(['jitter', formatQuantity(model.jitter, 'markdown', { zeroBounded: true })]);
  return markdownTable(['quantity', 'value'], rows);
}

function modelsTable(record: TimingFindings): string {
  const lowest = Math.min(...record.models.map(({ bic }) => bic));
  return typographicMinus(
    markdownTable(
      ['model', 'BIC − lowest', 'ln B', 'ln L', 'free', 'χ² / degrees', 'χ² of stated errors', 'rms (min)', 'jitter (min)', 'false alarm'],
      record.models.map((model) => [
        model.name === record.preferred ? `**${model.name}**` : model.name,
        fixedPlaces(model.bic - lowest, 1),
        model.logBayesFactor === null ? 'unknown' : fixedPlaces(model.logBayesFactor, 1),
        fixedPlaces(model.logLikelihood, 1),
        String(model.freeParameters),
        `${fixedPlaces(model.chiSquare, 1)} / ${model.degreesOfFreedom}`,
        fixedPlaces(model.chiSquareOfErrors, 1),
        significant(model.rms, 3),
        formatQuantity(model.jitter, 'markdown', { zeroBounded: true, withUnit: false }),
        model.falseAlarmProbability === null ? '' : formatProbability(model.falseAlarmProbability, 'markdown'),
      ]),
      [1, 2, 3, 4, 5, 6, 7, 8, 9],
    ),
  ); // prettier-ignore
}

function predictionRow({ cycle, kind, time }: PredictionRecord): string[] {
  const sigmaMinutes = time.sigma === null ? null : time.sigma * 1440;
  return [
    String(cycle),
    kind,
    formatQuantity(time, 'markdown', { withUnit: false }),
    sigmaMinutes === null ? '' : significant(sigmaMinutes, 2),
  ];
}

function dataSentence({ data, timeScale }: TimingFindings): string {
  const kinds = [
    data.transits > 0 ? `${data.transits} transit${data.transits === 1 ? '' : 's'}` : '',
    data.occultations > 0 ? `${data.occultations} occultation${data.occultations === 1 ? '' : 's'}` : '',
  ].filter((words) => words !== '');
  return `Mid-times of ${kinds.join(' and ')}, cycles ${data.firstCycle} to ${data.lastCycle}, ${significant(data.last - data.first, 6)} d from ${fixedPlaces(data.first, 3)} to ${fixedPlaces(data.last, 3)} (${timeScale === 'unknown' ? 'scale not stated' : timeScale}).`;
}

/** What was tried for models with a period of their own. */
function searchedSentences({ models }: TimingFindings): string[] {
  return models.flatMap(({ name, searched }) =>
    searched === null
      ? []
      : [
          `The ${name} model was tried with ${searched.trials} ${name === 'precessing' ? 'apsidal periods' : 'periods'} from ${significant(searched.shortest, 4)} d to ${significant(searched.longest, 4)} d, evenly in frequency.`,
        ],
  );
}

function otherModels(record: TimingFindings, level: string): string[] {
  const others = record.models.filter(({ name }) => name !== record.preferred);
  return others.flatMap((model) => [
    `${level}# ${model.name}: ${MODEL_WORDS[model.name]}`,
    ...(model.caution === null ? [] : [`Not to be used as it stands: ${escapeMarkdown(model.caution)}.`]),
    quantitiesTable(model, record),
  ]);
}

export function bullets(items: readonly string[]): string {
  return items.map((item) => `- ${typographicMinus(escapeMarkdown(item))}`).join('\n');
}

/** Data, verdict, ephemeris, models; `level` is that of the headings, e.g. `##`. */
export function findingBlocks(
  record: TimingFindings,
  charts: readonly ReportChart[],
  level: string,
): string[] {
  const preferred = preferredOf(record);
  return [
    dataSentence(record),
    bullets(record.reasons),
    `${level} Ephemeris`,
    `The ${record.preferred} model. Time and period are those of cycle ${record.referenceCycle}, where they are least correlated in the linear model (correlation here ${typographicMinus(fixedPlaces(preferred.correlation, 3))}).`,
    quantitiesTable(preferred, record),
    ...charts
      .filter(({ path }) => path.endsWith('.png'))
      .flatMap(({ path, caption }) => [
        `![${escapeMarkdown(caption.split(/[.;]/)[0]!)}](${path})`,
        `*${escapeMarkdown(caption)}*`,
      ]),
    `${level} Models`,
    modelsTable(record),
    'ln B is the logarithm of the Bayes factor against the linear model, with the priors that are listed below. A model is preferred where it is better than every simpler one by 10 in BIC.',
    ...[
      bullets([
        ...searchedSentences(record),
        ...record.notTried.map(({ name, why }) => `The ${name} model was not tried: ${why}.`),
      ]),
    ].filter((list) => list !== ''),
    ...otherModels(record, level),
  ];
}

/** What the preferred model says of events to come. */
export function predictionBlocks(record: TimingFindings, level: string): string[] {
  if (record.predictions.length === 0) return [];
  return [
    `${level} What comes next`,
    predictionsTable(record.predictions, record.timeScale),
    `Predicted by the ${record.preferred} model; the interval is that of the prediction, for a mid-time without error or jitter of its own.`,
  ];
}

export function predictionsTable(
  predictions: readonly PredictionRecord[],
  timeScale: TimingRecord['timeScale'],
): string {
  return markdownTable(
    ['cycle', 'event', `mid-time (${timeScale === 'unknown' ? 'd' : timeScale})`, '1 σ (min)'],
    predictions.map(predictionRow),
    [0, 3],
  );
}

/** How the cycles were counted, and rows that stand out. */
export function cycleBlocks(record: TimingFindings, level: string): string[] {
  const blocks = [
    `${level} Cycles and rows`,
    bullets([record.numbering.statement, ...record.warnings.map(({ message }) => `${message}.`)]),
  ];
  if (record.outliers.length > 0)
    blocks.push(
      markdownTable(
        ['file', 'line', 'cycle', 'residual (min)', 'times the usual'],
        record.outliers.map((row) => [
          markdownCode(row.path),
          String(row.line),
          String(row.cycle),
          typographicMinus(significant(row.residual, 3)),
          significant(row.deviation, 2),
        ]),
        [1, 2, 3, 4],
      ),
    );
  return blocks;
}

/** @param files - the list of what else is in the folder */
export function timingMakingBlocks(provenance: TimingRecord['provenance'], files: string): string[] {
  return [
    '## How this was made',
    ...madeBy(provenance),
    'The same program, inputs, options and seed give the same files again, byte for byte.',
    inputsTable(provenance),
    'In this folder:',
    files,
  ];
}
