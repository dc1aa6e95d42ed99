/** Draws planned orbits into the panel of a chart: sectors, paths, star, marks, letters, the way to the observer. */
import type { Chart, Scale } from 'chart.js';
import type { ChartPlugin } from './chart-drawing.js';
import { clipToPanel } from './error-bars.js';
import type { OrbitPlan, PlannedOrbit } from './orbit-plan.js';
import { FONT_FAMILY, FRAME_COLOUR, markerStyle, TEXT_COLOUR, TICK_FONT_PX, tint } from './style.js';

const SECTOR_FILL = ['#dbe6ee', '#f4f7f9'] as const;
const STAR_FILL = '#e69f00';
const STAR_RADIUS_PX = 4.2;
const MARK_RADIUS_PX = 3.4;
/** An orbit with a smaller semi-major axis on the drawing has no room for marks. */
const SMALLEST_MARKED_PX = 16;

interface Pixels {
  readonly x: number;
  readonly y: number;
}

/**
 * A plugin that draws the plan.
 *
 * @param chosen - indices of the orbits drawn boldly; sectors are shaded for a single one only
 */
export function orbitMarks(plan: OrbitPlan, chosen: readonly number[]): ChartPlugin {
  return {
    id: 'orbitMarks',
    beforeDatasetsDraw: (chart) => {
      const xAxis = chart.scales['x'];
      const yAxis = chart.scales['y'];
      if (xAxis === undefined || yAxis === undefined) return;
      chart.ctx.save();
      clipToPanel(chart, yAxis);
      drawPlan(chart, xAxis, yAxis, plan, chosen);
      chart.ctx.restore();
    },
    afterDatasetsDraw: (chart) => {
      drawKey(
        chart,
        chosen.some((index) => plan.orbits[index]?.circular === false),
      );
    },
  };
}

function drawPlan(
  chart: Chart,
  xAxis: Scale,
  yAxis: Scale,
  plan: OrbitPlan,
  chosen: readonly number[],
): void {
  const { ctx } = chart;
  const pixel = ({ x, y }: Pixels): Pixels => ({
    x: xAxis.getPixelForValue(x),
    y: yAxis.getPixelForValue(y),
  });
  const trace = (points: readonly Pixels[]): void => {
    ctx.beginPath();
    points.forEach((point, index) => {
      const { x, y } = pixel(point);
      if (index === 0) ctx.moveTo(x, y);
      else ctx.lineTo(x, y);
    });
    ctx.closePath();
  };
  const pixelsPerUnit = Math.abs(xAxis.getPixelForValue(1) - xAxis.getPixelForValue(0));
  const single = chosen.length === 1 ? plan.orbits[chosen[0]!] : undefined;
  single?.sectors.forEach((sector, index) => {
    ctx.fillStyle = SECTOR_FILL[index % 2]!;
    trace(sector);
    ctx.fill();
  });
  plan.orbits.forEach((orbit, index) => {
    const bold = chosen.includes(index);
    const colour = markerStyle(index).bar;
    ctx.strokeStyle = bold ? colour : tint(colour, 0.45);
    ctx.lineWidth = bold ? 1.4 : 0.9;
    ctx.setLineDash(bold ? [] : [3, 2]);
    trace(orbit.path);
    ctx.stroke();
    ctx.setLineDash([]);
    drawLetter(chart, orbit, pixel, colour);
    if (bold && orbit.semiMajorAxis * pixelsPerUnit >= SMALLEST_MARKED_PX)
      drawHeading(ctx, orbit, pixel, colour);
  });
  const star = pixel({ x: 0, y: 0 });
  disc(ctx, star, STAR_RADIUS_PX, STAR_FILL, TEXT_COLOUR);
  for (const index of chosen) {
    const orbit = plan.orbits[index]!;
    if (orbit.semiMajorAxis * pixelsPerUnit < SMALLEST_MARKED_PX) continue;
    // Marks that would cover the star are left out: near periastron of a very eccentric orbit they say nothing.
    const clear = (at: Pixels): boolean => Math.hypot(at.x - star.x, at.y - star.y) > STAR_RADIUS_PX + 1;
    const [periastron, conjunction] = [pixel(orbit.periastron), pixel(orbit.inferiorConjunction)];
    if (!orbit.circular && clear(periastron)) diamond(ctx, periastron);
    if (clear(conjunction)) disc(ctx, conjunction, MARK_RADIUS_PX - 0.6, '#ffffff', TEXT_COLOUR);
  }
  drawObserverArrow(chart, emptiestCorner(chart, plan, pixel));
}

/** The letter stands outside the path at apastron; for a path that leaves the view, at the last point inside it. */
function drawLetter(
  chart: Chart,
  orbit: PlannedOrbit,
  pixel: (point: Pixels) => Pixels,
  colour: string,
): void {
  const { ctx, chartArea } = chart;
  const room = 12;
  const star = pixel({ x: 0, y: 0 });
  const half = orbit.path.length >> 1;
  for (let step = 0; step <= half; step += 1) {
    const index = half + (step % 2 === 0 ? step >> 1 : -(step + 1) >> 1);
    const point = pixel(orbit.path[index]!);
    const distance = Math.hypot(point.x - star.x, point.y - star.y);
    if (distance === 0) continue;
    const away = Math.max(distance + 7.5, STAR_RADIUS_PX + 8) / distance;
    const x = star.x + (point.x - star.x) * away;
    const y = star.y + (point.y - star.y) * away;
    if (x < chartArea.left + room || x > chartArea.right - room) continue;
    if (y < chartArea.top + room || y > chartArea.bottom - room) continue;
    ctx.font = `bold ${TICK_FONT_PX + 0.7}px ${FONT_FAMILY}`;
    ctx.fillStyle = colour;
    ctx.textAlign = 'center';
    ctx.textBaseline = 'middle';
    ctx.fillText(orbit.letter, x, y);
    return;
  }
}

