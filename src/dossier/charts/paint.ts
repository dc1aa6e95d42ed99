/** Turns a drawing into files. The heavy libraries are loaded when the first chart is painted, not before. */
import type { Chart as ChartClass, ChartConfiguration } from 'chart.js';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { cssSize } from './chart-drawing.js';
import type { ChartDrawing } from './chart-drawing.js';
import { panelCanvas } from './panel-context.js';
import type { CanvasLike } from './panel-context.js';
import { withResolution } from './png-resolution.js';
import { FONT_FAMILY } from './style.js';
import { SvgContext } from './svg-context.js';

export const PNG_DOTS_PER_INCH = 300;

/** Paints drawings; made by `loadPainter`. */
export interface Painter {
  /** A PNG file at 300 dpi, its physical size stated. Encoding runs on another thread. */
  png(drawing: ChartDrawing): Promise<Uint8Array>;
  /** An SVG document, UTF-8. */
  svg(drawing: ChartDrawing): Uint8Array;
}

let loading: Promise<Painter> | null = null;

/**
 * Loads the drawing libraries and the font, once per process.
 *
 * @throws Error when the font file cannot be read: without it a bare machine would draw charts with no text at all
 */
export function loadPainter(): Promise<Painter> {
  loading ??= load();
  return loading;
}

async function load(): Promise<Painter> {
  const [{ createCanvas, GlobalFonts }, { Chart, registerables }, { default: annotation }] =
    await Promise.all([import('@napi-rs/canvas'), import('chart.js'), import('chartjs-plugin-annotation')]);
  const fontFolder = join(
    dirname(createRequire(import.meta.url).resolve('@fontsource/dejavu-sans/package.json')),
    'files',
  );
  for (const variant of ['400-normal', '700-normal', '400-italic']) {
    const file = join(fontFolder, `dejavu-sans-latin-${variant}.woff2`);
    if (!GlobalFonts.registerFromPath(file, FONT_FAMILY))
      throw new Error(`the font for charts could not be read: ${file}`);
  }
  Chart.register(...registerables, annotation);
  Chart.defaults.font.family = FONT_FAMILY;
  const measurer = createCanvas(1, 1).getContext('2d');

  return {
    async png(drawing): Promise<Uint8Array> {
      const { width, height } = cssSize(drawing);
      const widthPx = Math.round((drawing.widthMm / 25.4) * PNG_DOTS_PER_INCH);
      const scale = widthPx / width;
      const canvas = createCanvas(widthPx, Math.round(height * scale));
      const context = canvas.getContext('2d');
      context.lang = 'en';
      context.fillStyle = '#ffffff';
      context.fillRect(0, 0, canvas.width, canvas.height);
      draw(Chart, panelCanvas(context, width, height, scale), drawing.configure());
      return withResolution(await canvas.encode('png'), PNG_DOTS_PER_INCH);
    },
    svg(drawing): Uint8Array {
      const { width, height } = cssSize(drawing);
      const context = new SvgContext(measurer);
      context.fillStyle = '#ffffff';
      context.fillRect(0, 0, width, height);
      draw(Chart, panelCanvas(context, width, height, 1), drawing.configure());
      const size = { width, height, widthMm: drawing.widthMm, heightMm: drawing.heightMm };
      return new TextEncoder().encode(
        context.document(size, { title: drawing.title, description: drawing.caption }),
      );
    },
  };
}

/** Lays a chart out, draws it once and lets go of it. */
function draw(chartClass: typeof ChartClass, canvas: CanvasLike, config: ChartConfiguration): void {
  // The library's types ask for a browser's canvas; it only uses what `CanvasLike` has.
  new chartClass(canvas as unknown as ConstructorParameters<typeof ChartClass>[0], config).destroy();
}
