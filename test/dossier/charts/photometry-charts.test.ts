import { beforeAll, describe, expect, it } from 'vitest';
import { describeCharts, renderCharts, renderDipsCharts } from '../../../src/dossier/charts/index.js';
import type { ChartFile } from '../../../src/dossier/charts/index.js';
import type { Solved } from '../../../src/solving/types.js';
import { makePhotometrySolved } from '../../support/photometry-fixture.js';
import { parseXml } from '../../support/xml-check.js';
import type { XmlElement } from '../../support/xml-check.js';

const HOSTILE = ['=cmd <x>&"|*', 'a_b|c\u0007', '<script>', '@x\u202e'] as const;
const CASES = {
  together: (): Solved => makePhotometrySolved({ companions: 2, draws: true, cadenceMinutes: 6 }),
  lightOnly: (): Solved => makePhotometrySolved({ velocities: false, surveyOnly: true, cadenceMinutes: 10 }),
  crowded: (): Solved =>
    makePhotometrySolved({ companions: 2, velocities: false, surveyOnly: true, spanDays: 240, gapDays: 300 }),
  hostile: (): Solved =>
    makePhotometrySolved({
      target: 'V <b>&',
      names: HOSTILE,
      bands: ['<r>|', 'g*', 'i'],
      cadenceMinutes: 10,
    }),
};
type CaseName = keyof typeof CASES;
const solutions = {} as Record<CaseName, Solved>;
const rendered = {} as Record<CaseName, ChartFile[]>;
const NAMES = Object.keys(CASES) as CaseName[];

beforeAll(async () => {
  for (const name of NAMES) {
    solutions[name] = CASES[name]();
    rendered[name] = await renderCharts(solutions[name]);
  }
}, 120_000);

const decode = (file: ChartFile): string => new TextDecoder('utf-8', { fatal: true }).decode(file.bytes);
const find = (name: CaseName, chart: string): ChartFile =>
  rendered[name].find((file) => file.name === chart)!;
const svg = (name: CaseName, chart: string): XmlElement[] => parseXml(decode(find(name, `${chart}.svg`)));
const texts = (elements: XmlElement[]): string[] =>
  elements.filter((element) => element.name === 'text').map((element) => element.text);
const pngs = (name: CaseName): string[] =>
  rendered[name].filter((file) => file.name.endsWith('.png')).map((file) => file.name.slice(0, -4));

describe('the set of charts', () => {
  it('of velocities and light curves together', () => {
    expect(pngs('together')).toEqual([
      'velocities', 'light-curve', 'transit-b', 'transit-c', 'transits-b', 'transits-c', 'odd-even-b', 'odd-even-c',
      'mid-times-b', 'mid-times-c', 'dips-1', 'dips-2', 'dips-3', 'folded-b', 'folded-c', 'periodogram-1', 'periodogram-2',
      'periodogram-3', 'orbit-b', 'orbit-c', 'orbits', 'marginals', 'pairs-b', 'shape-b', 'pairs-c', 'shape-c', 'chains',
    ]); // prettier-ignore
  });
  it('of a light curve alone has nothing of velocities', () => {
    expect(pngs('lightOnly')).toEqual([
      'light-curve', 'transit-b', 'transits-b', 'odd-even-b', 'mid-times-b', 'dips-1', 'dips-2', 'orbit-b',
    ]); // prettier-ignore
    for (const name of pngs('lightOnly'))
      expect(texts(svg('lightOnly', name)).join(' '), name).not.toContain('m/s');
  });
  it('of mid-times alone is their chart and the orbit', () => {
    const solved = CASES.lightOnly();
    const photometry = {
      ...solved.photometry!,
      fitted: [],
      whole: [],
      curves: [],
      spectra: [],
      vettings: [],
    };
    expect(describeCharts({ ...solved, photometry }).map(({ name }) => name)).toEqual([
      'mid-times-b',
      'orbit-b',
    ]);
  });
  it('comes without a solution for a search alone', async () => {
    const files = await renderDipsCharts(solutions.lightOnly.photometry!.spectra, 'Vellamo');
    expect(files.map(({ name }) => name)).toEqual(['dips-1.png', 'dips-1.svg', 'dips-2.png', 'dips-2.svg']);
  });
  it('is the same to the byte a second time', async () => {
    const again = await renderCharts(CASES.lightOnly());
    again.forEach((file, index) => {
      expect(Buffer.compare(file.bytes, rendered.lightOnly[index]!.bytes), file.name).toBe(0);
    });
  });
});

