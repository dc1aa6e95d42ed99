import { describe, expect, it } from 'vitest';
import { SvgContext } from '../../../src/dossier/charts/svg-context.js';
import { parseXml } from '../../support/xml-check.js';

const context = (): SvgContext =>
  new SvgContext({ font: '', measureText: (text) => ({ width: 5 * text.length }) });
const read = (ctx: SvgContext): ReturnType<typeof parseXml> =>
  parseXml(
    ctx.document(
      { width: 100, height: 50, widthMm: 26, heightMm: 13 },
      { title: 'a & b', description: '<c>' },
    ),
  );
const named = (ctx: SvgContext, name: string): ReturnType<typeof parseXml> =>
  read(ctx).filter((element) => element.name === name);

describe('SvgContext', () => {
  it('writes size, viewBox, escaped title and description', () => {
    const [svg, title, description] = read(context());
    expect(svg!.attributes).toMatchObject({ width: '26mm', height: '13mm', viewBox: '0 0 100 50' });
    expect(title!.text).toBe('a & b');
    expect(description!.text).toBe('<c>');
  });
  it('makes one element of a path that is filled and then outlined, a circle of a full turn', () => {
    const ctx = context();
    ctx.fillStyle = '#ff0000';
    ctx.strokeStyle = '#0000ff';
    ctx.beginPath();
    ctx.arc(10, 20, 3, 0, 2 * Math.PI);
    ctx.closePath();
    ctx.fill();
    ctx.stroke();
    const circles = named(ctx, 'circle');
    expect(circles).toHaveLength(1);
    expect(circles[0]!.inherited).toMatchObject({
      cx: '10',
      cy: '20',
      r: '3',
      fill: '#ff0000',
      stroke: '#0000ff',
    });
  });
  it('applies the transform that holds when a point is added', () => {
    const ctx = context();
    ctx.translate(10, 5);
    ctx.rotate(Math.PI / 2);
    ctx.beginPath();
    ctx.moveTo(0, 0);
    ctx.lineTo(4, 0);
    ctx.stroke();
    expect(named(ctx, 'path')[0]!.attributes['d']).toBe('M10 5L10 9');
  });
  it('draws part of a circle the way round that is asked', () => {
    const ctx = context();
    ctx.beginPath();
    ctx.arc(0, 0, 10, 0, Math.PI / 2);
    ctx.stroke();
    ctx.beginPath();
    ctx.arc(0, 0, 10, 0, Math.PI / 2, true);
    ctx.stroke();
    // Arc flags: large-arc, sweep (SVG 2, section 9.3.8); positive sweep is clockwise on the screen, as on a canvas.
    expect(named(ctx, 'path').map((path) => path.attributes['d'])).toEqual([
      'M10 0A10 10 0 0 1 0 10',
      'M10 0A10 10 0 1 0 0 10',
    ]);
  });
  it('brings back style, transform and clip with restore', () => {
    const ctx = context();
    ctx.save();
    ctx.beginPath();
    ctx.rect(0, 0, 5, 5);
    ctx.clip();
    ctx.fillStyle = '#00ff00';
    ctx.translate(7, 0);
    ctx.fillRect(0, 0, 1, 1);
    ctx.restore();
    ctx.fillRect(0, 0, 1, 1);
    const [clip, inside, outside] = named(ctx, 'rect');
    expect(clip!.attributes['width']).toBe('5');
    expect(inside!.inherited).toMatchObject({ x: '7', fill: '#00ff00', 'clip-path': 'url(#clip1)' });
    expect(outside!.inherited).toMatchObject({ x: '0', fill: '#000000' });
    expect(outside!.inherited['clip-path']).toBeUndefined();
  });
  it('keeps text as escaped text with its anchor', () => {
    const ctx = context();
    ctx.font = 'italic bold 12px ReportSans';
    ctx.textAlign = 'right';
    ctx.fillText('<i>&', 3, 4);
    expect(named(ctx, 'text')[0]).toMatchObject({
      text: '<i>&',
      inherited: { 'text-anchor': 'end', 'font-size': '12', 'font-weight': 'bold', 'font-style': 'italic' },
    });
  });
  it('refuses coordinates that are not numbers, and styles that it cannot write', () => {
    const ctx = context();
    expect(() => {
      ctx.moveTo(NaN, 0);
    }).toThrow(/coordinate/);
    ctx.fillStyle = {};
    expect(() => {
      ctx.fillRect(0, 0, 1, 1);
    }).toThrow(/plain colours/);
  });
});
