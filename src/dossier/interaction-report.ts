/** What a fit of interacting companions says, as part of a report, and its predictions as a table. */
import { inJupiterMasses } from '../solving/timing/interaction-record.js';
import type {
  InteractionCompanionRecord,
  InteractionFit,
  ResonanceRecord,
} from '../solving/timing/interaction-types.js';
import type { Quantity } from '../solving/types.js';
import { csvLines, csvText, escapeMarkdown } from './escape.js';
import { fixedPlaces, formatQuantity, machineFixed, significant, typographicMinus } from './numbers.js';
import type { ReportChart } from './sections/section.js';
import { markdownTable } from './sections/section.js';

/** Markdown blocks, the heading first. */
export function interactionBlocks(fit: InteractionFit, charts: readonly ReportChart[]): string[] {
  const letters = fit.companions.map(({ letter }) => escapeMarkdown(letter)).join(', ');
  return [
    `## Interacting orbits of ${letters}`,
    verdict(fit),
    ...fit.resonances.map(resonanceSentence),
    elementsTable(fit),
    `Elements are osculating, relative to the star, at ${fixedPlaces(fit.epochDays, 4)} d; ω belongs to the star's orbit.`,
    '### What the masses rest on',
    bullets(fit.companions.map(massSentence)),
    ...massPairSentences(fit),
    ...rivalBlocks(fit),
    ...(fit.warnings.length === 0
      ? []
      : ['### To be borne in mind', bullets(fit.warnings.map(({ message }) => message))]),
    ...charts
      .filter(({ path }) => /interaction-[^/]*\.png$/.test(path))
      .flatMap(({ path, caption }) => [
        `![${escapeMarkdown(caption.split(/[.;]/)[0]!)}](${path})`,
        `*${escapeMarkdown(caption)}*`,
      ]),
    '### Assumed for the interacting orbits',
    bullets(fit.assumptions),
    making(fit),
  ];
}

function verdict(fit: InteractionFit): string {
  const numbers = `χ² ${fixedPlaces(fit.chiSquare, 1)} for ${fit.degreesOfFreedom} degrees of freedom against ${fixedPlaces(fit.chiSquareLines, 1)} of straight lines, ln L higher by ${fixedPlaces(fit.deltaLogLikelihood, 1)}, BIC lower by ${fixedPlaces(fit.deltaBic, 1)}`;
  const words =
    fit.deltaBic >= 10
      ? 'The companions pull at each other, and their mid-times show it'
      : 'The mid-times do not ask for companions that pull at each other';
  return typographicMinus(`${words}: ${numbers}.`);
}

function resonanceSentence({ letters, j, delta, superPeriodDays }: ResonanceRecord): string {
  const pair = letters.map(escapeMarkdown).join(' and ');
  if (j === null || delta === null || superPeriodDays === null)
    return `Companions ${pair} are not near a resonance of first order.`;
  return typographicMinus(
    `Companions ${pair} are ${significant(Math.abs(100 * delta), 3)} % ${delta > 0 ? 'outside' : 'inside'} the ${j}:${j - 1} resonance; the super-period is ${significant(superPeriodDays, 5)} d.`,
  );
}

function elementsTable({ companions }: InteractionFit): string {
  type Row = readonly [string, (companion: InteractionCompanionRecord) => string];
  const rows: Row[] = [
    ['mass', ({ mass }) => formatQuantity(mass, 'markdown', { zeroBounded: true })],
    [
      'the same in Jupiter masses',
      ({ mass }) => formatQuantity(inJupiterMasses(mass), 'markdown', { zeroBounded: true }),
    ],
    [
      'mass ratio to the star (10⁻⁶)',
      ({ massRatio }) => formatQuantity(inMillionths(massRatio), 'markdown', { zeroBounded: true }),
    ],
    ['eccentricity', ({ eccentricity }) => formatQuantity(eccentricity, 'markdown', { zeroBounded: true })],
    ['e cos ω', ({ eCosOmega }) => formatQuantity(eCosOmega, 'markdown')],
    ['e sin ω', ({ eSinOmega }) => formatQuantity(eSinOmega, 'markdown')],
    ['period', ({ period }) => formatQuantity(period, 'markdown')],
    [
      'inferior conjunction',
      ({ timeOfInferiorConjunction }) => formatQuantity(timeOfInferiorConjunction, 'markdown'),
    ],
    ['mean period of the transits', ({ meanPeriod }) => formatQuantity(meanPeriod, 'markdown')],
    ['jitter', ({ jitter }) => formatQuantity(jitter, 'markdown', { zeroBounded: true })],
    ['rms of the residuals', ({ rmsMinutes }) => `${significant(rmsMinutes, 3)} min`],
  ];
  return markdownTable(
    ['quantity', ...companions.map(({ letter }) => escapeMarkdown(letter))],
    rows.map(([words, cell]) => [words, ...companions.map(cell)]),
  );
}