describe.each(NAMES)('every chart of %s', (name) => {
  it('is a PNG of 300 dpi with the size of its drawing', () => {
    for (const drawing of describeCharts(solutions[name])) {
      const { bytes } = find(name, `${drawing.name}.png`);
      const view = new DataView(bytes.buffer, bytes.byteOffset);
      expect(view.getUint32(16), drawing.name).toBe(Math.round((drawing.widthMm / 25.4) * 300));
      expect(Math.abs(view.getUint32(20) - (drawing.heightMm / 25.4) * 300)).toBeLessThan(4); // whole CSS px
      expect([88, 180]).toContain(drawing.widthMm);
    }
  });
  it('is a well-formed SVG in which every mark and every text lies on the sheet', () => {
    for (const file of rendered[name].filter((one) => one.name.endsWith('.svg'))) {
      const document = decode(file);
      const elements = parseXml(document);
      expect(document, file.name).not.toMatch(/NaN|Infinity|undefined|>null</);
      const [, , width, height] = elements[0]!.attributes['viewBox']!.split(' ').map(Number);
      for (const { name: tag, attributes } of elements) {
        const [x, y] = tag === 'circle' ? ['cx', 'cy'] : tag === 'text' ? ['x', 'y'] : [];
        if (x === undefined || y === undefined || attributes[x] === undefined) continue;
        expect(Number(attributes[x]), file.name).toBeGreaterThanOrEqual(0);
        expect(Number(attributes[x]), file.name).toBeLessThan(width!);
        expect(Number(attributes[y]), file.name).toBeGreaterThan(0);
        expect(Number(attributes[y]), file.name).toBeLessThan(height!);
      }
    }
  });
});

describe('axes carry quantity and unit', () => {
  it.each([
    ['light-curve', ['relative flux', 'flux over trend', 'BJD TDB \u2212 2459100 (d)']],
    ['transit-b', ['relative flux', 'residual (ppm)', 'time from mid-transit (h)']],
    ['transits-b', ['relative flux, shifted', 'time from mid-transit (h)']],
    ['odd-even-b', ['relative flux', 'time from mid-transit (h)']],
    ['mid-times-b', ['observed \u2212 computed (min)', 'cycle (occultations at half cycles)']],
    ['dips-1', ['detection efficiency (σ)', 'period (d)']],
  ] as const)('of %s', (chart, wanted) => {
    // Titles that are drawn in runs of one style come as one text.
    expect(texts(svg('together', chart))).toEqual(expect.arrayContaining([...wanted]));
  });
});

describe('the whole light curve', () => {
  it('marks every transit with points in the fit by the letter of its companion', () => {
    const found = texts(svg('lightOnly', 'light-curve'));
    const events = solutions.lightOnly.photometry!.fitted[0]!.segments.flatMap((segment) => segment.events);
    expect(found.filter((text) => text === 'b')).toHaveLength(events.length + 1); // and one in the key
  });
  it('stays small and cuts long gaps out with 170 000 points', () => {
    const file = find('crowded', 'light-curve.svg');
    expect(file.bytes.length).toBeLessThan(700_000);
    expect(file.caption).toContain('Long gaps are cut out');
    expect(file.caption).toContain('drawn as their density');
    // Too many transits for letters: those of the key alone are left.
    expect(texts(svg('crowded', 'light-curve')).filter((text) => text === 'b')).toHaveLength(1);
  });
  it('is left out for a table of a single transit', () => {
    expect(pngs('together').filter((name) => name.startsWith('light-curve'))).toEqual(['light-curve']);
  });
});

