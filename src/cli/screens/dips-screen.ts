/** The dips of light curves as a screen and as JSON. */
import { plainLabel } from '../../dossier/escape.js';
import { fixedPlaces, formatProbability, formatQuantity, significant } from '../../dossier/numbers.js';
import type { TableDips } from '../../solving/dips/search-tables.js';
import type { DipCandidate, RejectedDip } from '../../solving/dips/types.js';
import type { Terminal } from '../terminal.js';
import { wrapped } from '../help.js';
import { columnsOf, SCREEN_WIDTH } from './layout.js';

const REJECTED_SHOWN = 5;
const RELATED_SHOWN = 3;
/** Odd and even depths differ, or a second dip is there, from here on. */
const FIRM_SIGMAS = 3;
const FIRM_PROBABILITY = 0.01;
const HOURS_PER_DAY = 24;

function measured(value: number, sigma: number | null, unit: string): string {
  const known = sigma !== null && Number.isFinite(sigma) ? sigma : null;
  return formatQuantity(
    {
      value,
      sigma: known,
      lower: known === null ? null : value - known,
      upper: known === null ? null : value + known,
      unit,
    },
    'text',
  );
}

function candidateRows(candidate: DipCandidate, epochBjdTdb: number): string[][] {
  const { periodDays, events, eventDepths } = candidate;
  const ppm = 1e6;
  return [
    periodDays === null
      ? ['period', `unknown: seen once; ${significant(candidate.shortestPeriodDays, 4)} d or longer`]
      : ['period', measured(periodDays, candidate.periodSigmaDays, 'd')],
    ['mid-time (BJD_TDB)', measured(epochBjdTdb + candidate.midTimeDays, candidate.midTimeSigmaDays, '')],
    ['duration', `${significant(candidate.durationDays * HOURS_PER_DAY, 3)} h`],
    ['depth', measured(candidate.depth * ppm, candidate.depthSigma * ppm, 'ppm')],
    [
      'signal to noise',
      `${significant(candidate.signalToNoise, 3)}, red noise ${fixedPlaces(candidate.redNoiseFactor, 2)} times white`,
    ],
    [
      'detection',
      `false alarm ${formatProbability(candidate.falseAlarmProbability, 'text')}${candidate.efficiency === null ? '' : `, efficiency ${fixedPlaces(candidate.efficiency, 1)}`}`,
    ],
    [
      'events with data',
      `${events.length}${candidate.signalToNoiseWithoutStrongest === null || eventDepths.length < 2 ? '' : `; ${significant(candidate.signalToNoiseWithoutStrongest, 3)} without the strongest`}`,
    ],
    ...vettingRows(candidate),
  ];
} // prettier-ignore

function vettingRows({ oddEven, secondary, related, kind }: DipCandidate): string[][] {
  if (kind === 'single') return [];
  const rows: string[][] = [];
  if (oddEven !== null)
    rows.push([
      'odd and even',
      `${measured(1e6 * oddEven.oddDepth, 1e6 * oddEven.oddDepthSigma, '')} and ${measured(1e6 * oddEven.evenDepth, 1e6 * oddEven.evenDepthSigma, 'ppm')}, ${oddEven.differenceSigmas > FIRM_SIGMAS ? 'they differ' : 'equal'}`,
    ]);
  if (secondary !== null)
    rows.push([
      'second dip',
      secondary.falseAlarmProbability < FIRM_PROBABILITY
        ? `${measured(1e6 * secondary.depth, 1e6 * secondary.depthSigma, 'ppm')} at phase ${fixedPlaces(secondary.phase, 3)}`
        : `none; below ${significant(1e6 * FIRM_SIGMAS * secondary.depthSigma, 2)} ppm`,
    ]);
  const others = [...related].sort((a, b) => b.signalToNoise - a.signalToNoise).slice(0, RELATED_SHOWN);
  if (others.length > 0)
    rows.push([
      'related periods',
      others.map((other) => `${other.kind} ${significant(other.signalToNoise, 3)}`).join(', '),
    ]);
  return rows;
} // prettier-ignore

function rejectedLine(dip: RejectedDip): string[] {
  const what =
    dip.periodDays === null ? 'a single event' : `${significant(dip.periodDays, 6)} d, ${dip.events.length} events`;
  return wrapped(
    `${what}, signal to noise ${significant(dip.signalToNoise, 3)}: ${dip.why}`,
    SCREEN_WIDTH - 5,
  ).map((line, index) => (index === 0 ? `   ${line}` : `     ${line}`));
} // prettier-ignore

export function dipsScreen(target: string, found: TableDips, paint: Terminal['paint']): string {
  const { search, points, spanDays, epochBjdTdb } = found;
  const { candidates, rejected, settings } = search;
  return [
    paint(
      'heading',
      `${plainLabel(target, 40)}: ${candidates.length === 0 ? 'no dip' : candidates.length === 1 ? 'one dip' : `${candidates.length} dips`} in ${points} points over ${significant(spanDays, 4)} d`,
    ),
    ...candidates.flatMap((candidate, index) => [
      '',
      `   ${index + 1}`,
      ...columnsOf(candidateRows(candidate, epochBjdTdb)).map((line) => `   ${line}`),
    ]),
    ...(rejected.length === 0
      ? []
      : ['', paint('heading', 'Not believed'), '', ...rejected.slice(0, REJECTED_SHOWN).flatMap(rejectedLine)]),
    '',
    paint('heading', 'How it was searched'),
    '',
    ...settings.flatMap((sentence) =>
      wrapped(sentence, SCREEN_WIDTH - 5).map((line, index) => (index === 0 ? `   ${line}` : `     ${line}`)),
    ),
  ].join('\n');
} // prettier-ignore

/** For scripts; times on BJD_TDB, and the long arrays of spectra and trend stay out. */
export function dipsJson(found: TableDips): object {
  const { search, epochBjdTdb, points, spanDays } = found;
  const record = (candidate: DipCandidate): object => {
    const { midTimeDays, events, ...rest } = candidate;
    return {
      ...rest,
      midTimeBjdTdb: epochBjdTdb + midTimeDays,
      eventsBjdTdb: events.map((time) => epochBjdTdb + time),
    };
  };
  return {
    points,
    spanDays,
    candidates: search.candidates.map(record),
    rejected: search.rejected.map(record),
    stages: search.stages.map(({ title, peaks }) => ({ title, peaks })),
    outliers: search.isOutlier.reduce((sum, flag) => sum + flag, 0),
    settings: search.settings,
  };
}
