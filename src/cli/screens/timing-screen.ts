/** A solution of mid-times on one screen. */
import type { TimingModelRecord, TimingRecord } from '../../solving/timing/types.js';
import { plainLabel } from '../../dossier/escape.js';
import { fixedPlaces, formatProbability, formatQuantity, significant } from '../../dossier/numbers.js';
import { MODEL_WORDS, timingQuantities, timingText } from '../../dossier/timing/timing-titles.js';
import { wrapped } from '../help.js';
import type { Terminal } from '../terminal.js';
import { columnsOf, SCREEN_WIDTH } from './layout.js';

const PREDICTIONS_SHOWN = 3;
const WARNING_CHARACTERS = 400;

function quantityLines(model: TimingModelRecord, record: TimingRecord): string[] {
  const rows = timingQuantities(model)
    .filter(([key, , quantity]) => quantity.value !== null && key !== 'timeAtZero')
    .map(([key, words, quantity]) => [
      key === 'time' ? `mid-transit, cycle ${record.referenceCycle}` : words,
      timingText(key, quantity, 'text'),
    ]);
  rows.push(['jitter', formatQuantity(model.jitter, 'text', { zeroBounded: true })]);
  return columnsOf(rows).map((line) => `   ${line}`);
}

function modelLines(record: TimingRecord): string[] {
  const lowest = Math.min(...record.models.map(({ bic }) => bic));
  const rows = record.models.map((model) => [
    model.name === record.preferred ? `${model.name} *` : model.name,
    fixedPlaces(model.bic - lowest, 1),
    model.logBayesFactor === null ? '-' : fixedPlaces(model.logBayesFactor, 1),
    significant(model.rms, 3),
    model.falseAlarmProbability === null ? '' : formatProbability(model.falseAlarmProbability, 'text'),
  ]);
  return columnsOf(
    [['model', 'BIC - lowest', 'ln B', 'rms (min)', 'false alarm'], ...rows],
    [1, 2, 3, 4],
  ).map((line) => `   ${line}`);
}

function nextLines({ predictions }: TimingRecord): string[] {
  const rows = predictions
    .slice(0, PREDICTIONS_SHOWN)
    .map(({ cycle, kind, time }) => [kind, String(cycle), formatQuantity(time, 'text', { withUnit: false })]);
  return columnsOf(rows, [1]).map((line) => `   ${line}`);
}

function sentences(texts: readonly string[]): string[] {
  return texts.flatMap((text) =>
    wrapped(plainLabel(text, WARNING_CHARACTERS), SCREEN_WIDTH - 3).map((line) => `   ${line}`),
  );
}

/** @param place - folder of the files, with its closing slash */
export function timingScreen(record: TimingRecord, place: string, paint: Terminal['paint']): string {
  const model = record.models.find(({ name }) => name === record.preferred)!;
  const { data } = record;
  const remarks = [
    ...sentences(record.numbering.how === 'recovered' ? [record.numbering.statement] : []),
    ...record.warnings.flatMap(({ message }) =>
      wrapped(plainLabel(message, WARNING_CHARACTERS), SCREEN_WIDTH - 3).map((line, index) =>
        index === 0 ? `${paint('caution', '!')}  ${line}` : `   ${line}`,
      ),
    ),
  ];
  const counted = `${data.count} mid-times in ${significant(data.last - data.first, 5)} d`;
  return [
    paint('heading', `${plainLabel(record.target, 40)}: ${MODEL_WORDS[record.preferred]} (${counted})`),
    '',
    ...quantityLines(model, record),
    '',
    paint('heading', 'Models'),
    '',
    ...modelLines(record),
    '',
    ...sentences(record.reasons),
    ...sentences(record.notTried.map(({ name, why }) => `The ${name} model was not tried: ${why}.`)),
    '',
    paint('heading', 'Next'),
    '',
    ...nextLines(record),
    ...(remarks.length === 0 ? [] : ['', ...remarks]),
    '',
    `   files ${plainLabel(place)}`,
  ].join('\n');
}
