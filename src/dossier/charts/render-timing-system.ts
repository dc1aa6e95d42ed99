/** The charts of mid-times of several companions, drawn and encoded. */
import type { TimingSystemSolved } from '../../solving/timing/system-types.js';
import type { ChartDrawing, ChartFile } from './chart-drawing.js';
import { interactionCharts } from './interaction-chart.js';
import { renderDrawings } from './render-charts.js';
import { describeTimingCharts } from './render-timing.js';

export interface SystemChartFile extends ChartFile {
  /** Companion that it shows by itself; `null` for one of the interacting orbits. */
  readonly letter: string | null;
}

export function describeSystemCharts(
  system: TimingSystemSolved,
): { readonly letter: string | null; readonly drawings: ChartDrawing[] }[] {
  const { target, timeScale } = system.record;
  const together =
    system.interaction === null
      ? []
      : interactionCharts(
          system.interaction.fit,
          system.interaction.tables,
          target,
          timeScale === 'unknown' ? 'date' : timeScale.replace('_', ' '),
        );
  return [
    { letter: null, drawings: together },
    ...system.companions.map(({ letter, solved }) => ({
      letter,
      drawings: describeTimingCharts({
        ...solved,
        record: { ...solved.record, target: `${target} ${letter}` },
      }).map((drawing) => ({ ...drawing, name: `${drawing.name}-${letter}` })),
    })),
  ];
}

/** Each chart as PNG and as SVG. */
export async function renderSystemCharts(system: TimingSystemSolved): Promise<SystemChartFile[]> {
  const files: SystemChartFile[] = [];
  for (const { letter, drawings } of describeSystemCharts(system))
    files.push(...(await renderDrawings(drawings)).map((file) => ({ ...file, letter })));
  return files;
}
