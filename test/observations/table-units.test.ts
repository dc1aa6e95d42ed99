import { describe, expect, it } from 'vitest';
import { notice, read, tableIssues } from './helpers.js';
import { unitFactor, velocityUnitsIn } from '../../src/observations/units.js';
import { expectWithin } from '../support/expect-within.js';

const table = (header: string, comment = ''): string =>
  `${comment}${header}\n2459000.5 46.5 0.25\n2459001.5 46.75 0.5\n`;

describe('units of velocities', () => {
  it.each([
    'RV(km/s)',
    'RV[km/s]',
    'rv_kms',
    'rv_kmps',
    'RV_km/s',
    'RV[km_s-1]',
    'RV{km.s^-1}',
    'vrad(KM/S)',
  ])('%s is in km/s', (label) => {
    const read1 = read(table(`BJD_TDB ${label} err`));
    expect([...read1.velocitiesMps]).toEqual([46500, 46750]); // 1 km = 1000 m
    expect([...read1.sigmasMps]).toEqual([250, 500]);
    expect(notice(read1, 'unit-assumed')).toBeUndefined();
  });

  it.each(['RV(m/s)', 'rv_mps', 'rv_ms', 'RV[m.s-1]'])('%s is in m/s', (label) => {
    const read1 = read(table(`BJD_TDB ${label} err`));
    expect([...read1.velocitiesMps]).toEqual([46.5, 46.75]);
    expect(notice(read1, 'unit-assumed')).toBeUndefined();
  });

  it('converts velocity and error each from its own unit', () => {
    const read1 = read(table('BJD_TDB RV(km/s) e_RV(m/s)'));
    expect([...read1.velocitiesMps]).toEqual([46500, 46750]);
    expect([...read1.sigmasMps]).toEqual([0.25, 0.5]);
  });

  it('takes the unit from the column list in the comments', () => {
    const read1 = read(
      table(
        'BJD_TDB RV e_RV',
        '#\n# Col 1: BJD_TDB = date\n# Col 2: RV = radial velocity in km/s\n# Col 3: e_RV = its error in km/s\n',
      ),
    );
    expect([...read1.velocitiesMps]).toEqual([46500, 46750]);
    expect([...read1.sigmasMps]).toEqual([250, 500]);
  });

  it('takes the unit from a comment, says so, and does not fall for a number with a unit', () => {
    const read1 = read(table('BJD_TDB RV e_RV', '# 46 m/s were taken off\n# velocities are in km/s\n'));
    expect(read1.velocityUnit).toBe('km/s');
    expect(notice(read1, 'unit-from-comment')?.lines).toEqual([2]);
  });

  it('assumes m/s when nothing says, with a notice, and hints at km/s where the numbers look like it', () => {
    const low = read('BJD_TDB RV err\n2459000.5 46.5 0.002\n2459001.5 46.4 0.003\n');
    expect(low.velocityUnit).toBe('m/s');
    expect(notice(low, 'unit-assumed')).toBeDefined();
    expect(notice(low, 'unit-hint')).toBeDefined();
    const high = read('BJD_TDB RV err\n2459000.5 46.5 2\n2459001.5 46.4 3\n');
    expect(notice(high, 'unit-assumed')).toBeDefined();
    expect(notice(high, 'unit-hint')).toBeUndefined();
  });

  it('assumes m/s aloud when the comments contradict each other', () => {
    const read1 = read(table('BJD_TDB RV e_RV', '# in m/s\n# in km/s\n'));
    expect(notice(read1, 'unit-assumed')?.message).toContain('both');
  });

  it('follows a declaration and says that the table disagrees', () => {
    const read1 = read(table('BJD_TDB RV(m/s) e_RV(m/s)'), { velocityUnit: 'km/s' });
    expect([...read1.velocitiesMps]).toEqual([46500, 46750]);
    expect(notice(read1, 'unit-override')).toBeDefined();
  });

  it('refuses a unit that it does not read rather than assume another', () => {
    expect(tableIssues(table('BJD_TDB RV(cm/s) err')).map((issue) => issue.code)).toEqual(['unknown-unit']);
  });

  it('says when a velocity is faster than light', () => {
    expect(
      tableIssues('BJD_TDB,RV (km/s),err\n2459000.5,300000,1\n2459001.5,1,1\n').map(
        (issue) => `${issue.code} ${issue.line ?? ''}`,
      ),
    ).toEqual(['too-fast 2']);
  });
});

describe('units in sentences and quantities', () => {
  it('finds the units that a sentence names', () => {
    expect(velocityUnitsIn('radial velocity in km/s')).toEqual(['km/s']);
    expect(velocityUnitsIn('velocity (m s-1), error (m s^-1)')).toEqual(['m/s']);
    expect(velocityUnitsIn('kilometres per second')).toEqual(['km/s']);
    expect(velocityUnitsIn('exposures of 30 m, signal 12 m/s, comments')).toEqual([]);
  });

  it('knows factors of trade units', () => {
    expect(unitFactor('period', 'yr')).toBe(365.25); // Julian year, IAU style manual 1989
    expect(unitFactor('velocity', 'km s^-1')).toBe(1000);
    expectWithin(unitFactor('angle', 'rad')! * Math.PI, 180, {
      abs: 1e-12,
      unit: 'deg',
      why: 'pi rad = 180 deg',
    });
    expect(unitFactor('star mass', 'M_sun')).toBe(1);
    expect(unitFactor('star mass', 'km')).toBeNull();
    expect(unitFactor('velocity', 'constructor')).toBeNull();
  });
});
