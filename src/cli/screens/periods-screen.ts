/** The periods of a set of velocities as a screen and as JSON. */
import type { VelocitySet } from '../../observations/types.js';
import type { SearchStage, WindowFunction } from '../../solving/types.js';
import { plainLabel } from '../../dossier/escape.js';
import { formatProbability, significant } from '../../dossier/numbers.js';
import type { Terminal } from '../terminal.js';
import { columnsOf } from './layout.js';

export interface FoundPeriods {
  readonly stage: SearchStage;
  readonly window: WindowFunction;
}

const WINDOW_PEAKS_SHOWN = 6;
const PEAKS_SHOWN = 12;

function peakRows({ stage }: FoundPeriods): string[][] {
  return stage.peaks
    .slice(0, PEAKS_SHOWN)
    .map((peak) => [
      significant(peak.periodDays, 7),
      peak.power.toFixed(3),
      significant(peak.semiAmplitudeMps, 3),
      formatProbability(peak.falseAlarmProbability, 'text'),
      plainLabel(peak.kind, 30),
    ]);
}

function eccentricLine({ stage: { eccentricPeak } }: FoundPeriods): string[] {
  if (eccentricPeak === null) return [];
  const { periodDays, eccentricity, deltaLogLikelihood, falseAlarmProbability } = eccentricPeak;
  return [
    '',
    `   An eccentric shape fits better: ${significant(periodDays, 6)} d with e about ${significant(eccentricity, 2)} ` +
      `(ln L gains ${significant(deltaLogLikelihood, 4)},`,
    `   false alarm ${formatProbability(falseAlarmProbability, 'text')}).`,
  ];
}

export function periodsScreen(
  target: string,
  velocities: VelocitySet,
  found: FoundPeriods,
  paint: Terminal['paint'],
): string {
  const first = velocities.timesBjdTdb[0] ?? 0;
  const last = velocities.timesBjdTdb[velocities.count - 1] ?? first;
  const windowRows = found.window.peaks
    .slice(0, WINDOW_PEAKS_SHOWN)
    .map((peak) => [significant(peak.periodDays, 6), peak.power.toFixed(3), plainLabel(peak.name ?? '', 30)]);
  const peaks = peakRows(found);
  return [
    paint(
      'heading',
      `${plainLabel(target, 40)}: ${velocities.count} velocities in ${significant(last - first, 5)} d`,
    ),
    '',
    ...(peaks.length === 0
      ? ['   no peak in this range of periods']
      : columnsOf(
          [['period (d)', 'power', 'K (m/s)', 'false alarm', 'what it is'], ...peaks],
          [0, 1, 2, 3],
        ).map((line) => `   ${line}`)),
    ...eccentricLine(found),
    '',
    paint('heading', 'Window function'),
    '',
    ...(windowRows.length === 0
      ? ['   no strong peak']
      : columnsOf([['period (d)', 'power', 'why'], ...windowRows], [0, 1]).map((line) => `   ${line}`)),
  ].join('\n');
}

/** The same for scripts; the long arrays of the periodogram stay out. */
export function periodsJson(target: string, found: FoundPeriods): object {
  const { stage, window } = found;
  return {
    schema: 'tugline/periods',
    version: 1,
    target,
    stage: stage.title,
    levels: stage.levels,
    peaks: stage.peaks,
    eccentricPeak: stage.eccentricPeak,
    windowPeaks: window.peaks,
  };
}
