import { beforeAll, describe, expect, it } from 'vitest';
import { describeCharts, renderDrawings } from '../../../src/dossier/charts/index.js';
import type { ChartFile } from '../../../src/dossier/charts/index.js';
import type { Solved } from '../../../src/solving/types.js';
import {
  highlyEccentric,
  hotCircular,
  manyInstruments,
  noCompanion,
  threeCompanions,
} from '../../support/solved-cases.js';
import { withDraws } from '../../support/draws-fixture.js';
import { parseXml } from '../../support/xml-check.js';
import type { XmlElement } from '../../support/xml-check.js';

const CASES = {
  hotCircular: () => withDraws(hotCircular(), { seed: 1 }),
  threeCompanions: () => withDraws(threeCompanions(), { seed: 2 }),
  strayChain: () => withDraws(highlyEccentric(), { seed: 3, strayChain: 2 }),
  manyInstruments: () => withDraws(manyInstruments(), { seed: 4, drawsPerChain: 3000, memory: 0.8 }),
  noCompanion: () => withDraws(noCompanion(), { seed: 5 }),
  fewDraws: () => withDraws(highlyEccentric(), { seed: 6, chains: 2, drawsPerChain: 30 }),
} satisfies Record<string, () => Solved>;
type CaseName = keyof typeof CASES;
const NAMES = Object.keys(CASES) as CaseName[];
const OF_POSTERIOR = /^(pairs-|marginals$|chains$)/;
const rendered = {} as Record<CaseName, ChartFile[]>;

function posteriorFiles(solved: Solved): Promise<ChartFile[]> {
  return renderDrawings(describeCharts(solved).filter(({ name }) => OF_POSTERIOR.test(name)));
}

beforeAll(async () => {
  for (const name of NAMES) rendered[name] = await posteriorFiles(CASES[name]());
});

const decode = (file: ChartFile): string => new TextDecoder('utf-8', { fatal: true }).decode(file.bytes);
const svgFiles = (name: CaseName): ChartFile[] => rendered[name].filter((file) => file.name.endsWith('.svg'));
const svg = (name: CaseName, chart: string): XmlElement[] =>
  parseXml(decode(rendered[name].find((file) => file.name === `${chart}.svg`)!));
const texts = (elements: XmlElement[]): string[] =>
  elements.filter((element) => element.name === 'text').map((element) => element.text);

