/**
 * A 2d drawing context that writes SVG: the part of the canvas interface that our charts use. Text stays text, circles
 * stay circles, and neighbours of one style share a group. What it does not know it refuses, rather than draw it wrong.
 */
import { escapeXml } from './labels.js';
import { SvgBody } from './svg-body.js';
import { coordinate, IDENTITY, multiply, PathRecorder } from './svg-path.js';
import type { Matrix } from './svg-path.js';

/** Gives the width of a text; a real context, because an SVG writer has no font of its own. */
export interface TextMeasurer {
  font: string;
  measureText(text: string): { readonly width: number };
}

/** Settings that `save` keeps and `restore` brings back. */
const INITIAL = {
  fillStyle: '#000000',
  strokeStyle: '#000000',
  lineWidth: 1,
  lineCap: 'butt',
  lineJoin: 'miter',
  lineDashOffset: 0,
  globalAlpha: 1,
  font: '10px sans-serif',
  textAlign: 'start',
  textBaseline: 'alphabetic',
  matrix: IDENTITY,
  clipId: '',
  dash: [] as readonly number[],
};
type Settings = typeof INITIAL;

// Height of the text's reference line above the baseline, in units of the size of type (DejaVu Sans, hhea and OS/2 tables).
const BASELINE_SHIFT: Readonly<Record<string, number>> = {
  top: 0.93,
  hanging: 0.74,
  middle: 0.365,
  bottom: -0.24,
};
const SVG_FONTS = "'DejaVu Sans', Verdana, sans-serif";

export class SvgContext {
  // Plain fields, because the drawing library assigns them.
  fillStyle: unknown = INITIAL.fillStyle;
  strokeStyle: unknown = INITIAL.strokeStyle;
  lineWidth: number = INITIAL.lineWidth;
  lineCap: string = INITIAL.lineCap;
  lineJoin: string = INITIAL.lineJoin;
  lineDashOffset: number = INITIAL.lineDashOffset;
  globalAlpha: number = INITIAL.globalAlpha;
  font: string = INITIAL.font;
  textAlign: string = INITIAL.textAlign;
  textBaseline: string = INITIAL.textBaseline;
  private matrix: Matrix = IDENTITY;
  private clipId = '';
  private dash: readonly number[] = [];
  private readonly stack: Settings[] = [];
  private path = new PathRecorder();
  private readonly body = new SvgBody();
  /** A filled path that waits: where its outline follows at once, both make one element. */
  private waiting: { readonly path: PathRecorder; readonly fill: string; readonly state: string } | null =
    null;
  private readonly widths = new Map<string, number>();

  constructor(private readonly measurer: TextMeasurer) {}

  save(): void {
    this.stack.push({
      fillStyle: String(this.fillStyle),
      strokeStyle: String(this.strokeStyle),
      lineWidth: this.lineWidth,
      lineCap: this.lineCap,
      lineJoin: this.lineJoin,
      lineDashOffset: this.lineDashOffset,
      globalAlpha: this.globalAlpha,
      font: this.font,
      textAlign: this.textAlign,
      textBaseline: this.textBaseline,
      matrix: this.matrix,
      clipId: this.clipId,
      dash: this.dash,
    });
  }

  restore(): void {
    const kept = this.stack.pop();
    if (kept !== undefined) Object.assign(this, kept);
  }

  setTransform(a: number, b: number, c: number, d: number, e: number, f: number): void {
    this.matrix = [a, b, c, d, e, f];
  }
  transform(a: number, b: number, c: number, d: number, e: number, f: number): void {
    this.matrix = multiply(this.matrix, [a, b, c, d, e, f]);
  }
  translate(x: number, y: number): void {
    this.matrix = multiply(this.matrix, [1, 0, 0, 1, x, y]);
  }
  scale(x: number, y: number): void {
    this.matrix = multiply(this.matrix, [x, 0, 0, y, 0, 0]);
  }
  rotate(angle: number): void {
    const [cos, sin] = [Math.cos(angle), Math.sin(angle)];
    this.matrix = multiply(this.matrix, [cos, sin, -sin, cos, 0, 0]);
  }

  beginPath(): void {
    this.path = new PathRecorder();
  }
  closePath(): void {
    this.path.close();
  }
  moveTo(x: number, y: number): void {
    this.path.move(this.matrix, x, y);
  }
  lineTo(x: number, y: number): void {
    this.path.line(this.matrix, x, y);
  }
  bezierCurveTo(x1: number, y1: number, x2: number, y2: number, x: number, y: number): void {
    this.path.cubic(this.matrix, x1, y1, x2, y2, x, y);
  }
  quadraticCurveTo(x1: number, y1: number, x: number, y: number): void {
    this.path.quadratic(this.matrix, x1, y1, x, y);
  }
  arc(x: number, y: number, radius: number, start: number, end: number, backwards = false): void {
    this.path.arc(this.matrix, x, y, radius, start, end, backwards);
  }
  rect(x: number, y: number, width: number, height: number): void {
    this.path.rectangle(this.matrix, x, y, width, height);
  }

  clip(): void {
    // An empty clip hides everything; a clip inside a clip is drawn with the inner one only, which our charts keep smaller.
    const shape = this.path.empty ? '<path d="M0 0"/>' : this.path.element();
    this.flush();
    this.clipId = this.body.clipId(shape);
  }

