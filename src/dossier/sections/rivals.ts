/** Other periods that explain the data nearly as well. */
import { CLOSE_RIVAL } from '../../solving/rivals.js';
import { escapeMarkdown } from '../escape.js';
import { significant, typographicMinus } from '../numbers.js';
import { markdownTable, type ReportSection } from './section.js';

export const rivals: ReportSection = {
  heading: 'What else would fit',
  blocks: ({ record }) =>
    record.companions.flatMap((companion) => {
      if (companion.rivals.length === 0)
        return [`For companion ${companion.letter} no other period that was refitted comes near.`];
      const rows = companion.rivals.map((rival) => [
        significant(rival.period, 7),
        escapeMarkdown(rival.kind),
        significant(rival.eccentricity, 2),
        typographicMinus(significant(Math.round(rival.deltaLogLikelihood * 10) / 10, 12)),
      ]);
      const close = companion.rivals.filter((rival) => rival.deltaLogLikelihood > CLOSE_RIVAL).length;
      const verdict =
        close === 0
          ? 'None is within 3 of the reported solution in ln L.'
          : `${close === 1 ? 'One of them is' : `${close} of them are`} within 3 of the reported solution in ln L: ` +
            'these data do not decide between the periods.';
      return [
        `For companion ${companion.letter} these periods were refitted with everything else left free. ${verdict}`,
        markdownTable(
          ['period (d)', 'what it is', 'eccentricity', 'ln L, rival minus reported'],
          rows,
          [0, 2, 3],
        ),
      ];
    }),
};
