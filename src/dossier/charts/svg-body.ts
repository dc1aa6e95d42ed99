/** The growing body of an SVG: elements gathered in groups of one style, clip paths named in order of first use. */

export class SvgBody {
  private readonly lines: string[] = [];
  private openGroup = '';
  private readonly clips = new Map<string, string>();

  /** Name of the clip path with this shape (an element); the same shape gets the same name. */
  clipId(shape: string): string {
    let id = this.clips.get(shape);
    if (id === undefined) {
      id = `clip${this.clips.size + 1}`;
      this.clips.set(shape, id);
    }
    return id;
  }

  /** Adds an element that is drawn with `attributes` (already escaped). */
  put(attributes: string, element: string): void {
    if (attributes !== this.openGroup) {
      if (this.openGroup !== '') this.lines.push('</g>');
      this.lines.push(`<g ${attributes}>`);
      this.openGroup = attributes;
    }
    this.lines.push(element);
  }

  /** Definitions and elements, one a line. */
  finish(): string[] {
    const clips = [...this.clips].map(([shape, id]) => `<clipPath id="${id}">${shape}</clipPath>`);
    return [
      ...(clips.length > 0 ? [`<defs>${clips.join('')}</defs>`] : []),
      ...this.lines,
      ...(this.openGroup === '' ? [] : ['</g>']),
    ];
  }
}
