/** A drawing surface that Chart.js takes for a canvas of its own, placed and scaled on a real 2d context. */

/** What Chart.js needs of a canvas. */
export interface CanvasLike {
  width: number;
  height: number;
  readonly style: Record<string, string>;
  getContext(kind: string): unknown;
}

type Method = (...args: number[]) => unknown;

/**
 * Wraps a 2d context so that a chart laid out in CSS pixels is drawn at another scale. Clearing is left out:
 * Chart.js clears when it is destroyed, and the picture must outlive the chart.
 *
 * @param context - context of the real canvas; its transform is set here and belongs to the panel afterwards
 * @param widthPx - width of the panel, CSS px
 * @param heightPx - height of the panel, CSS px
 * @param scale - real pixels per CSS px
 */
export function panelCanvas(context: object, widthPx: number, heightPx: number, scale: number): CanvasLike {
  const real = context as Record<string | symbol, unknown>;
  const call = (name: string, ...args: number[]): void => {
    (real[name] as Method).apply(context, args);
  };
  const reset = (): void => {
    call('setTransform', scale, 0, 0, scale, 0, 0);
  };
  const canvas: CanvasLike = { width: widthPx, height: heightPx, style: {}, getContext: () => proxy };
  const replaced = new Map<string | symbol, unknown>([
    ['canvas', canvas],
    ['clearRect', () => undefined],
    ['resetTransform', reset],
    [
      'setTransform',
      (...matrix: number[]): void => {
        reset();
        call('transform', ...matrix);
      },
    ],
  ]);
  const bound = new Map<string | symbol, unknown>();
  const proxy: unknown = new Proxy(context, {
    get(_target, key): unknown {
      if (replaced.has(key)) return replaced.get(key);
      const value = real[key];
      if (typeof value !== 'function') return value;
      let method = bound.get(key);
      if (method === undefined) {
        method = (value as (...args: unknown[]) => unknown).bind(context);
        bound.set(key, method);
      }
      return method;
    },
    set(_target, key, value): boolean {
      real[key] = value;
      return true;
    },
  });
  reset();
  return canvas;
}