/** An arrowhead on the path, a quarter of the way from apastron, in the direction of motion. */
function drawHeading(
  ctx: Chart['ctx'],
  orbit: PlannedOrbit,
  pixel: (point: Pixels) => Pixels,
  colour: string,
): void {
  const index = Math.round(orbit.path.length * 0.62);
  const [from, to] = [pixel(orbit.path[index - 1]!), pixel(orbit.path[index]!)];
  const length = Math.hypot(to.x - from.x, to.y - from.y);
  if (length < 0.05) return;
  const [ux, uy] = [(to.x - from.x) / length, (to.y - from.y) / length];
  ctx.fillStyle = colour;
  ctx.beginPath();
  ctx.moveTo(to.x + ux * 4, to.y + uy * 4);
  ctx.lineTo(to.x - ux * 4 - uy * 3.4, to.y - uy * 4 + ux * 3.4);
  ctx.lineTo(to.x - ux * 4 + uy * 3.4, to.y - uy * 4 - ux * 3.4);
  ctx.closePath();
  ctx.fill();
}

function disc(ctx: Chart['ctx'], at: Pixels, radius: number, fill: string, edge: string): void {
  ctx.fillStyle = fill;
  ctx.strokeStyle = edge;
  ctx.lineWidth = 0.9;
  ctx.beginPath();
  ctx.arc(at.x, at.y, radius, 0, 2 * Math.PI);
  ctx.fill();
  ctx.stroke();
}

function diamond(ctx: Chart['ctx'], at: Pixels): void {
  ctx.fillStyle = TEXT_COLOUR;
  ctx.beginPath();
  ctx.moveTo(at.x, at.y - MARK_RADIUS_PX);
  ctx.lineTo(at.x + MARK_RADIUS_PX, at.y);
  ctx.lineTo(at.x, at.y + MARK_RADIUS_PX);
  ctx.lineTo(at.x - MARK_RADIUS_PX, at.y);
  ctx.closePath();
  ctx.fill();
}

const CORNER_WIDTH_PX = 46;
const CORNER_HEIGHT_PX = 47;
/** Room for a letter beside a path. */
const CLEARANCE_PX = 9;

/** Top left point of the corner of the panel in which the fewest points of paths lie; the lower ones are preferred. */
function emptiestCorner(chart: Chart, plan: OrbitPlan, pixel: (point: Pixels) => Pixels): Pixels {
  const { left, right, top, bottom } = chart.chartArea;
  const corners = [
    { x: left + 4, y: bottom - CORNER_HEIGHT_PX - 3 },
    { x: right - CORNER_WIDTH_PX - 4, y: bottom - CORNER_HEIGHT_PX - 3 },
    { x: left + 4, y: top + 3 },
    { x: right - CORNER_WIDTH_PX - 4, y: top + 3 },
  ];
  const points = plan.orbits.flatMap((orbit) => orbit.path.map(pixel));
  const crowd = corners.map(
    ({ x, y }) =>
      points.filter(
        (p) =>
          p.x >= x - CLEARANCE_PX &&
          p.x <= x + CORNER_WIDTH_PX + CLEARANCE_PX &&
          p.y >= y - CLEARANCE_PX &&
          p.y <= y + CORNER_HEIGHT_PX + CLEARANCE_PX,
      ).length,
  );
  return corners[crowd.indexOf(Math.min(...crowd))]!;
}

function drawObserverArrow(chart: Chart, corner: Pixels): void {
  const { ctx } = chart;
  const x = corner.x + CORNER_WIDTH_PX / 2;
  ctx.strokeStyle = FRAME_COLOUR;
  ctx.fillStyle = FRAME_COLOUR;
  ctx.lineWidth = 1.2;
  ctx.beginPath();
  ctx.moveTo(x, corner.y + 25);
  ctx.lineTo(x, corner.y + 39);
  ctx.stroke();
  ctx.beginPath();
  ctx.moveTo(x, corner.y + 46);
  ctx.lineTo(x - 3.6, corner.y + 38);
  ctx.lineTo(x + 3.6, corner.y + 38);
  ctx.closePath();
  ctx.fill();
  ctx.font = `${TICK_FONT_PX}px ${FONT_FAMILY}`;
  ctx.textAlign = 'center';
  ctx.textBaseline = 'top';
  ctx.fillText('to the', x, corner.y + 1);
  ctx.fillText('observer', x, corner.y + 12);
}

/** Key of the marks, in the margin above the panel. */
function drawKey(chart: Chart, withPeriastron: boolean): void {
  const { ctx, chartArea } = chart;
  const y = chartArea.top - 8;
  let x = chartArea.left + 4;
  ctx.save();
  ctx.font = `${TICK_FONT_PX}px ${FONT_FAMILY}`;
  ctx.textAlign = 'left';
  ctx.textBaseline = 'middle';
  const items: readonly (readonly [string, (at: Pixels) => void])[] = [
    ['star', (at) => { disc(ctx, at, STAR_RADIUS_PX, STAR_FILL, TEXT_COLOUR); }],
    ...(withPeriastron ? [['periastron', (at: Pixels) => { diamond(ctx, at); }] as const] : []),
    ['inferior conjunction', (at) => { disc(ctx, at, MARK_RADIUS_PX - 0.6, '#ffffff', TEXT_COLOUR); }],
  ]; // prettier-ignore
  for (const [text, mark] of items) {
    mark({ x, y });
    ctx.fillStyle = TEXT_COLOUR;
    ctx.fillText(text, x + 8, y);
    x += 8 + ctx.measureText(text).width + 14;
  }
  ctx.restore();
}
