/** A transit whose period is unknown, as people receive it. */
import { describe, expect, it } from 'vitest';
import { orbitCharts } from '../../src/dossier/charts/orbit-chart.js';
import { report } from '../../src/dossier/report.js';
import { transitCharts } from '../../src/dossier/charts/transit-chart.js';
import type { Solved } from '../../src/solving/types.js';
import { makePhotometrySolved } from '../support/photometry-fixture.js';

function lone(): Solved {
  const solved = makePhotometrySolved({ velocities: false, surveyOnly: true, cadenceMinutes: 10 });
  const unknown = { value: null, sigma: null, lower: null, upper: null, why: 'one transit only' };
  const companions = solved.record.companions.map((one) => ({
    ...one,
    elements: {
      ...one.elements,
      period: { ...unknown, unit: 'd' },
      scaledSemiMajorAxis: { ...unknown, unit: '' },
      inclination: { ...unknown, unit: 'deg' },
    },
  }));
  return { ...solved, record: { ...solved.record, companions } };
}

describe('a transit whose period is unknown', () => {
  it('has no chart of its orbit, and says in the title of its transit that the period is unknown', () => {
    expect(orbitCharts(lone())).toEqual([]);
    const [chart] = transitCharts(lone());
    expect(chart!.caption).toContain('period unknown');
    expect(chart!.caption).not.toContain('?');
  });

  it('is described without a period, a semi-major axis or an inclination', () => {
    const text = report(lone(), { charts: [], files: [] });
    expect(text).toContain('Companion b has a period that is unknown (one transit only)');
    expect(text).toContain('without a period the semi-major axis and the inclination are not known');
    expect(text).not.toContain('goes round in');
  });
});
