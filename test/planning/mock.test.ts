import { describe, expect, test } from 'vitest';
import { ModelDomainError, UsageError } from '../../src/errors.js';
import type { MockInstrument } from '../../src/observations/types.js';
import { simulateObservations } from '../../src/planning/mock.js';
import { observableWindows } from '../../src/planning/observing-nights.js';
import { expectWithin } from '../support/expect-within.js';
import { NORTH, plan, rowsOf, TWO_SEASONS } from './velocity-plan.js';

describe('the nights', () => {
  test('every row lies in a window of the site, one per night, in order of time, and tells its airmass', () => {
    const truth = plan();
    const windows = observableWindows(truth, NORTH.from, NORTH.to).flatMap((night) => night.windows);
    const rows = rowsOf(simulateObservations(truth, 1)[0]!);
    expect(rows).toHaveLength(700);
    for (const { time, airmass } of rows) {
      const rounding = 1e-5;
      const inside = windows.filter((w) => time > w.startBjdTdb - rounding && time < w.endBjdTdb + rounding);
      expect(inside).toHaveLength(1);
      expect(airmass).toBeLessThanOrEqual(1.801);
      expect(airmass).toBeGreaterThan(0.999);
    }
    for (let row = 1; row < rows.length; row += 1)
      expect(rows[row]!.time - rows[row - 1]!.time).toBeGreaterThan(0.5);
  });

  test('visits crowd about culmination: half of them in the best third of what is reachable', () => {
    const windows = observableWindows(plan(), NORTH.from, NORTH.to).flatMap((night) => night.windows);
    const rows = rowsOf(simulateObservations(plan(), 1)[0]!);
    const distances = rows.map(({ time }) => {
      const window = windows.find((w) => time > w.startBjdTdb - 1e-5 && time < w.endBjdTdb + 1e-5)!;
      const reach = Math.max(window.bestBjdTdb - window.startBjdTdb, window.endBjdTdb - window.bestBjdTdb);
      return Math.abs(time - window.bestBjdTdb) / reach;
    });
    const near = distances.filter((distance) => distance < 1 / 3).length;
    expect(near).toBeGreaterThan(rows.length / 2);
    // yet spread over the night, or daily aliases could never be told apart
    expect(distances.filter((distance) => distance > 0.5).length).toBeGreaterThan(rows.length / 20);
  });

  test('weather is shared: two instruments that use every clear night use the same ones', () => {
    const dates = { from: 2457200.5, to: 2457400.5, count: 1 };
    const clearCount = (): number => {
      try {
        simulateObservations(plan({ weatherLoss: 0.5 }, { ...dates, count: 1000 }), 3);
      } catch (error) {
        return Number(/only (\d+) nights/.exec((error as Error).message)![1]);
      }
      throw new Error('1000 observations fit into 200 nights');
    };
    const count = clearCount();
    expect(count).toBeGreaterThan(40);
    const north = { ...NORTH, ...dates, count };
    const both = {
      ...plan({ weatherLoss: 0.5 }),
      instruments: [north, { ...north, name: 'south', table: 'south.csv' }],
    };
    const [a, b] = simulateObservations(both, 3).map((table) =>
      rowsOf(table).map(({ time }) => Math.floor(time)),
    );
    expect(a).toEqual(b);
  });
});

describe('reproducibility', () => {
  const south: MockInstrument = {
    ...NORTH,
    name: 'south',
    table: 'south.csv',
    unit: 'km/s',
    count: 30,
    errorMps: 2.8,
  };
  const both = plan({ instruments: [{ ...NORTH, ...TWO_SEASONS, count: 30 }, south] });

  test('the same seed gives the same bytes, another one other nights and velocities', () => {
    const once = simulateObservations(both, 4);
    expect(simulateObservations(both, 4)).toEqual(once);
    const other = simulateObservations(both, 5);
    expect(rowsOf(other[0]!)).not.toEqual(rowsOf(once[0]!));
    expect(rowsOf(other[1]!)).not.toEqual(rowsOf(once[1]!));
  });

  test('changing one instrument leaves the other as it was', () => {
    const changed = plan({ instruments: [{ ...NORTH, ...TWO_SEASONS, count: 45, jitterMps: 9 }, south] });
    expect(simulateObservations(changed, 4)[1]).toEqual(simulateObservations(both, 4)[1]);
  });

  test('the instruments have streams of their own', () => {
    const twins = plan({
      instruments: [
        { ...NORTH, ...TWO_SEASONS, count: 30 },
        { ...NORTH, ...TWO_SEASONS, count: 30, table: 'twin.csv' },
      ],
    });
    const [first, second] = simulateObservations(twins, 4).map(rowsOf);
    expect(first).not.toEqual(second);
  });

  test('km/s is a thousandth of m/s and nothing else', () => {
    const inMps = rowsOf(simulateObservations(plan({}, { ...TWO_SEASONS, count: 25 }), 8)[0]!);
    const inKmps = rowsOf(simulateObservations(plan({}, { ...TWO_SEASONS, count: 25, unit: 'km/s' }), 8)[0]!);
    inKmps.forEach((row, index) => {
      expect(row.time).toBe(inMps[index]!.time);
      expectWithin(1000 * row.velocity, inMps[index]!.velocity, {
        abs: 1e-9,
        unit: 'm/s',
        why: 'same decimals',
      });
      expectWithin(1000 * row.error, inMps[index]!.error, { abs: 1e-9, unit: 'm/s', why: 'same decimals' });
    });
  });
});

