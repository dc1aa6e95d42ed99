/** The solution on one screen. */
import type { CompanionRecord, PosteriorRecord, Quantity, Solved } from '../../solving/types.js';
import { keyOf, drawnBoundOf } from '../../dossier/draws.js';
import { plainLabel } from '../../dossier/escape.js';
import { hasVelocities, observedSpan, scatterWords } from '../../dossier/observed.js';
import { isTransiting } from '../../dossier/titles.js';
import { densityLines, lightCurveLines, midTimeLines, transitRows } from './photometry-lines.js';
import { logBayesFactor } from '../../dossier/evidence-words.js';
import {
  formatProbability,
  formatQuantity,
  significant,
  type QuantityChoices,
} from '../../dossier/numbers.js';
import { essText, modeText, rHatText, shownModes } from '../../dossier/posterior-words.js';
import { verdictOf } from '../../dossier/verdict.js';
import { wrapped } from '../help.js';
import type { Terminal } from '../terminal.js';
import { columnsOf, SCREEN_WIDTH } from './layout.js';

type Row = readonly [name: string, value: string];
type Painter = Terminal['paint'];

function row(name: string, quantity: Quantity, choices: QuantityChoices = {}): Row[] {
  if (quantity.value === null) return [];
  return [[name, formatQuantity(quantity, 'text', choices)]];
}

function evidenceRows({ evidence }: CompanionRecord): Row[] {
  if (evidence.deltaBic === 0) return [['evidence', evidence.falseAlarmMethod]];
  const shape = evidence.eccentricity;
  const eccentric =
    shape === null
      ? ''
      : `; e > 0 ${shape.deltaBic >= 0 ? 'gains' : 'costs'} ${significant(Math.abs(shape.deltaBic), 3)}`;
  const alarm = formatProbability(evidence.falseAlarmProbability, 'text');
  const factors = [
    ...(evidence.marginal === null ? [] : [`ln B ${logBayesFactor(evidence.marginal, 'text')}`]),
    ...(shape === null || shape.marginal === null
      ? []
      : [`e > 0: ln B ${logBayesFactor(shape.marginal, 'text')}`]),
  ];
  return [
    ['evidence', `false alarm ${alarm}; BIC gains ${significant(evidence.deltaBic, 4)}${eccentric}`],
    ...(factors.length === 0 ? [] : [['', factors.join('; ')] as const]),
  ];
}

function rivalRow({ rivals }: CompanionRecord): Row {
  const [best] = rivals;
  if (best === undefined) return ['rivals', 'none comes near'];
  const others = rivals.length === 1 ? '' : `; ${rivals.length - 1} more`;
  return [
    'best rival',
    `${significant(best.period, 6)} d, ${plainLabel(best.kind, 30)}, ln L ${significant(best.deltaLogLikelihood, 3)}${others}`,
  ];
}

function companionRows(companion: CompanionRecord, { posterior }: Solved): Row[] {
  const { letter, elements, derived } = companion;
  const drawn = drawnBoundOf(posterior, keyOf.element(letter, 'eccentricity'));
  const shape: Row[] = companion.circular
    ? [['eccentricity', '0 (circular orbit)']]
    : [
        ...row('eccentricity', elements.eccentricity, { zeroBounded: true, drawn }),
        ...row('argument of periastron', elements.argumentOfPeriastron),
        ...row('periastron passage', elements.timeOfPeriastron),
      ];
  return [
    ...row('period', elements.period),
    ...row('semi-amplitude', elements.semiAmplitude),
    ...shape,
    ...row('inferior conjunction', elements.timeOfInferiorConjunction),
    ...(derived.mass.value === null ? row('minimum mass', derived.minimumMass) : row('mass', derived.mass)),
    ...row('semi-major axis', derived.semiMajorAxis),
    ...(derived.semiMajorAxis.value === null ? row('mass function', derived.massFunction) : []),
    ...(isTransiting(companion)
      ? transitRows(companion, posterior)
      : row('transit probability', derived.transitProbability)),
    ...row('equilibrium temperature', derived.equilibriumTemperature),
    ...evidenceRows(companion),
    rivalRow(companion),
  ];
}

function companionLines(companion: CompanionRecord, solved: Solved, paint: Painter): string[] {
  const lines = columnsOf(companionRows(companion, solved)).map((line) => `   ${line}`);
  return [paint('heading', companion.letter) + lines[0]!.slice(companion.letter.length), ...lines.slice(1)];
}

function instrumentLines({ record, posterior }: Solved): string[] {
  const rows = record.velocity.instruments.map((instrument) => [
    plainLabel(instrument.name, 24),
    String(instrument.count),
    formatQuantity(instrument.zeroPoint, 'text', { withUnit: false }),
    formatQuantity(instrument.jitter, 'text', {
      withUnit: false,
      zeroBounded: true,
      drawn: drawnBoundOf(posterior, keyOf.jitter(instrument.name)),
    }),
    significant(instrument.rms, 3),
  ]);
  return columnsOf([['m/s', 'n', 'zero point', 'jitter', 'rms'], ...rows], [1, 2, 3, 4], 3).map(
    (line) => `   ${line}`,
  );
}

