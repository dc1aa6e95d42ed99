/** Mid-times of several companions on one screen. */
import type {
  InteractingCompanion,
  InteractionRecord,
  SystemCompanionRecord,
  TimingSystemRecord,
} from '../../solving/timing/system-types.js';
import { plainLabel } from '../../dossier/escape.js';
import { inMillionths } from '../../dossier/interaction-report.js';
import { fixedPlaces, formatQuantity, significant } from '../../dossier/numbers.js';
import { MODEL_WORDS, systemWords } from '../../dossier/timing/timing-titles.js';
import { wrapped } from '../help.js';
import type { Terminal } from '../terminal.js';
import { columnsOf, SCREEN_WIDTH } from './layout.js';

const PREDICTIONS_SHOWN = 2;
const WARNING_CHARACTERS = 400;

function indented(lines: readonly string[]): string[] {
  return lines.map((line) => `   ${line}`);
}

function clockLines(companions: readonly SystemCompanionRecord[]): string[] {
  return companions.flatMap(({ letter, data, models, preferred, referenceCycle }) => {
    const linear = models.find(({ name }) => name === 'linear')!;
    const { period, time } = linear.parameters;
    const rows = [
      ['period', period === undefined ? '' : formatQuantity(period, 'text')],
      [`mid-transit, cycle ${referenceCycle}`, time === undefined ? '' : formatQuantity(time, 'text')],
      ['scatter about it', `${significant(linear.rms, 3)} min in ${data.count} mid-times`],
      ['by itself', MODEL_WORDS[preferred]],
    ];
    return [`${letter}  `.slice(0, 3) + columnsOf(rows)[0]!, ...indented(columnsOf(rows).slice(1))];
  });
}

/** One column per companion does not fit five of them into 80 characters: a block of lines each. */
function orbitLines(companions: readonly InteractingCompanion[]): string[] {
  return companions.flatMap((companion) => {
    const zero = { zeroBounded: true } as const;
    const masses =
      companion.massEarth.value === null
        ? [['mass', formatQuantity(companion.massEarth, 'text')]]
        : [
            ['mass', formatQuantity(companion.massEarth, 'text', zero)],
            ['', formatQuantity(companion.massJupiter, 'text', zero)],
          ];
    const lines = columnsOf([
      ...masses,
      ['mass over star, 1e-6', formatQuantity(inMillionths(companion.massRatio), 'text', zero)],
      ['e cos w', formatQuantity(companion.eCosOmega, 'text')],
      ['e sin w', formatQuantity(companion.eSinOmega, 'text')],
      ['scatter about it', `${significant(companion.rms, 3)} min`],
    ]);
    return [`${companion.letter}  `.slice(0, 3) + lines[0]!, ...indented(lines.slice(1))];
  });
}

function evidenceSentence({
  chiSquare,
  chiSquareLines,
  degreesOfFreedom,
  deltaBic,
}: InteractionRecord): string {
  return `Chi-square ${fixedPlaces(chiSquare, 1)} for ${degreesOfFreedom} degrees of freedom against ${fixedPlaces(chiSquareLines, 1)} of constant periods; BIC lower by ${fixedPlaces(deltaBic, 1)} (10 or more count).`;
}

function resonanceSentences({ resonances }: InteractionRecord): string[] {
  return resonances.map(({ letters, ratio, distance, superPeriod }) =>
    ratio === null || distance === null || superPeriod === null
      ? `${letters.join(' and ')} are not near a resonance of first order.`
      : `${letters.join(' and ')}: ${significant(Math.abs(100 * distance), 3)} % ${distance > 0 ? 'outside' : 'inside'} ${ratio}, super-period ${significant(superPeriod, 4)} d.`,
  );
}

function nextLines({ companions, interaction }: TimingSystemRecord): string[] {
  const rows =
    interaction?.needed === true
      ? interaction.predictions.map(({ letter, cycle, time }) => ({ letter, kind: 'transit', cycle, time }))
      : companions.flatMap(({ letter, predictions }) =>
          predictions.map((prediction) => ({ letter, ...prediction })),
        );
  const shown = companions.flatMap(({ letter }) =>
    rows.filter((row) => row.letter === letter).slice(0, PREDICTIONS_SHOWN),
  );
  return indented(
    columnsOf(
      shown.map(({ letter, kind, cycle, time }) => [
        letter,
        kind,
        String(cycle),
        formatQuantity(time, 'text', { withUnit: false }),
      ]),
      [2],
    ),
  );
}

function sentences(texts: readonly string[]): string[] {
  return texts.flatMap((text) => indented(wrapped(plainLabel(text, WARNING_CHARACTERS), SCREEN_WIDTH - 3)));
}

function remarkLines(record: TimingSystemRecord, paint: Terminal['paint']): string[] {
  const warnings = [
    ...record.warnings.map(({ message }) => message),
    ...(record.interaction?.warnings ?? []).map(({ message }) => message),
    ...record.companions.flatMap(({ letter, warnings: own }) =>
      own.map(({ message }) => `companion ${letter}: ${message}`),
    ),
  ];
  return warnings.flatMap((message) =>
    wrapped(plainLabel(message, WARNING_CHARACTERS), SCREEN_WIDTH - 3).map((line, index) =>
      index === 0 ? `${paint('caution', '!')}  ${line}` : `   ${line}`,
    ),
  );
}

/** @param place - folder of the files, with its closing slash */
export function timingSystemScreen(
  record: TimingSystemRecord,
  place: string,
  paint: Terminal['paint'],
): string {
  const { interaction } = record;
  const remarks = remarkLines(record, paint);
  return [
    ...wrapped(`${plainLabel(record.target, 40)}: ${systemWords(record)}`, SCREEN_WIDTH).map((line) =>
      paint('heading', line),
    ),
    '',
    paint('heading', 'Each by itself: constant period'),
    '',
    ...clockLines(record.companions),
    ...(interaction === null
      ? []
      : [
          '',
          paint('heading', 'Interacting orbits'),
          '',
          ...orbitLines(interaction.companions),
          '',
          ...sentences([evidenceSentence(interaction), ...resonanceSentences(interaction)]),
        ]),
    '',
    paint('heading', 'Next'),
    '',
    ...nextLines(record),
    ...(remarks.length === 0 ? [] : ['', ...remarks]),
    '',
    `   files ${plainLabel(place)}`,
  ].join('\n');
}