  fill(): void {
    if (this.path.empty) return;
    this.flush();
    this.waiting = { path: this.path, fill: `fill="${this.paint(this.fillStyle)}"`, state: this.state() };
  }
  stroke(): void {
    if (this.path.empty || !(this.lineWidth > 0)) return;
    const filled = this.waiting;
    if (filled?.path === this.path && filled.state === this.state()) {
      this.waiting = null;
      this.body.put(`${filled.fill} ${this.strokeAttributes()}${filled.state}`, this.path.element());
    } else {
      this.put(`fill="none" ${this.strokeAttributes()}`, this.path.element());
    }
  }
  fillRect(x: number, y: number, width: number, height: number): void {
    const box = new PathRecorder();
    box.rectangle(this.matrix, x, y, width, height);
    this.put(`fill="${this.paint(this.fillStyle)}"`, box.element());
  }
  strokeRect(x: number, y: number, width: number, height: number): void {
    const box = new PathRecorder();
    box.rectangle(this.matrix, x, y, width, height);
    this.put(`fill="none" ${this.strokeAttributes()}`, box.element());
  }
  clearRect(): void {
    // The picture must outlive the chart that is destroyed after drawing.
  }

  setLineDash(segments: readonly number[]): void {
    this.dash = [...segments];
  }
  getLineDash(): number[] {
    return [...this.dash];
  }

  measureText(text: string): { width: number } {
    const key = `${this.font}\n${text}`;
    let width = this.widths.get(key);
    if (width === undefined) {
      this.measurer.font = this.font;
      width = this.measurer.measureText(text).width;
      this.widths.set(key, width);
    }
    return { width };
  }

  fillText(text: string, x: number, y: number): void {
    if (text.trim() === '') return;
    const font = /(italic)?\s*(bold|[1-9]00)?\s*([\d.]+)px/.exec(this.font);
    const sizePx = Number(font?.[3] ?? 10);
    const baseline = y + sizePx * (BASELINE_SHIFT[this.textBaseline] ?? 0);
    const anchor = { center: 'middle', right: 'end', end: 'end' }[this.textAlign];
    const attributes = [
      `font-size="${coordinate(sizePx)}"`,
      font?.[1] === undefined ? '' : 'font-style="italic"',
      font?.[2] === undefined || font[2] === '400' ? '' : `font-weight="${font[2]}"`,
      anchor === undefined ? '' : `text-anchor="${anchor}"`,
      `fill="${this.paint(this.fillStyle)}"`,
    ];
    const [a, b, c, d, e, f] = this.matrix;
    const [px, py] = [a * x + c * baseline + e, b * x + d * baseline + f];
    const place =
      b === 0 && c === 0
        ? `x="${coordinate(px)}" y="${coordinate(py)}"`
        : `transform="matrix(${[a, b, c, d, px, py].map(coordinate).join(' ')})"`;
    this.put(attributes.filter((part) => part !== '').join(' '), `<text ${place}>${escapeXml(text)}</text>`);
  }

  /**
   * The finished document.
   *
   * @param size - of the drawing, CSS px, and on paper, mm
   * @param words - title and description for readers who cannot see the picture; escaped here
   */
  document(
    size: {
      readonly width: number;
      readonly height: number;
      readonly widthMm: number;
      readonly heightMm: number;
    },
    words: { readonly title: string; readonly description: string },
  ): string {
    this.flush();
    return [
      `<svg xmlns="http://www.w3.org/2000/svg" width="${size.widthMm}mm" height="${size.heightMm}mm" viewBox="0 0 ${size.width} ${size.height}" role="img" font-family="${SVG_FONTS}">`,
      `<title>${escapeXml(words.title)}</title>`,
      `<desc>${escapeXml(words.description)}</desc>`,
      ...this.body.finish(),
      '</svg>',
      '',
    ].join('\n');
  }

  private put(attributes: string, element: string): void {
    this.flush();
    this.body.put(`${attributes}${this.state()}`, element);
  }

  private flush(): void {
    const filled = this.waiting;
    this.waiting = null;
    if (filled !== null) this.body.put(`${filled.fill}${filled.state}`, filled.path.element());
  }

  /** Attributes of opacity and clipping as they stand. */
  private state(): string {
    const alpha = this.globalAlpha < 1 ? ` opacity="${coordinate(this.globalAlpha)}"` : '';
    return this.clipId === '' ? alpha : `${alpha} clip-path="url(#${this.clipId})"`;
  }

  private strokeAttributes(): string {
    const scale = Math.hypot(this.matrix[0], this.matrix[1]);
    const optional = [
      this.lineCap === 'butt' ? '' : ` stroke-linecap="${escapeXml(this.lineCap)}"`,
      this.lineJoin === 'miter' ? '' : ` stroke-linejoin="${escapeXml(this.lineJoin)}"`,
      this.dash.length === 0
        ? ''
        : ` stroke-dasharray="${this.dash.map((part) => coordinate(part * scale)).join(' ')}"`,
    ];
    const width = coordinate(this.lineWidth * scale);
    return `stroke="${this.paint(this.strokeStyle)}" stroke-width="${width}"${optional.join('')}`;
  }

  private paint(style: unknown): string {
    if (typeof style !== 'string')
      throw new TypeError('charts are drawn in plain colours; gradients have no SVG here');
    return escapeXml(style);
  }
}
