/** Program, command, seed, inputs with checksums, and what lies in the folder. */
import { markdownCode } from '../escape.js';
import { markdownTable, type ReportSection } from './section.js';

/** What the files of a dossier are for; a name that ends in `/` stands for a folder. */
const FILE_NOTES: readonly (readonly [string, string])[] = [
  ['solution.json', 'the solution for programs, every number with its unit and interval'],
  ['report.md', 'this report'],
  ['elements.csv', 'every number of the solution at full precision, one a row'],
  ['residuals.csv', 'each velocity with model and residual, and the file and line it came from'],
  ['model.csv', 'the model on a fine grid of times, in all and companion by companion'],
  ['charts/', 'the charts, as PNG at 300 dots per inch and as SVG'],
  ['run.json', 'date, duration and machine: the only file that differs when the run is repeated'],
];

/** The command as one would type it again. */
export function commandLine(command: readonly string[]): string {
  return command
    .map((word) => (/^[\w@%+=:,./-]+$/.test(word) ? word : `'${word.replaceAll("'", `'\\''`)}'`))
    .join(' ');
}

export const making: ReportSection = {
  heading: 'How this was made',
  blocks: ({ record }, context) => {
    const { provenance } = record;
    const present = FILE_NOTES.filter(([name]) =>
      name.endsWith('/') ? context.files.some((file) => file.startsWith(name)) : context.files.includes(name),
    );
    return [
      `Made by ${provenance.program} ${provenance.version} (Node ${provenance.node}) with seed ${provenance.seed}:`,
      markdownCode(commandLine(provenance.command)),
      'The same program, inputs, options and seed give the same files again, byte for byte.',
      markdownTable(
        ['table', 'rows', 'used', 'SHA-256'],
        provenance.inputs.map((input) => [
          markdownCode(input.path),
          String(input.rows),
          String(input.used),
          markdownCode(input.sha256),
        ]),
        [1, 2],
      ),
      'In this folder:',
      present.map(([name, note]) => `- \`${name}\`: ${note}`).join('\n'),
    ];
  },
};
