/** Path data of an SVG under an affine transform, with coordinates rounded to 0.01 px. */

/** (a, b, c, d, e, f): x' = a x + c y + e, y' = b x + d y + f. */
export type Matrix = readonly [number, number, number, number, number, number];

export const IDENTITY: Matrix = [1, 0, 0, 1, 0, 0];

/** The transform that applies `right` first, then `left`. */
export function multiply(left: Matrix, right: Matrix): Matrix {
  const [a, b, c, d, e, f] = left;
  const [p, q, r, s, t, u] = right;
  return [a * p + c * q, b * p + d * q, a * r + c * s, b * r + d * s, a * t + c * u + e, b * t + d * u + f];
}

/** A coordinate as text: at most two decimals, no minus zero. */
export function coordinate(value: number): string {
  if (!Number.isFinite(value)) throw new RangeError(`a coordinate of a drawing is ${value}`);
  const rounded = Math.round(value * 100) / 100;
  return rounded === 0 ? '0' : String(rounded);
}

/** Collects one path; points are transformed when they arrive, as on a canvas. */
export class PathRecorder {
  private readonly parts: string[] = [];
  private started = false;
  /** Set while the path is one full circle and nothing else. */
  private circle: { x: number; y: number; r: number } | null = null;
  /** Set while the path is one upright rectangle and nothing else. */
  private box: string | null = null;

  get empty(): boolean {
    return this.parts.length === 0;
  }

  get data(): string {
    return this.parts.join('');
  }

  /** The shortest SVG element for this path, without attributes of style. */
  element(): string {
    if (this.circle !== null) {
      const { x, y, r } = this.circle;
      return `<circle cx="${coordinate(x)}" cy="${coordinate(y)}" r="${coordinate(r)}"/>`;
    }
    return this.box ?? `<path d="${this.data}"/>`;
  }

  move(m: Matrix, x: number, y: number): void {
    this.add(`M${this.point(m, x, y)}`);
    this.started = true;
  }

  line(m: Matrix, x: number, y: number): void {
    this.add(`${this.started ? 'L' : 'M'}${this.point(m, x, y)}`);
    this.started = true;
  }

  cubic(m: Matrix, x1: number, y1: number, x2: number, y2: number, x: number, y: number): void {
    this.add(`C${this.point(m, x1, y1)} ${this.point(m, x2, y2)} ${this.point(m, x, y)}`);
  }

  quadratic(m: Matrix, x1: number, y1: number, x: number, y: number): void {
    this.add(`Q${this.point(m, x1, y1)} ${this.point(m, x, y)}`);
  }

  close(): void {
    if (this.empty) return;
    const { circle, box } = this;
    this.add('Z');
    // Closing changes neither a full circle nor a rectangle.
    this.circle = circle;
    this.box = box;
  }

  rectangle(m: Matrix, x: number, y: number, width: number, height: number): void {
    const first = this.empty;
    this.move(m, x, y);
    this.line(m, x + width, y);
    this.line(m, x + width, y + height);
    this.line(m, x, y + height);
    this.close();
    if (first && m[1] === 0 && m[2] === 0 && width * m[0] >= 0 && height * m[3] >= 0) {
      const [left, top] = [m[0] * x + m[4], m[3] * y + m[5]];
      const size = `width="${coordinate(width * m[0])}" height="${coordinate(height * m[3])}"`;
      this.box = `<rect x="${coordinate(left)}" y="${coordinate(top)}" ${size}/>`;
    }
  }

  /** Arc of a circle under a transform without shear, as the canvas method of the same arguments. */
  arc(m: Matrix, x: number, y: number, radius: number, start: number, end: number, backwards: boolean): void {
    const turn = 2 * Math.PI;
    const full = Math.abs(end - start) >= turn - 1e-6;
    let sweep = (end - start) % turn;
    if (full) sweep = backwards ? -turn : turn;
    else if (backwards && sweep > 0) sweep -= turn;
    else if (!backwards && sweep < 0) sweep += turn;
    const r = radius * Math.hypot(m[0], m[1]);
    const first = this.empty;
    const at = (angle: number): [number, number] => [
      x + radius * Math.cos(angle),
      y + radius * Math.sin(angle),
    ];
    this.line(m, ...at(start));
    // One SVG arc cannot go all the way round: halves do.
    for (const fraction of full ? [0.5, 1] : [1]) {
      const angle = start + sweep * fraction;
      const large = !full && Math.abs(sweep) > Math.PI ? 1 : 0;
      const radiusText = coordinate(r);
      this.add(`A${radiusText} ${radiusText} 0 ${large} ${sweep > 0 ? 1 : 0} ${this.point(m, ...at(angle))}`);
    }
    if (first && full) this.circle = { x: m[0] * x + m[2] * y + m[4], y: m[1] * x + m[3] * y + m[5], r };
  }

  private add(part: string): void {
    this.circle = null;
    this.box = null;
    this.parts.push(part);
  }

  private point(m: Matrix, x: number, y: number): string {
    return `${coordinate(m[0] * x + m[2] * y + m[4])} ${coordinate(m[1] * x + m[3] * y + m[5])}`;
  }
}