/** A ratio in units of 10⁻⁶. */
export function inMillionths(ratio: Quantity): Quantity {
  const scaled = (value: number | null): number | null => (value === null ? null : 1e6 * value);
  return {
    ...ratio,
    value: scaled(ratio.value),
    sigma: scaled(ratio.sigma),
    lower: scaled(ratio.lower),
    upper: scaled(ratio.upper),
  };
}

function massSentence({
  letter,
  massRatioRange95,
  massRatioLowEccentricity,
  massEccentricityCorrelation,
}: InteractionCompanionRecord): string {
  const parts = [
    massRatioRange95 === null
      ? `companion ${letter}: no range of mass ratios could be had`
      : `companion ${letter}: mass ratio (in 10⁻⁶) ${significant(1e6 * massRatioRange95[0], 3)} to ${significant(1e6 * massRatioRange95[1], 3)} with 95 % probability`,
    massRatioLowEccentricity.value === null
      ? `with a prior of the eccentricities a third as wide it is unknown (${massRatioLowEccentricity.why ?? 'not computed'})`
      : `with a prior of the eccentricities a third as wide ${formatQuantity(inMillionths(massRatioLowEccentricity), 'text')}`,
  ];
  if (massEccentricityCorrelation !== null)
    parts.push(
      `correlation of ln mass with the free eccentricity ${fixedPlaces(massEccentricityCorrelation, 2)}`,
    );
  return parts.join('; ');
}

function massPairSentences({ massCorrelation, companions }: InteractionFit): string[] {
  const pairs = companions.flatMap(({ letter }, i) =>
    companions.slice(0, i).flatMap((other, k) => {
      const value = massCorrelation[i]![k]!;
      return Number.isFinite(value) ? [`${other.letter} and ${letter} ${fixedPlaces(value, 2)}`] : [];
    }),
  );
  return pairs.length === 0
    ? []
    : [typographicMinus(`Correlation of the logarithms of the masses: ${escapeMarkdown(pairs.join(', '))}.`)];
}

function rivalBlocks({ rivals }: InteractionFit): string[] {
  if (rivals.length === 0) return [];
  return [
    '### Other solutions',
    typographicMinus(
      markdownTable(
        ['ln L − best', 'mass ratios (10⁻⁶)', 'eccentricities'],
        rivals.map(({ deltaLogLikelihood, massRatios, eccentricities }) => [
          fixedPlaces(deltaLogLikelihood, 1),
          massRatios.map((ratio) => significant(1e6 * ratio, 3)).join(', '),
          eccentricities.map((e) => fixedPlaces(e, 3)).join(', '),
        ]),
        [0],
      ),
    ),
  ];
}

function making({ posterior, modelErrorSeconds }: InteractionFit): string {
  const accuracy = `The fast integration of the fit agrees with the exact one to ${significant(modelErrorSeconds, 2)} s.`;
  if (posterior === null) return accuracy;
  return `${posterior.draws} evaluations of the posterior gave ${fixedPlaces(posterior.effectiveDraws, 0)} effective draws, the heaviest with ${significant(100 * posterior.largestWeight, 2)} % of the weight (${posterior.status === 'converged' ? 'converged' : 'limit reached'}). ${accuracy}`;
}

function bullets(items: readonly string[]): string {
  return items.map((item) => `- ${typographicMinus(escapeMarkdown(item))}`).join('\n');
}

/** `interaction.csv`: predicted mid-times of every companion, over the data and beyond. */
export function interactionTable(fit: InteractionFit): string {
  return csvLines([
    ['companion', 'cycle', 'time_days', 'error_days', 'o_minus_c_min'],
    ...fit.predictions.flatMap(({ letter, cycles, timesDays, sigmasDays, variationMinutes }) =>
      Array.from(cycles, (cycle, i) => [
        csvText(letter),
        String(cycle),
        machineFixed(timesDays[i]!, 7),
        Number.isFinite(sigmasDays[i]!) ? machineFixed(sigmasDays[i]!, 7) : '',
        machineFixed(variationMinutes[i]!, 4),
      ]),
    ),
  ]);
}
