/** The command as it goes into the record of a solution. */

/** They say where and how the result is shown, and have no part in it. */
const SHOWING_SWITCHES: readonly string[] = ['--force', '--json', '--quiet'];
const SHOWING_VALUES: readonly string[] = ['--out'];

/**
 * The words that lead to the same numbers again. Where the dossier goes and what is printed is left out: a repeated run,
 * into another folder or with `--force`, must give the same bytes.
 *
 * @example recordedCommand(['solve', 'a.csv', '--out', 'd', '--force']) // => ['tugline', 'solve', 'a.csv']
 */
export function recordedCommand(argv: readonly string[]): string[] {
  const kept: string[] = ['tugline'];
  for (let place = 0; place < argv.length; place += 1) {
    const word = argv[place]!;
    if (word === '--') return [...kept, ...argv.slice(place)];
    if (SHOWING_SWITCHES.includes(word)) continue;
    if (SHOWING_VALUES.includes(word)) place += 1;
    else if (!SHOWING_VALUES.some((name) => word.startsWith(`${name}=`))) kept.push(word);
  }
  return kept;
}
