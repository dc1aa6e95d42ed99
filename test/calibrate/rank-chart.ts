/** Rank histograms as one small SVG: a panel per quantity, with the band in which 95 % of even counts lie. */

const PANEL_WIDTH = 150;
const PANEL_HEIGHT = 84;
const COLUMNS = 4;
const MARGIN = 8;
const TITLE_HEIGHT = 14;

export interface RankPanel {
  readonly name: string;
  readonly counts: readonly number[];
}

export function rankChart(title: string, panels: readonly RankPanel[]): string {
  const columns = Math.min(COLUMNS, panels.length);
  const width = columns * (PANEL_WIDTH + MARGIN) + MARGIN;
  const height = Math.ceil(panels.length / columns) * (PANEL_HEIGHT + MARGIN) + MARGIN + 2 * TITLE_HEIGHT;
  const body = panels.map((panel, p) => {
    const x = MARGIN + (p % columns) * (PANEL_WIDTH + MARGIN);
    const y = MARGIN + 2 * TITLE_HEIGHT + Math.floor(p / columns) * (PANEL_HEIGHT + MARGIN);
    return `<g transform="translate(${x} ${y})">\n${panelBody(panel)}\n</g>`;
  });
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" width="${width}" height="${height}" font-family="sans-serif" font-size="10">`,
    `<rect width="${width}" height="${height}" fill="#ffffff"/>`,
    `<text x="${MARGIN}" y="${MARGIN + TITLE_HEIGHT}" font-size="12">${title}</text>`,
    ...body,
    '</svg>\n',
  ].join('\n');
}

function panelBody({ name, counts }: RankPanel): string {
  const total = counts.reduce((sum, count) => sum + count, 0);
  const expected = total / counts.length;
  const spread = 1.96 * Math.sqrt(expected * (1 - 1 / counts.length));
  const top = Math.max(2 * expected, ...counts);
  const plotHeight = PANEL_HEIGHT - TITLE_HEIGHT;
  const heightOf = (count: number): number => (count / top) * plotHeight;
  const round = (value: number): string => value.toFixed(1);
  const bar = PANEL_WIDTH / counts.length;
  const bars = counts.map(
    (count, b) =>
      `<rect x="${round(b * bar)}" y="${round(PANEL_HEIGHT - heightOf(count))}" width="${round(bar - 0.8)}" height="${round(heightOf(count))}"/>`,
  );
  return [
    `<text x="0" y="10">${name}</text>`,
    `<rect x="0" y="${round(PANEL_HEIGHT - heightOf(expected + spread))}" width="${PANEL_WIDTH}" height="${round(heightOf(2 * spread))}" fill="#e4ddcf"/>`,
    `<g fill="#3f6b66" fill-opacity="0.75">`,
    ...bars,
    '</g>',
    `<path d="M0 ${round(PANEL_HEIGHT - heightOf(expected))}H${PANEL_WIDTH}" stroke="#1d1d1d" stroke-width="0.7"/>`,
    `<path d="M0 ${PANEL_HEIGHT}H${PANEL_WIDTH}" stroke="#1d1d1d" stroke-width="0.7"/>`,
  ].join('\n');
}
