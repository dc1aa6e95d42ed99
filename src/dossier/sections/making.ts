/** Program, command, seed, inputs with checksums, and what lies in the folder. */
import type { ProvenanceRecord } from '../../solving/provenance.js';
import type { Solved } from '../../solving/types.js';
import { markdownCode } from '../escape.js';
import { thinningOf } from '../posterior-table.js';
import { markdownTable, type ReportSection } from './section.js';

/** What the files of a dossier are for; a name that ends in `/` stands for a folder. */
const FILE_NOTES: readonly (readonly [string, string])[] = [
  ['solution.json', 'the solution for programs, every number with its unit and interval'],
  ['report.md', 'this report'],
  ['elements.csv', 'every number of the solution at full precision, one a row'],
  ['residuals.csv', 'each velocity with model and residual, and the file and line it came from'],
  ['model.csv', 'the model on a fine grid of times, in all and companion by companion'],
  ['light-curve.csv', 'each point of a light curve that was fitted: flux, error, baseline, transit model, residual, table, cycle'],
  ['mid-times.csv', 'all mid-times against the ephemeris of this solution, and where they come from'],
  ['posterior.csv', 'the draws of the posterior, one a row: chain, draw, ln of the density, and every free quantity by its path in solution.json'],
  ['charts/', 'the charts, as PNG at 300 dots per inch and as SVG'],
  ['run.json', 'date, duration and machine: the only file that differs when the run is repeated'],
]; // prettier-ignore

/** Said of a table that does not hold every draw. */
function thinnedNote({ posterior }: Solved, name: string): string {
  if (name !== 'posterior.csv' || posterior === null) return '';
  const step = thinningOf(posterior);
  return step === 1
    ? ''
    : ` (one draw in ${step}, evenly, to keep the file small; the numbers rest on all draws)`;
}

/** Program, seed and command line. */
export function madeBy(provenance: ProvenanceRecord): string[] {
  return [
    `Made by ${provenance.program} ${provenance.version} (Node ${provenance.node}) with seed ${provenance.seed}:`,
    markdownCode(commandLine(provenance.command)),
  ];
}

/** The files that went in, with their checksums. */
export function inputsTable({ inputs }: ProvenanceRecord): string {
  return markdownTable(
    ['table', 'rows', 'used', 'SHA-256'],
    inputs.map((input) => [
      markdownCode(input.path),
      String(input.rows),
      String(input.used),
      markdownCode(input.sha256),
    ]),
    [1, 2],
  );
}

/** The command as one would type it again. */
export function commandLine(command: readonly string[]): string {
  return command
    .map((word) => (/^[\w@%+=:,./-]+$/.test(word) ? word : `'${word.replaceAll("'", `'\\''`)}'`))
    .join(' ');
}

export const making: ReportSection = {
  heading: 'How this was made',
  blocks: (solved, context) => {
    const { provenance } = solved.record;
    const present = FILE_NOTES.filter(([name]) =>
      name.endsWith('/') ? context.files.some((file) => file.startsWith(name)) : context.files.includes(name),
    );
    return [
      ...madeBy(provenance),
      solved.record.posterior?.status === 'interrupted'
        ? 'The sampling was interrupted; how far it had come depends on the moment, so that a repetition need not give the same files.'
        : 'The same program, inputs, options and seed give the same files again, byte for byte.',
      inputsTable(provenance),
      'In this folder:',
      present.map(([name, note]) => `- \`${name}\`: ${note}${thinnedNote(solved, name)}`).join('\n'),
    ];
  },
};
