/** `report.md` of mid-times of several companions: their pull at each other first, then each by itself. */
import type {
  InteractionRecord,
  SystemCompanionRecord,
  TimingSystemSolved,
} from '../../solving/timing/system-types.js';
import { escapeMarkdown } from '../escape.js';
import { interactionBlocks } from '../interaction-report.js';
import { fixedPlaces, formatQuantity, significant, typographicMinus } from '../numbers.js';
import type { ReportChart } from '../sections/section.js';
import { markdownTable } from '../sections/section.js';
import { capitalised } from '../titles.js';
import {
  bullets,
  cycleBlocks,
  findingBlocks,
  predictionBlocks,
  timingMakingBlocks,
} from './timing-blocks.js';
import { MODEL_WORDS, systemWords } from './timing-titles.js';

/** Charts of one companion, or (letter `null`) of the interacting orbits. */
export interface SystemReportChart extends ReportChart {
  readonly letter: string | null;
}

function summaryTable(companions: readonly SystemCompanionRecord[]): string {
  return markdownTable(
    ['companion', 'mid-times', 'period', 'mid-transit', 'by itself', 'rms about a constant period (min)'],
    companions.map(({ letter, data, models, preferred }) => {
      const linear = models.find(({ name }) => name === 'linear')!;
      const { period, time } = linear.parameters;
      return [
        escapeMarkdown(letter),
        String(data.count),
        period === undefined ? '' : formatQuantity(period, 'markdown'),
        time === undefined ? '' : formatQuantity(time, 'markdown'),
        MODEL_WORDS[preferred],
        significant(linear.rms, 3),
      ];
    }),
    [1, 5],
  );
}

function predictionsTable({ predictions }: InteractionRecord, timeScale: string): string {
  return typographicMinus(
    markdownTable(
      [
        'companion',
        'cycle',
        `mid-transit (${timeScale === 'unknown' ? 'd' : timeScale})`,
        '1 σ (min)',
        'O − C (min)',
      ],
      predictions.map(({ letter, cycle, time, variation }) => [
        escapeMarkdown(letter),
        String(cycle),
        formatQuantity(time, 'markdown', { withUnit: false }),
        time.sigma === null ? '' : significant(time.sigma * 1440, 2),
        fixedPlaces(variation, 2),
      ]),
      [1, 3, 4],
    ),
  );
}

function filesOf(companions: readonly SystemCompanionRecord[], hasInteraction: boolean): string {
  const letters = companions.map(({ letter }) => letter);
  return [
    '- `timing.json`: the solution for programs, every number with its unit and interval',
    '- `report.md`: this report',
    ...(hasInteraction
      ? [
          '- `interaction.csv`: the mid-transits that the integrated orbits predict, over the data and beyond',
          `- \`interaction-${letters[0]!}.png\` and others: O − C with the integrated orbits`,
        ]
      : []),
    ...letters.map(
      (letter) =>
        `- \`o-minus-c-${letter}.csv\`: each mid-time of ${letter} with O − C, the model of its own and residual, and the file and line it came from`,
    ),
    `- \`o-minus-c-${letters[0]!}.png\` and others: the charts, at 300 dots per inch, and as SVG`,
  ].join('\n');
}

export function systemReport(
  { record, interaction }: TimingSystemSolved,
  charts: readonly SystemReportChart[],
): string {
  const { companions, timeScale } = record;
  const orbits = record.interaction;
  const blocks = [
    `# ${escapeMarkdown(record.target)}: ${systemWords(record)}`,
    summaryTable(companions),
    'Times and periods are those of a constant period at the cycle where they are least correlated.',
    ...(record.warnings.length === 0
      ? []
      : [bullets(record.warnings.map(({ message }) => `${capitalised(message)}.`))]),
  ];
  if (interaction !== null && orbits !== null) {
    blocks.push(
      ...interactionBlocks(
        interaction.fit,
        charts.filter(({ letter }) => letter === null),
      ),
    );
    if (orbits.usable && orbits.predictions.length > 0)
      blocks.push(
        '### What comes next',
        predictionsTable(orbits, timeScale),
        'Predicted by the integrated orbits; O − C is against the straight line through the observed times; the interval is that of the prediction, for a mid-time without error or jitter of its own.',
      );
  }
  for (const companion of companions) {
    const { letter } = companion;
    const findings = { ...companion, timeScale };
    blocks.push(
      `## Companion ${escapeMarkdown(letter)} by itself`,
      ...(orbits?.needed === true && companion.preferred !== 'linear'
        ? [
            'The orbits above explain how these times vary. What follows takes the companion as if it were alone: a description, not a cause.',
          ]
        : []),
      ...findingBlocks(
        findings,
        charts.filter((chart) => chart.letter === letter),
        '###',
      ),
      // A clock of its own does not tell the future of a companion that is pulled at.
      ...(orbits?.needed === true ? [] : predictionBlocks(findings, '###')),
      ...cycleBlocks(findings, '###'),
      `### Assumed for ${escapeMarkdown(letter)}`,
      bullets(companion.assumptions),
    );
  }
  blocks.push(...timingMakingBlocks(record.provenance, filesOf(companions, interaction !== null)));
  return `${blocks.join('\n\n')}\n`;
}
