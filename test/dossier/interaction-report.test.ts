import { beforeAll, describe, expect, it } from 'vitest';
import { interactionCharts } from '../../src/dossier/charts/interaction-chart.js';
import { renderDrawings } from '../../src/dossier/charts/render-charts.js';
import { interactionBlocks, interactionTable } from '../../src/dossier/interaction-report.js';
import { fitInteraction } from '../../src/solving/timing/interaction-fit.js';
import type { InteractionFit, InteractionTable } from '../../src/solving/timing/interaction-types.js';
import { simulateInteraction } from '../solving/timing/simulate-interaction.js';

let tables: InteractionTable[];
let fit: InteractionFit;

beforeAll(() => {
  tables = simulateInteraction(
    [
      { massRatio: 3e-5, periodDays: 5, eCosOmega: 0.01, eSinOmega: 0 },
      { massRatio: 6e-5, periodDays: 10.25, eCosOmega: 0, eSinOmega: -0.02 },
    ],
    160,
    0.0003,
    21,
  );
  fit = fitInteraction(tables, { massSolar: 1 }, { draws: 0 });
});

describe('report of interacting orbits', () => {
  it('says what was found, what the masses rest on and what is assumed', () => {
    const text = interactionBlocks(fit, [{ path: 'interaction-b.png', caption: 'Caption. More.' }]).join(
      '\n\n',
    );
    expect(text).toMatch(/^## Interacting orbits of b, c/);
    expect(text).toContain('2:1 resonance');
    expect(text).toMatch(/\| mass \| .*M\\?_earth/);
    expect(text).toContain('What the masses rest on');
    expect(text).toContain('![Caption](interaction-b.png)');
    expect(text).toContain('one plane seen edge');
    expect(text).not.toMatch(/NaN|undefined|null|Infinity/);
  });

  it('says that straight lines would do, where they do', () => {
    expect(interactionBlocks({ ...fit, deltaBic: 1 }, []).join('\n')).toContain(
      'do not ask for companions that pull',
    );
  });

  it('lists every predicted transit in its table', () => {
    const lines = interactionTable(fit).trim().split(/\r?\n/);
    expect(lines).toHaveLength(1 + fit.predictions.reduce((sum, { cycles }) => sum + cycles.length, 0));
    expect(lines[1]!.split(',').slice(0, 2)).toEqual(['b', String(fit.predictions[0]!.cycles[0])]);
  });
});

describe('chart of interacting orbits', () => {
  it('has one drawing per companion, units on the axes, and the same bytes twice', async () => {
    const drawings = interactionCharts(fit, tables, 'Invented');
    expect(drawings.map(({ name }) => name)).toEqual(['interaction-b', 'interaction-c']);
    const scales = drawings[0]!.configure().options!.scales as Record<string, { title: { text: string } }>;
    expect(scales['y']!.title.text).toBe('O − C (min)');
    expect(scales['x']!.title.text).toMatch(/^BJD TDB − 24580\d\d \(d\)|^BJD TDB − 2457\d\d\d \(d\)/);
    const first = await renderDrawings(interactionCharts(fit, tables, 'Invented', 'BJD TDB'));
    const again = await renderDrawings(interactionCharts(fit, tables, 'Invented', 'BJD TDB'));
    expect(first.map(({ name }) => name).sort()).toEqual(
      ['interaction-b.png', 'interaction-b.svg', 'interaction-c.png', 'interaction-c.svg'].sort(),
    );
    first.forEach(({ bytes }, i) => {
      expect(Buffer.compare(bytes, again[i]!.bytes)).toBe(0);
    });
  });
});
