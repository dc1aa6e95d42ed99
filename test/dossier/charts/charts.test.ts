import { readdirSync, readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { describeCharts, renderCharts, renderPeriodsCharts } from '../../../src/dossier/charts/index.js';
import type { ChartFile } from '../../../src/dossier/charts/index.js';
import type { Solved } from '../../../src/solving/types.js';
import {
  highlyEccentric,
  hotCircular,
  manyInstruments,
  noCompanion,
  threeCompanions,
} from '../../support/solved-cases.js';
import { parseXml } from '../../support/xml-check.js';
import type { XmlElement } from '../../support/xml-check.js';

const CASES = { hotCircular, threeCompanions, highlyEccentric, noCompanion, manyInstruments };
type CaseName = keyof typeof CASES;
const solutions = {} as Record<CaseName, Solved>;
const rendered = {} as Record<CaseName, ChartFile[]>;

beforeAll(async () => {
  for (const name of Object.keys(CASES) as CaseName[]) {
    solutions[name] = CASES[name]();
    rendered[name] = await renderCharts(solutions[name]);
  }
});

const decode = (file: ChartFile): string => new TextDecoder('utf-8', { fatal: true }).decode(file.bytes);
const svg = (name: CaseName, chart: string): XmlElement[] =>
  parseXml(decode(rendered[name].find((file) => file.name === `${chart}.svg`)!));
const texts = (elements: XmlElement[]): string[] =>
  elements.filter((element) => element.name === 'text').map((element) => element.text);

/** Frames of the panels: outlined rectangles without filling; x, y, width, height. */
function frames(elements: XmlElement[]): { left: number; top: number; right: number; bottom: number }[] {
  return elements
    .filter((one) => one.name === 'rect' && one.inherited['fill'] === 'none')
    .map(({ attributes: a }) => ({
      left: Number(a['x']),
      top: Number(a['y']),
      right: Number(a['x']) + Number(a['width']),
      bottom: Number(a['y']) + Number(a['height']),
    }))
    .filter((frame) => frame.right - frame.left > 100);
}

describe('the set of charts', () => {
  it.each([
    ['hotCircular', ['velocities', 'folded-b', 'periodogram-1', 'periodogram-2', 'orbit-b']],
    ['noCompanion', ['velocities', 'periodogram-1']],
    [
      'threeCompanions',
      [
        'velocities', 'folded-b', 'folded-c', 'folded-d', 'periodogram-1', 'periodogram-2', 'periodogram-3',
        'periodogram-4', 'orbit-b', 'orbit-c', 'orbit-d', 'orbits',
      ],
    ],
  ] as const)('of %s', (name, wanted) => {
    const files = wanted.flatMap((chart) => [`${chart}.png`, `${chart}.svg`]);
    expect(rendered[name].map((file) => file.name)).toEqual(files);
  }); // prettier-ignore

  it('is the same to the byte a second time', async () => {
    const again = await renderCharts(highlyEccentric());
    again.forEach((file, index) => {
      expect(Buffer.compare(file.bytes, rendered.highlyEccentric[index]!.bytes), file.name).toBe(0);
    });
  });

  it('comes without a solution for a search alone', async () => {
    const { stages, window } = solutions.noCompanion;
    const files = await renderPeriodsCharts(stages, window, 'Vellamo');
    expect(files.map((file) => file.name)).toEqual(['periodogram-1.png', 'periodogram-1.svg']);
  });

  it('loads no heavy library until something is drawn', () => {
    const folder = new URL('../../../src/dossier/charts/', import.meta.url);
    for (const file of readdirSync(folder)) {
      const source = readFileSync(new URL(file, folder), 'utf8');
      expect(source, file).not.toMatch(/^import (?!type )[^;]*'(chart\.js|@napi-rs|chartjs)/m);
    }
  });
});

describe.each(Object.keys(CASES) as CaseName[])('every chart of %s', (name) => {
  it('is a PNG of 300 dpi with the size of its drawing', () => {
    for (const drawing of describeCharts(solutions[name])) {
      const { bytes } = rendered[name].find((file) => file.name === `${drawing.name}.png`)!;
      const view = new DataView(bytes.buffer, bytes.byteOffset);
      expect(Array.from(bytes.subarray(0, 8))).toEqual([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
      expect(view.getUint32(16)).toBe(Math.round((drawing.widthMm / 25.4) * 300));
      expect(Math.abs(view.getUint32(20) - (drawing.heightMm / 25.4) * 300)).toBeLessThan(4); // whole CSS px
      expect([88, 180]).toContain(drawing.widthMm);
      expect(Buffer.from(bytes.subarray(37, 41)).toString()).toBe('pHYs');
      expect(view.getUint32(41)).toBe(11811);
    }
  });

  it('is a well-formed SVG in which every mark lies on the sheet and every text is a text', () => {
    for (const file of rendered[name].filter((one) => one.name.endsWith('.svg'))) {
      const document = decode(file);
      const elements = parseXml(document);
      expect(document, file.name).not.toMatch(/NaN|Infinity|undefined|null/);
      const [, , width, height] = elements[0]!.attributes['viewBox']!.split(' ').map(Number);
      for (const { name: tag, attributes } of elements) {
        if (tag !== 'circle') continue;
        expect(Number(attributes['cx'])).toBeGreaterThan(0);
        expect(Number(attributes['cx'])).toBeLessThan(width!);
        expect(Number(attributes['cy'])).toBeGreaterThan(0);
        expect(Number(attributes['cy'])).toBeLessThan(height!);
      }
      expect(texts(elements).length, file.name).toBeGreaterThan(8);
    }
  });
});

describe('velocities', () => {
  it('names axes with units, instruments and target', () => {
    const found = texts(svg('threeCompanions', 'velocities'));
    expect(found).toEqual(
      expect.arrayContaining([
        'radial velocity (m/s)',
        'residual (m/s)',
        'North',
        'South',
        'Dome 3',
        'Vellamo',
      ]),
    );
    expect(found).toContain('BJD TDB \u2212 2459000 (d)');
    expect(found).toContain('a spectrograph wi…');
  });
  it('leaves a title out that is too long', () => {
    expect(texts(svg('noCompanion', 'velocities')).join(' ')).not.toContain('A star');
  });
  it('says in the caption when cycles are drawn as a band', () => {
    const caption = (name: CaseName): string => rendered[name][0]!.caption;
    expect(caption('manyInstruments')).toMatch(/more than 60 cycles of b \(4\.231 d\).*grey band/);
    expect(caption('highlyEccentric')).not.toMatch(/band/);
  });
  it('shows every velocity once in each panel', () => {
    const elements = svg('hotCircular', 'velocities');
    const [upper, lower] = frames(elements).sort((one, other) => one.top - other.top);
    const inside = (frame: typeof upper): number =>
      elements.filter((one) => {
        const [x, y] = [Number(one.attributes['cx']), Number(one.attributes['cy'])];
        return (
          one.name === 'circle' && x > frame!.left && x < frame!.right && y > frame!.top && y < frame!.bottom
        );
      }).length;
    expect(inside(upper)).toBe(46);
    expect(inside(lower)).toBe(46);
    expect(upper!.left).toBe(lower!.left);
    expect(upper!.right).toBe(lower!.right);
  });
});

it('hostile labels are drawn as the text they are', () => {
  const found = texts(svg('manyInstruments', 'velocities'));
  expect(found).toContain('Vellamo <b>&amp;"');
  expect(found).toContain('West & <East>');
  expect(found).toContain('Fell hut');
});

describe('periodograms', () => {
  it('label false-alarm levels, the strongest period and the window', () => {
    const found = texts(svg('hotCircular', 'periodogram-1'));
    expect(found).toEqual(
      expect.arrayContaining([
        'FAP 10 %',
        'FAP 1 %',
        'FAP 0.1 %',
        'period (d)',
        'normalised power',
        'window',
        'solar day',
      ]),
    );
    // The grid of the fixture is coarse, so the peak of 3.52474 d lies at its nearest point.
    expect(found).toContain(`${solutions.hotCircular.stages[0]!.peaks[0]!.periodDays.toPrecision(4)} d`);
  });
  it('stay small with 100 000 frequencies', () => {
    const file = rendered.manyInstruments.find((one) => one.name === 'periodogram-1.svg')!;
    expect(file.bytes.length).toBeLessThan(150_000);
  });
  it('mark no peak of noise but the highest', () => {
    const found = texts(svg('noCompanion', 'periodogram-1')).filter((text) => /^[\d.]+ d$/.test(text));
    expect(found).toHaveLength(1);
  });
});

describe('orbits', () => {
  it('are drawn with one scale in both directions: a circular orbit is a circle', () => {
    const elements = svg('hotCircular', 'orbit-b');
    const paths = elements.filter((one) => one.name === 'path' && one.inherited['stroke-width'] === '1.4');
    expect(paths).toHaveLength(1);
    const numbers = paths[0]!.attributes['d']!.match(/-?[\d.]+/g)!.map(Number);
    const xs = numbers.filter((_, i) => i % 2 === 0);
    const ys = numbers.filter((_, i) => i % 2 === 1);
    const [wide, tall] = [Math.max(...xs) - Math.min(...xs), Math.max(...ys) - Math.min(...ys)];
    expect(wide).toBeGreaterThan(200);
    expect(Math.abs(wide - tall)).toBeLessThan(0.05); // coordinates are rounded to 0.01 px
    const [frame] = frames(elements);
    expect(Math.abs(frame!.right - frame!.left - (frame!.bottom - frame!.top))).toBeLessThan(0.05);
  });
  it('sweep equal areas as drawn', () => {
    const elements = svg('threeCompanions', 'orbit-c');
    const sectors = elements.filter(
      (one) => one.name === 'path' && ['#dbe6ee', '#f4f7f9'].includes(one.inherited['fill'] ?? ''),
    );
    expect(sectors).toHaveLength(12);
    const areas = sectors.map(({ attributes }) => {
      const n = attributes['d']!.match(/-?[\d.]+/g)!.map(Number);
      let sum = 0;
      for (let i = 0; i < n.length; i += 2) {
        const j = (i + 2) % n.length;
        sum += (n[i]! * n[j + 1]! - n[j]! * n[i + 1]!) / 2;
      }
      return Math.abs(sum);
    });
    const mean = areas.reduce((sum, area) => sum + area, 0) / 12;
    for (const area of areas) expect(Math.abs(area / mean - 1)).toBeLessThan(2e-3); // rounding to 0.01 px
  });
  it('use au where sizes are known, else say what the unit is', () => {
    expect(texts(svg('threeCompanions', 'orbits'))).toContain('away from the observer (au)');
    expect(texts(svg('highlyEccentric', 'orbit-b'))).toContain(
      'across the line of sight (semi-major axes of b)',
    );
  });
  it('mark no periastron of a circular orbit', () => {
    expect(texts(svg('hotCircular', 'orbit-b'))).not.toContain('periastron');
    expect(texts(svg('highlyEccentric', 'orbit-b'))).toContain('periastron');
  });
});
