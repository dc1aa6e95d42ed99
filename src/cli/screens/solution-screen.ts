/** The solution on one screen. */
import type { CompanionRecord, Quantity, Solved } from '../../solving/types.js';
import { plainLabel } from '../../dossier/escape.js';
import { formatProbability, formatQuantity, significant } from '../../dossier/numbers.js';
import { verdictOf } from '../../dossier/verdict.js';
import { wrapped } from '../help.js';
import type { Terminal } from '../terminal.js';
import { columnsOf, SCREEN_WIDTH } from './layout.js';

type Row = readonly [name: string, value: string];
type Painter = Terminal['paint'];

function row(name: string, quantity: Quantity, zeroBounded = false): Row[] {
  if (quantity.value === null) return [];
  return [[name, formatQuantity(quantity, 'text', { zeroBounded })]];
}

function evidenceRow({ evidence }: CompanionRecord): Row {
  const shape = evidence.eccentricity;
  const eccentric =
    shape === null
      ? ''
      : `; e > 0 ${shape.deltaBic >= 0 ? 'gains' : 'costs'} ${significant(Math.abs(shape.deltaBic), 3)}`;
  const alarm = formatProbability(evidence.falseAlarmProbability, 'text');
  return ['evidence', `false alarm ${alarm}; BIC gains ${significant(evidence.deltaBic, 4)}${eccentric}`];
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

function companionRows(companion: CompanionRecord): Row[] {
  const { elements, derived } = companion;
  const shape: Row[] = companion.circular
    ? [['eccentricity', '0 (circular orbit)']]
    : [
        ...row('eccentricity', elements.eccentricity, true),
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
    ...row('transit probability', derived.transitProbability),
    ...row('equilibrium temperature', derived.equilibriumTemperature),
    evidenceRow(companion),
    rivalRow(companion),
  ];
}

function companionLines(companion: CompanionRecord, paint: Painter): string[] {
  const lines = columnsOf(companionRows(companion)).map((line) => `   ${line}`);
  return [paint('heading', companion.letter) + lines[0]!.slice(companion.letter.length), ...lines.slice(1)];
}

function instrumentLines({ record }: Solved): string[] {
  const rows = record.velocity.instruments.map((instrument) => [
    plainLabel(instrument.name, 24),
    String(instrument.count),
    formatQuantity(instrument.zeroPoint, 'text', { withUnit: false }),
    formatQuantity(instrument.jitter, 'text', { withUnit: false, zeroBounded: true }),
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

function headline({ record, velocities }: Solved): string {
  const count = record.companions.length;
  const days = (velocities.timesBjdTdb[velocities.count - 1] ?? 0) - (velocities.timesBjdTdb[0] ?? 0);
  const found = {
    companions: `${count} companion${count === 1 ? '' : 's'}`,
    nothing: 'no companion found',
    unusable: 'no usable solution',
  }[verdictOf(record)];
  return `${plainLabel(record.target, 30)}: ${found}; ${velocities.count} velocities in ${significant(days, 5)} d; rms ${significant(record.fit.rms, 3)} m/s`;
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

/** @param folder - where the dossier is, as the user would type it */
export function solutionScreen(solved: Solved, folder: string, paint: Painter): string {
  const { record } = solved;
  const uncertainties =
    record.posterior === null
      ? 'curvature at the solution'
      : `${record.posterior.draws} draws of the posterior`;
  const messages = [...candidateMessages(solved), ...record.warnings.map((warning) => warning.message)];
  return [
    paint('heading', headline(solved)),
    '',
    ...record.companions.flatMap((companion) => [...companionLines(companion, paint), '']),
    ...driftLines(solved),
    ...instrumentLines(solved),
    '',
    ...columnsOf([
      ...fitRows(solved),
      ['uncertainties', `${uncertainties}; intervals hold 68.3 %`],
      ['dossier', plainLabel(folder)],
    ]).map((line) => `   ${line}`),
    ...(messages.length === 0 ? [] : ['', ...marked(messages, paint)]),
  ].join('\n');
}