function driftLines({ record: { velocity } }: Solved): string[] {
  const rows = [
    ...(velocity.slope.fixed === true ? [] : row('slope', velocity.slope)),
    ...(velocity.curvature.fixed === true ? [] : row('curvature', velocity.curvature)),
  ];
  return rows.length === 0 ? [] : [...columnsOf(rows).map((line) => `   ${line}`), ''];
}

/** `38 velocities, 3 light curves, 14 mid-times`. */
function dataWords({ record: { photometry }, velocities }: Solved): string {
  const tables = photometry?.lightCurves.length ?? 0;
  const times = (photometry?.midTimes ?? []).reduce((sum, { count }) => sum + count, 0);
  return [
    ...(velocities.count > 0 || photometry === undefined ? [`${velocities.count} velocities`] : []),
    ...(tables > 0 ? [`${tables} light curve${tables === 1 ? '' : 's'}`] : []),
    ...(times > 0 ? [`${times} mid-times`] : []),
  ].join(', ');
}

/** What was found, and from what: one line, or two where light curves make it long. */
function headlines(solved: Solved, paint: Painter): string[] {
  const { record } = solved;
  const count = record.companions.length;
  const { first, last } = observedSpan(solved);
  const scatter = scatterWords(solved);
  const found = {
    companions: `${count} companion${count === 1 ? '' : 's'}`,
    nothing: 'no companion found',
    unusable: 'no usable solution',
  }[verdictOf(record)];
  const title = `${plainLabel(record.target, 30)}: ${found}`;
  const data = `${dataWords(solved)} in ${significant(last - first, 5)} d${scatter === '' ? '' : `; ${scatter}`}`;
  if (record.photometry === undefined) return [paint('heading', `${title}; ${data}`)];
  return [paint('heading', title), ...wrapped(data, SCREEN_WIDTH - 3).map((line) => `   ${line}`)];
}

/** Messages that must not be overlooked, broken into lines with a mark in front of the first. */
function marked(messages: readonly string[], paint: Painter): string[] {
  return messages.flatMap((message) =>
    wrapped(plainLabel(message, 400), SCREEN_WIDTH - 3).map((line, index) =>
      index === 0 ? `${paint('caution', '!')}  ${line}` : `   ${line}`,
    ),
  );
}

function candidateMessages({ record }: Solved): string[] {
  return record.candidates.map(
    (candidate) =>
      `candidate, not fitted: ${significant(candidate.period, 6)} d, K ${significant(candidate.semiAmplitude, 3)} m/s, ` +
      `false alarm ${formatProbability(candidate.falseAlarmProbability, 'text')}`,
  );
}

/** A converged fit needs no words; any other says why it stopped. */
function fitRows({ record: { fit } }: Solved): Row[] {
  if (fit.status === 'converged') return [['fit', 'converged']];
  const status = fit.status === 'failed' ? 'failed' : 'stopped at the iteration limit';
  return wrapped(`${status}: ${plainLabel(fit.reason, 300)}`, SCREEN_WIDTH - 20).map((line, index): Row => [
    index === 0 ? 'fit' : '',
    line,
  ]);
}

/** Where the uncertainties come from; a posterior that has not converged says so before anything else. */
function uncertaintyRows(posterior: PosteriorRecord | null): Row[] {
  if (posterior === null) return [['uncertainties', 'curvature at the solution; intervals hold 68.3 %']];
  const { status, chains, draws, bulkEssMin, tailEssMin } = posterior;
  const state = {
    converged: 'converged',
    'draw-limit': 'NOT converged (draw limit)',
    interrupted: 'NOT converged (interrupted)',
  }[status];
  const ess = essText(Math.min(bulkEssMin, tailEssMin));
  return [
    ['uncertainties', `posterior, ${state}; intervals hold 68.3 %`],
    ['', `${chains} chains × ${Math.round(draws / chains)} draws; R̂ ${rHatText(posterior)}, ESS ${ess}`],
  ];
}

function modeRows(posterior: PosteriorRecord | null): Row[] {
  const shown = shownModes(posterior).map((mode) => modeText(mode, 'text'));
  if (shown.length === 0) return [];
  const lines = wrapped(`${shown.join(', ')}; numbers are of the first`, SCREEN_WIDTH - 20);
  return lines.map((line, index): Row => [index === 0 ? 'modes' : '', line]);
}

/** @param folder - where the dossier is, as the user would type it */
export function solutionScreen(solved: Solved, folder: string, paint: Painter): string {
  const { record } = solved;
  const messages = [...candidateMessages(solved), ...record.warnings.map((warning) => warning.message)];
  return [
    ...headlines(solved, paint),
    '',
    ...record.companions.flatMap((companion) => [...companionLines(companion, solved, paint), '']),
    ...(hasVelocities(solved) ? [...driftLines(solved), ...instrumentLines(solved), ''] : []),
    ...lightCurveLines(solved),
    ...midTimeLines(solved),
    ...densityLines(solved),
    ...columnsOf([
      ...fitRows(solved),
      ...uncertaintyRows(record.posterior),
      ...modeRows(record.posterior),
      ['dossier', plainLabel(folder)],
    ]).map((line) => `   ${line}`),
    ...(messages.length === 0 ? [] : ['', ...marked(messages, paint)]),
  ].join('\n');
}
