/** Axes of all charts: frame, ticks and titles set alike; stacked panels get one width so that their titles line up. */
import type { ScaleOptionsByType } from 'chart.js';
import { FRAME_COLOUR, GRID_COLOUR, TEXT_COLOUR, TICK_FONT_PX, TITLE_FONT_PX } from './style.js';
import { linearTicks, logTicks } from './ticks.js';
import type { Ticks } from './ticks.js';

type DeepPartial<T> = T extends (...args: never[]) => unknown
  ? T
  : T extends object
    ? { [K in keyof T]?: DeepPartial<T[K]> }
    : T;
export type AxisOptions = DeepPartial<ScaleOptionsByType<'linear' | 'logarithmic'>>;

export interface AxisRequest {
  /** With its unit: `radial velocity (m/s)`. */
  readonly title: string;
  readonly min: number;
  readonly max: number;
  readonly position: 'left' | 'bottom';
  readonly logarithmic?: boolean;
  /** About how many ticks (linear axes). */
  readonly ticks?: number;
  /** Weight of this panel among the stacked ones; absent when there is one panel only. */
  readonly stackWeight?: number;
  /** Fixed width (left) or height (bottom) in CSS px; absent leaves it to the layout. */
  readonly thicknessPx?: number;
  /** Fractions at the lower and upper end without ticks. */
  readonly edge?: readonly [number, number];
}

/** Options of one axis of a chart. */
export function axis(request: AxisRequest): AxisOptions {
  const { min, max } = request;
  const ticks: Ticks =
    request.logarithmic === true
      ? logTicks(min, max)
      : linearTicks(min, max, request.ticks ?? 6, request.edge ?? [0, 0]);
  const texts = new Map(ticks.values.map((value, index) => [value, ticks.texts[index]!]));
  const thickness = request.thicknessPx;
  return {
    type: request.logarithmic === true ? 'logarithmic' : 'linear',
    position: request.position,
    min,
    max,
    ...(request.stackWeight === undefined ? {} : { stack: 'panels', stackWeight: request.stackWeight }),
    title: {
      display: true,
      text: request.title,
      color: TEXT_COLOUR,
      font: { size: TITLE_FONT_PX },
      padding: { top: 1, bottom: 1, y: 1 },
    },
    grid: {
      color: GRID_COLOUR,
      lineWidth: 0.6,
      drawTicks: true,
      tickLength: 4,
      tickColor: FRAME_COLOUR,
      tickWidth: 0.8,
    },
    border: { display: false },
    ticks: {
      color: TEXT_COLOUR,
      font: { size: TICK_FONT_PX },
      padding: 2,
      autoSkip: false,
      maxRotation: 0,
      callback: (value) => texts.get(Number(value)) ?? '',
    },
    afterBuildTicks: (scale) => {
      scale.ticks = ticks.values.map((value) => ({ value }));
    },
    ...(thickness === undefined
      ? {}
      : {
          afterFit: (scale) => {
            if (request.position === 'left') scale.width = thickness;
            else scale.height = thickness;
          },
        }),
  };
}

/** Width in CSS px that a left axis needs for its tick labels and title. */
export function leftAxisWidthPx(
  ...ranges: readonly { readonly min: number; readonly max: number; readonly ticks: number }[]
): number {
  let longest = 1;
  for (const { min, max, ticks } of ranges) {
    for (const text of linearTicks(min, max, ticks).texts) longest = Math.max(longest, text.length);
  }
  return Math.ceil(22 + 6.1 * longest);
}

/** An interval that holds all values with a margin; an empty or flat set gets a unit interval around it. */
export function paddedRange(low: number, high: number, margin: number): { min: number; max: number } {
  if (!(low <= high) || !Number.isFinite(low) || !Number.isFinite(high)) return { min: -1, max: 1 };
  const span = high - low;
  if (span <= 1e-12 * Math.max(1, Math.abs(low), Math.abs(high))) {
    const half = Math.max(0.5, Math.abs(low) * 1e-3);
    return { min: low - half, max: high + half };
  }
  return { min: low - margin * span, max: high + margin * span };
}
