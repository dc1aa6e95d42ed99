/**
 * Charts of many small panels are drawn by our own hand on the surface that the drawing library prepares: a grid of
 * dozens of its axes costs more than the drawing itself and leaves their titles unaligned.
 */
import type { ChartConfiguration } from 'chart.js';
import { heading } from './headings.js';
import { commonOptions } from './style.js';

export interface Sheet {
  readonly ctx: CanvasRenderingContext2D;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Height in CSS px that the heading takes at the top. */
export const HEADING_PX = 20;

/** A configuration without axes whose content is drawn by `paint`. */
export function freehand(title: string, paint: (sheet: Sheet) => void): ChartConfiguration {
  return {
    type: 'scatter',
    data: { datasets: [] },
    options: {
      ...commonOptions(),
      scales: { x: { display: false }, y: { display: false } },
      plugins: { title: heading(title), legend: { display: false } },
    },
    plugins: [
      {
        id: 'freehand',
        afterDraw: ({ ctx, width, height }) => {
          ctx.save();
          paint({ ctx, widthPx: width, heightPx: height });
          ctx.restore();
        },
      },
    ],
  };
}
