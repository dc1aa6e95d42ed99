/** Colours of the charts of transits. */
import { markerStyle, shade } from './style.js';

/** Points of a light curve that are drawn as a crowd. */
export const POINT_COLOUR = '#4f6d8a';
export const TREND_COLOUR: string = markerStyle(1).fill;
export const MEAN_EDGE = '#000000';

/** Colours of companions, by their order. */
export const LETTER_COLOURS: readonly string[] = [0, 1, 2, 3, 4, 5].map((index) =>
  shade(markerStyle(index).edge, 0),
);

/** Colour of the points in one band, by the order of the bands. */
export function bandColour(index: number): string {
  return [POINT_COLOUR, '#b06a3b', '#3f8a6d', '#9a6a8a', '#a68a2a', '#4a94bd'][index % 6]!;
}