describe('the text', () => {
  test('says that it is simulated, from which case and seed, before anything else', () => {
    const [table] = simulateObservations(plan({}, { ...TWO_SEASONS, count: 3, unit: 'km/s' }), 12, 'Vellamo');
    expect(table!.fileName).toBe('north.csv');
    expect(table!.rows).toBe(3);
    const lines = table!.text.split('\n');
    expect(lines[0]).toMatch(/^# Simulated observations/);
    expect(lines[1]).toBe('# case Vellamo, instrument north, seed 12');
    expect(lines[3]).toBe('BJD_TDB,RV (km/s),RV error (km/s),airmass');
    expect(lines).toHaveLength(4 + 3 + 1);
    for (const line of lines.slice(4, 7))
      expect(line).toMatch(/^245\d{4}\.\d{5},-?\d+\.\d{5},0\.\d{5},1\.\d{3}$/);
  });

  test('labels cannot leave their comment line', () => {
    const [table] = simulateObservations(
      plan({}, { ...TWO_SEASONS, count: 2, name: 'a\n1,2,3\r\u2028x' }),
      1,
      'b\n4,5,6',
    );
    expect(table!.text.split(/[\n\r\u2028]/)[1]).toBe('# case b 4,5,6, instrument a 1,2,3 x, seed 1');
    expect(rowsOf(table!)).toHaveLength(2);
  });

  test('small errors get the decimals they need and never print as zero', () => {
    const rows = rowsOf(
      simulateObservations(plan({}, { errorMps: 0.003, errorScatter: 2, count: 500 }), 1)[0]!,
    );
    expect(Math.min(...rows.map(({ error }) => error))).toBeGreaterThan(0);
    expect(new Set(rows.map(({ error }) => error)).size).toBeGreaterThan(100);
  });
});

describe('what cannot be observed is refused', () => {
  test('more observations than usable nights', () => {
    const attempt = (): unknown => simulateObservations(plan({}, { count: 5000 }), 1);
    expect(attempt).toThrow(UsageError);
    expect(attempt).toThrow(/north: 5000 observations are asked for, but only \d+ nights are usable/);
  });

  test('a target that never rises, weather that never clears', () => {
    const south = { rightAscensionDeg: 0, declinationDeg: -85 };
    expect(() => simulateObservations(plan({ target: south }), 1)).toThrow(/only 0 nights/);
    expect(() => simulateObservations(plan({ weatherLoss: 1 }), 1)).toThrow(/only 0 nights/);
  });

  test.each(['../north.csv', 'a/b.csv', 'a\\b.csv', '', '..', 'a\nb.csv'])('the file name %j', (table) => {
    expect(() => simulateObservations(plan({}, { table }), 1)).toThrow(UsageError);
  });

  test('two instruments that write one file, and no instrument at all', () => {
    const instruments = [NORTH, { ...NORTH, name: 'south', table: 'North.csv' }];
    expect(() => simulateObservations(plan({ instruments }), 1)).toThrow(/already writes/);
    expect(() => simulateObservations(plan({ instruments: [] }), 1)).toThrow(UsageError);
  });

  test.each<Partial<MockInstrument>>([
    { count: 0 }, { count: 2.5 }, { count: NaN }, { errorMps: 0 }, { errorMps: -1 }, { errorMps: Infinity }, { errorScatter: -0.1 },
    { jitterMps: -1 }, { jitterMps: NaN }, { from: 2459000.5, to: 2458000.5 },
  ])('%o', (change) => {
    expect(() => simulateObservations(plan({}, change), 1)).toThrow(ModelDomainError);
  }); // prettier-ignore
});
