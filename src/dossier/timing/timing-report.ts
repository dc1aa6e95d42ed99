/** `report.md` of a solution of mid-times. */
import type { TimingRecord } from '../../solving/timing/types.js';
import { escapeMarkdown } from '../escape.js';
import type { ReportChart } from '../sections/section.js';
import {
  bullets,
  cycleBlocks,
  findingBlocks,
  predictionBlocks,
  timingMakingBlocks,
} from './timing-blocks.js';
import { MODEL_WORDS } from './timing-titles.js';

export interface TimingReportContext {
  readonly charts: readonly ReportChart[];
}

const FILES = [
  '- `timing.json`: the solution for programs, every number with its unit and interval',
  '- `report.md`: this report',
  '- `o-minus-c.csv`: each mid-time with O − C, model and residual, and the file and line it came from',
  '- `o-minus-c.png` and others: the charts, at 300 dots per inch, and as SVG',
].join('\n');

/** The report: verdict, ephemeris, models, predictions, how the cycles were counted, assumptions, making. */
export function timingReport(record: TimingRecord, context: TimingReportContext): string {
  const blocks = [
    `# ${escapeMarkdown(record.target)}: ${MODEL_WORDS[record.preferred]}`,
    ...findingBlocks(record, context.charts, '##'),
    ...predictionBlocks(record, '##'),
    ...cycleBlocks(record, '##'),
    '## Assumptions',
    bullets(record.assumptions),
    ...timingMakingBlocks(record.provenance, FILES),
  ];
  return `${blocks.join('\n\n')}\n`;
}
