/** `report.md`: the solution in sentences that an observer can sign. */
import type { Solved } from '../solving/types.js';
import { escapeMarkdown } from './escape.js';
import { assumptions } from './sections/assumptions.js';
import { certainty } from './sections/certainty.js';
import { determined } from './sections/determined.js';
import { dipSearch } from './sections/dip-search.js';
import { instruments } from './sections/instruments.js';
import { lightCurves } from './sections/light-curves.js';
import { making } from './sections/making.js';
import { midTimes } from './sections/mid-times.js';
import { presence } from './sections/presence.js';
import { rivals } from './sections/rivals.js';
import type { ReportContext, ReportSection } from './sections/section.js';
import { transits } from './sections/transits.js';
import { capitalised, counted } from './titles.js';
import { verdictOf } from './verdict.js';

/** The report in reading order; a new section is one file and its line here. */
const SECTIONS: readonly ReportSection[] = [
  presence,
  transits,
  certainty,
  determined,
  rivals,
  midTimes,
  dipSearch,
  instruments,
  lightCurves,
  assumptions,
  making,
];

export function report(solved: Solved, context: ReportContext): string {
  const { record } = solved;
  const subject =
    verdictOf(record) === 'unusable' ? 'no usable solution' : counted(record.companions.length, 'companion');
  const blocks = [`# ${escapeMarkdown(record.target)}: ${subject}`];
  for (const section of SECTIONS) {
    const body = section.blocks(solved, context);
    if (body.length > 0) blocks.push(`## ${capitalised(section.heading)}`, ...body);
  }
  return `${blocks.join('\n\n')}\n`;
}