describe('single transits', () => {
  it('say their cycles, and that not all of them are shown', () => {
    const found = texts(svg('crowded', 'transits-b'));
    expect(found.filter((text) => text.startsWith('cycle '))).toHaveLength(36);
    expect(find('crowded', 'transits-b.png').caption).toMatch(/Of \d\d transits 36 are shown/);
  });
});

describe('mid-times', () => {
  it('name their sources, tell occultations apart and carry years', () => {
    const found = texts(svg('together', 'mid-times-b'));
    expect(found).toEqual(
      expect.arrayContaining(['old records', 'old records (occultation)', 'ephemeris, 1 σ', '2018']),
    );
  });
  it('gather sources beyond the seventh', () => {
    const solved = CASES.lightOnly();
    const [times] = solved.photometry!.midTimes;
    const sources = times!.sources.map((_, row) => `source ${row}`);
    const [drawing] = describeCharts({
      ...solved,
      photometry: { ...solved.photometry!, midTimes: [{ ...times!, sources }] },
    }).filter(({ name }) => name === 'mid-times-b');
    expect(drawing!.caption).toContain('Sources beyond the 7');
  });
});

it('peaks of the search are named with what they are', () => {
  expect(texts(svg('together', 'dips-1'))).toEqual(
    expect.arrayContaining(['3.3512 d', '1.6756 d, half period', '6.7024 d, double period']),
  );
});

it('hostile labels are drawn as the text they are', () => {
  expect(texts(svg('hostile', 'light-curve'))).toContain('V <b>&: =cmd <x>&"|*');
  expect(texts(svg('hostile', 'transit-b'))).toContain('<r>|');
  expect(texts(svg('hostile', 'transits-b')).filter((text) => text === '<script>')).toHaveLength(1);
});

it('a posterior shows what shapes the transits', () => {
  const found = texts(svg('together', 'shape-b'));
  expect(found.join(' ')).toContain('★');
  expect(texts(svg('together', 'chains')).join(' ')).toContain('jitter Moor survey');
});

describe('odd light curves', () => {
  const base = makePhotometrySolved({ velocities: false, surveyOnly: true, cadenceMinutes: 20 });
  const photometry = base.photometry!;
  const first = photometry.fitted[0]!;
  const draw = async (changes: Partial<typeof photometry>): Promise<ChartFile[]> =>
    renderCharts({ ...base, photometry: { ...photometry, ...changes } });
  const sound = (files: readonly ChartFile[]): void => {
    for (const file of files.filter(({ name }) => name.endsWith('.svg')))
      expect(decode(file), file.name).not.toMatch(/NaN|Infinity|undefined/);
  };

  it('without a dense model are drawn from the points', async () => {
    const files = await draw({ curves: [] });
    expect(files.map(({ name }) => name)).toContain('transit-b.png');
    sound(files);
  });
  it('without any scatter, and flat', async () => {
    const model = first.transit.map((value, row) => value * first.baseline[row]!);
    sound(await draw({ fitted: [{ ...first, flux: model }] }));
    const ones = first.flux.map(() => 1);
    sound(await draw({ fitted: [{ ...first, flux: ones, transit: ones, baseline: ones }], curves: [] }));
  });
  it('with values that are not known', async () => {
    const holed = (values: Float64Array): Float64Array =>
      values.map((value, row) => (row % 7 === 3 ? NaN : value));
    const whole = {
      ...photometry.whole[0]!,
      flux: holed(photometry.whole[0]!.flux),
      trend: holed(photometry.whole[0]!.trend),
    };
    sound(await draw({ whole: [whole], fitted: [{ ...first, flux: holed(first.flux) }] }));
  });
  it('with one transit only', async () => {
    const [segment] = first.segments;
    const files = await draw({ fitted: [{ ...first, segments: [segment!] }] });
    expect(files.map(({ name }) => name)).toContain('transit-b.png');
    expect(files.map(({ name }) => name)).not.toContain('transits-b.png');
    expect(files.map(({ name }) => name)).not.toContain('odd-even-b.png');
    sound(files);
  });
});