interface Frame {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

/** Frames of the panels: outlined rectangles without filling, larger than the samples of a key. */
function frames(elements: XmlElement[]): Frame[] {
  return elements
    .filter((one) => one.name === 'rect' && one.inherited['fill'] === 'none')
    .map(({ attributes: a }) => ({
      left: Number(a['x']),
      top: Number(a['y']),
      right: Number(a['x']) + Number(a['width']),
      bottom: Number(a['y']) + Number(a['height']),
    }))
    .filter((frame) => frame.right - frame.left > 40);
}

describe('the charts of a posterior', () => {
  it.each([
    ['hotCircular', ['marginals', 'pairs-b', 'chains']],
    ['threeCompanions', ['marginals', 'pairs-b', 'pairs-c', 'pairs-d', 'chains']],
    ['noCompanion', ['chains']],
    ['fewDraws', ['marginals', 'pairs-b', 'chains']],
  ] as const)('of %s', (name, wanted) => {
    expect(rendered[name].map((file) => file.name)).toEqual(
      wanted.flatMap((one) => [`${one}.png`, `${one}.svg`]),
    );
  });

  it('are absent without a posterior, and where there are hardly any draws', () => {
    for (const solved of [
      threeCompanions(),
      withDraws(threeCompanions(), { seed: 1, drawsPerChain: 0 }),
      withDraws(threeCompanions(), { seed: 1, drawsPerChain: 10 }),
    ]) {
      expect(describeCharts(solved).filter(({ name }) => OF_POSTERIOR.test(name))).toEqual([]);
    }
  });

  it('are the same to the byte a second time', async () => {
    const again = await posteriorFiles(CASES.threeCompanions());
    again.forEach((file, index) => {
      expect(Buffer.compare(file.bytes, rendered.threeCompanions[index]!.bytes), file.name).toBe(0);
    });
  });

  it('do not change the draws', async () => {
    const solved = CASES.strayChain();
    await posteriorFiles(solved);
    expect(solved.posterior).toEqual(CASES.strayChain().posterior);
  });
});

describe.each(NAMES)('every chart of the posterior of %s', (name) => {
  it('is well-formed SVG below 400 kB with finite numbers, and a PNG two columns wide', () => {
    for (const file of svgFiles(name)) {
      const document = decode(file);
      expect(parseXml(document)[0]!.name).toBe('svg');
      expect(document, file.name).not.toMatch(/NaN|Infinity|undefined|null/);
      expect(file.bytes.length, file.name).toBeLessThan(400_000);
    }
    for (const file of rendered[name].filter((one) => one.name.endsWith('.png'))) {
      const view = new DataView(file.bytes.buffer, file.bytes.byteOffset);
      expect(view.getUint32(16)).toBe(Math.round((180 / 25.4) * 300));
    }
  });

  it('keeps its texts on the sheet and its panels apart', () => {
    for (const file of svgFiles(name)) {
      const elements = parseXml(decode(file));
      const [, , width, height] = elements[0]!.attributes['viewBox']!.split(' ').map(Number);
      for (const { attributes, name: tag } of elements) {
        if (tag !== 'text' || attributes['x'] === undefined) continue;
        expect(Number(attributes['x'])).toBeGreaterThanOrEqual(0);
        expect(Number(attributes['x'])).toBeLessThan(width!);
        expect(Number(attributes['y'])).toBeGreaterThan(0);
        expect(Number(attributes['y'])).toBeLessThan(height!);
      }
      const panels = frames(elements);
      expect(panels.length).toBeGreaterThan(0);
      panels.forEach((one, index) => {
        expect(one.right).toBeLessThan(width!);
        expect(one.bottom).toBeLessThan(height!);
        for (const other of panels.slice(index + 1)) {
          const apart =
            one.right < other.left ||
            other.right < one.left ||
            one.bottom < other.top ||
            other.bottom < one.top;
          expect(apart, file.name).toBe(true);
        }
      });
    }
  });

  it('draws no dot beyond its axes', () => {
    for (const file of svgFiles(name).filter((one) => one.name.startsWith('pairs-'))) {
      const elements = parseXml(decode(file));
      const panels = frames(elements);
      const dots = elements.filter((one) => one.name === 'circle');
      expect(dots.length).toBeGreaterThan(5);
      for (const { attributes } of dots) {
        const [x, y] = [Number(attributes['cx']), Number(attributes['cy'])];
        const holders = panels.filter(
          (one) => x >= one.left && x <= one.right && y >= one.top && y <= one.bottom,
        );
        expect(holders).toHaveLength(1);
      }
    }
  });

  it('lets no two labels below a panel touch', () => {
    for (const file of svgFiles(name)) {
      const labels = parseXml(decode(file))
        .filter((one) => one.name === 'text' && one.inherited['text-anchor'] === 'middle')
        .map((one) => ({ x: Number(one.attributes['x']), y: Number(one.attributes['y']), text: one.text }));
      labels.forEach((one, index) => {
        for (const other of labels.slice(index + 1)) {
          if (Math.abs(one.y - other.y) > 4) continue;
          // Digits of the font are 0.636 of the size of type wide, 8.2 px.
          const halves = ((one.text.length + other.text.length) / 2) * 0.5 * 8.2;
          expect(Math.abs(one.x - other.x), `${one.text} and ${other.text}`).toBeGreaterThan(halves);
        }
      });
    }
  });
});

describe('pairs', () => {
  it('have a triangle of panels: six quantities of an eccentric orbit, four of a circular one', () => {
    expect(frames(svg('threeCompanions', 'pairs-b'))).toHaveLength(21);
    expect(frames(svg('hotCircular', 'pairs-b'))).toHaveLength(10);
    expect(frames(svg('strayChain', 'pairs-b'))).toHaveLength(15); // mass of the star not known
  });
  it('write symbols, units, and epochs less what their labels share', () => {
    const found = texts(svg('threeCompanions', 'pairs-b'));
    expect(found).toEqual(
      expect.arrayContaining(['P', 'K', 'e', 'ω', 'T', 'peri', 'sin ', 'Jup', '(m/s)', '(°)']),
    );
    expect(found).toContain('\u2212 2459823.1 (d)');
    expect(texts(svg('hotCircular', 'pairs-b'))).toContain('conj');
  });
  it('list medians and the central interval that the draws have', () => {
    const solved = CASES.threeCompanions();
    const sorted = Float64Array.from(
      solved.posterior!.columns.find(({ key }) => key === 'companions.c.elements.semiAmplitude')!.values,
    ).sort();
    // Order statistics of 4000 draws: the middle, and 15.87 % from either end.
    const [low, middle, high] = [635, 2000, 3365].map((rank) => sorted[rank]!) as [number, number, number];
    const found = texts(svg('threeCompanions', 'pairs-c'));
    expect(found).toContain(middle.toFixed(2));
    expect(found).toContain(`+${(high - middle).toFixed(2)}`);
    expect(found).toContain(`\u2212${(middle - low).toFixed(2)}`);
  });
  it('say in the caption what contours, lines and epochs are', () => {
    const { caption } = rendered.threeCompanions.find((file) => file.name === 'pairs-b.png')!;
    expect(caption).toMatch(/39\.3 % and 86\.5 %/);
    expect(caption).toMatch(/68\.3 %/);
    expect(caption).toMatch(/BJD TDB/);
  });
});

describe('marginals', () => {
  it('have a row per companion; a circular orbit has no density of e', () => {
    expect(frames(svg('threeCompanions', 'marginals'))).toHaveLength(9);
    expect(frames(svg('hotCircular', 'marginals'))).toHaveLength(2);
    expect(texts(svg('hotCircular', 'marginals'))).toContain('circular orbit: e = 0');
  });
  it('show K where the mass is not known', () => {
    const found = texts(svg('strayChain', 'marginals'));
    expect(found).toContain('K');
    expect(found).not.toContain('Jup');
  });
});

describe('chains', () => {
  it('have a trace and ranks for every fitted quantity, none for those that follow', () => {
    const fitted = CASES.threeCompanions().posterior!.columns.filter(({ key }) => !key.includes('.derived.'));
    expect(frames(svg('threeCompanions', 'chains'))).toHaveLength(2 * fitted.length);
  });
  it('name instruments as the text they are', () => {
    const found = texts(svg('manyInstruments', 'chains'));
    expect(found).toContain('jitter West & <East> (m/s)');
    expect(found).toContain('zero point Fell hut (m/s)');
    expect(found.join(' ')).toContain('Vellamo <b>&amp;"');
  });
});
