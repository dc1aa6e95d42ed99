/** Zero point, jitter and scatter of each instrument. */
import { keyOf, drawnBoundOf } from '../draws.js';
import { escapeMarkdown } from '../escape.js';
import { formatQuantity, significant } from '../numbers.js';
import { markdownTable, type ReportSection } from './section.js';

export const instruments: ReportSection = {
  heading: 'Instruments',
  blocks: ({ record, posterior }) =>
    record.velocity.instruments.length === 0
      ? []
      : [
          'Each instrument has its own zero point and its own jitter, a noise added in quadrature to the errors of its table. Velocities in m/s.',
          markdownTable(
            ['instrument', 'velocities', 'zero point', 'jitter', 'rms of residuals'],
            record.velocity.instruments.map((instrument) => [
              escapeMarkdown(instrument.name),
              String(instrument.count),
              formatQuantity(instrument.zeroPoint, 'markdown', { withUnit: false }),
              formatQuantity(instrument.jitter, 'markdown', {
                withUnit: false,
                zeroBounded: true,
                drawn: drawnBoundOf(posterior, keyOf.jitter(instrument.name)),
              }),
              significant(instrument.rms, 3),
            ]),
            [1, 2, 3, 4],
          ),
        ],
};
