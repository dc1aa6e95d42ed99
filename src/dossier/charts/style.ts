/** The look of all charts: colours, markers, sizes of type. Change it here and every chart follows. */
import type { ChartOptions } from 'chart.js';

export const FONT_FAMILY = 'ReportSans';
export const TEXT_COLOUR = '#111111';
export const FAINT_TEXT_COLOUR = '#555555';
export const FRAME_COLOUR = '#333333';
export const GRID_COLOUR = '#ececec';
export const MODEL_COLOUR = '#1a1a1a';
export const BAND_COLOUR = '#d4d4d4';

/** Sizes of type in CSS px; 9.3 px print as 7 pt. */
export const TICK_FONT_PX = 9.3;
export const TITLE_FONT_PX = 10;
export const HEADING_FONT_PX = 11;

/** How one instrument is drawn. Told apart by shape as well as by colour, so a grey copy still reads. */
export interface MarkerStyle {
  readonly shape: 'circle' | 'rect' | 'triangle' | 'rectRot';
  readonly fill: string;
  readonly edge: string;
  /** Colour of its error bars. */
  readonly bar: string;
  /** Shapes of one radius differ in area; this factor evens them out. */
  readonly sizeFactor: number;
}

// Palette of Okabe & Ito ("Color Universal Design", 2008), safe for the common kinds of colour blindness.
const PALETTE = [
  '#0072b2',
  '#d55e00',
  '#009e73',
  '#cc79a7',
  '#e69f00',
  '#56b4e9',
  '#f0e442',
  '#000000',
] as const;
const SHAPES = [
  ['circle', 1],
  ['rect', 1.12],
  ['triangle', 1.22],
  ['rectRot', 1.18],
] as const;

/** Style of the instrument with this index; the first eight differ in colour and no sixteen are alike. */
export function markerStyle(index: number): MarkerStyle {
  const colour = PALETTE[index % PALETTE.length]!;
  const [shape, sizeFactor] = SHAPES[index % SHAPES.length]!;
  // Every second group of four is hollow, and the rhythm shifts after eight, so shape + fill + colour do not repeat early.
  const hollow = (Math.floor(index / 4) + Math.floor(index / 8)) % 2 === 1;
  return {
    shape,
    fill: hollow ? '#ffffff' : colour,
    edge: shade(colour, hollow ? 0.3 : 0.35),
    bar: shade(colour, hollow ? 0.3 : 0.15),
    sizeFactor,
  };
}

/** A colour mixed with black; `amount` 0 leaves it, 1 gives black. */
export function shade(hex: string, amount: number): string {
  return mix(hex, 0, amount);
}

/** A colour mixed with white; opaque, so that overlapping marks do not add up. */
export function tint(hex: string, amount: number): string {
  return mix(hex, 255, amount);
}

function mix(hex: string, towards: number, amount: number): string {
  const channel = (start: number): string => {
    const value = Number.parseInt(hex.slice(start, start + 2), 16);
    return Math.round(value + (towards - value) * amount)
      .toString(16)
      .padStart(2, '0');
  };
  return `#${channel(1)}${channel(3)}${channel(5)}`;
}

/** Radius of a marker in CSS px: smaller the more points share the chart. */
export function markerRadius(count: number): number {
  if (count <= 60) return 2.6;
  if (count <= 200) return 2.1;
  if (count <= 700) return 1.6;
  return 1.15;
}

/** Options that all charts share. */
export function commonOptions(): ChartOptions {
  return {
    animation: false,
    responsive: false,
    maintainAspectRatio: false,
    devicePixelRatio: 1,
    events: [],
    normalized: true,
    parsing: false,
    color: TEXT_COLOUR,
    font: { family: FONT_FAMILY, size: TICK_FONT_PX },
    layout: { padding: { left: 2, right: 8, top: 3, bottom: 2 } },
    elements: { point: { radius: 0, hitRadius: 0 } },
  };
}
