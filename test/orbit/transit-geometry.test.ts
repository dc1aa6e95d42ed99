import { describe, expect, it } from 'vitest';
import {
  fullDurationDays,
  inclinationFromImpactParameterRad,
  occultationContacts,
  occultationImpactParameter,
  occultationPhase,
  RAD_PER_DEG,
  totalDurationDays,
  transitContacts,
  transitImpactParameter,
} from '../../src/orbit/index.js';
import { ModelDomainError } from '../../src/errors.js';
import durations from '../reference/transit/durations.json' with { type: 'json' };
import { expectWithin } from '../support/expect-within.js';

const CASES = durations.rows.map((row) => {
  const orbit = {
    scaledSemiMajorAxis: row.axis,
    eccentricity: row.eccentricity,
    argPeriastronStarRad: row.omegaDeg * RAD_PER_DEG,
    inclinationRad: row.inclinationDeg * RAD_PER_DEG,
    periodDays: row.periodDays,
    radiusRatio: row.radiusRatio,
    starRadiusLightDays: 0,
  };
  return [row.name, row, orbit] as const;
});

describe('tilt', () => {
  it.each(CASES)('%s: impact parameter and back', (_, row, orbit) => {
    const b = transitImpactParameter(orbit);
    expectWithin(b, row.b, { abs: 1e-14, unit: 'R_star', why: 'rounding of cos i' });
    expectWithin(inclinationFromImpactParameterRad(b, orbit), orbit.inclinationRad, {
      abs: 2e-15,
      unit: 'rad',
      why: 'rounding',
    });
    const lean = row.eccentricity * Math.sin(orbit.argPeriastronStarRad);
    expectWithin(occultationImpactParameter(orbit) * (1 - lean), b * (1 + lean), {
      abs: 1e-14,
      unit: 'R_star',
      why: 'both are cos i times the distance',
    });
  });

  it('refuses an impact parameter that no inclination gives', () => {
    const orbit = { scaledSemiMajorAxis: 5, eccentricity: 0.2, argPeriastronStarRad: 1 };
    expect(() => inclinationFromImpactParameterRad(5, orbit)).toThrow(ModelDomainError);
    expect(() => transitImpactParameter({ ...orbit, inclinationRad: 4 })).toThrow(/inclination/);
  });
});

describe('durations', () => {
  it.each(CASES)('%s: by formula', (_, row, orbit) => {
    expectWithin(totalDurationDays(orbit, row.periodDays, row.radiusRatio)!, row.totalByFormula, {
      rel: 1e-12,
      unit: 'd',
      why: 'the same formula evaluated elsewhere',
    });
    const full = fullDurationDays(orbit, row.periodDays, row.radiusRatio);
    if (row.fullByFormula === null) expect(full).toBeNull();
    else
      expectWithin(full!, row.fullByFormula, {
        rel: 1e-12,
        unit: 'd',
        why: 'the same formula evaluated elsewhere',
      });
  });

  it.each(CASES)('%s: exact contacts', (_, row, orbit) => {
    const contacts = transitContacts(orbit);
    const root = { abs: 1e-10, unit: 'd', why: 'tolerance of the root finder of the reference' };
    expectWithin(contacts.firstDays!, row.first, root);
    expectWithin(contacts.fourthDays!, row.fourth, root);
    expectWithin(contacts.fourthDays! - contacts.firstDays!, row.total, root);
    if (row.full === null) expect(contacts.secondDays).toBeNull();
    else expectWithin(contacts.thirdDays! - contacts.secondDays!, row.full, root);
    expectWithin(contacts.middleDays, row.middle, {
      abs: 1e-6,
      unit: 'd',
      why: 'the reference minimised z, which is flat to rounding within this',
    });
  });

  it('nothing is crossed when the orbit is tilted too much', () => {
    const orbit = { ...CASES[1]![2], inclinationRad: 80 * RAD_PER_DEG };
    expect(totalDurationDays(orbit, 10, 0.1)).toBeNull();
    const contacts = transitContacts(orbit);
    expect([contacts.firstDays, contacts.secondDays, contacts.thirdDays, contacts.fourthDays]).toEqual([
      null,
      null,
      null,
      null,
    ]);
    expectWithin(contacts.leastSeparation, 20 * Math.cos(80 * RAD_PER_DEG), {
      rel: 1e-12,
      unit: 'R_star',
      why: 'circular',
    });
    expect(() => transitContacts({ ...orbit, scaledSemiMajorAxis: 1.05 })).toThrow(/touch/);
    expect(() => transitContacts({ ...orbit, inclinationRad: 0 })).toThrow(ModelDomainError);
  });

  it('light time delays the occultation of a circular orbit by 2 a sin i / c and leaves the transit where it is', () => {
    const orbit = { ...CASES[1]![2], inclinationRad: 89.5 * RAD_PER_DEG };
    const light = 2.7e-5;
    const delay = 2 * 20 * light * Math.sin(orbit.inclinationRad);
    const [without, delayed] = [orbit, { ...orbit, starRadiusLightDays: light }];
    expectWithin(transitContacts(delayed).middleDays, 0, { abs: 1e-12, unit: 'd', why: 'by definition' });
    expectWithin(occultationContacts(delayed).middleDays, occultationContacts(without).middleDays + delay, {
      abs: 1e-12,
      unit: 'd',
      why: 'rounding',
    });
  });
});

describe('phase of the occultation', () => {
  it.each(CASES)('%s: exact', (_, row, orbit) => {
    const phase = occultationPhase(row.eccentricity, orbit.argPeriastronStarRad);
    expectWithin(phase, row.occultationPhase, {
      abs: 1e-12,
      unit: '1',
      why: "Kepler's equation, solved elsewhere",
    });
  });

  it.each([
    // e, omega (rad), phase by Kepler's equation in double precision
    [0.001, 0, 0.5006366196662643],
    [0.001, 1, 0.5003439672360129],
    [0.001, 2.5, 0.4994899760970576],
    [0.01, 0, 0.5063660916187889],
    [0.01, 1, 0.5034397763557973],
    [0.01, 2.5, 0.49489972456022113],
    [0.05, 0, 0.5318177207284167],
    [0.05, 1, 0.5172115011741028],
    [0.05, 2.5, 0.4744942124412157],
  ])('e = %f, omega = %f', (e, omega, phase) => {
    expectWithin(occultationPhase(e, omega), phase, {
      abs: 1e-12,
      unit: '1',
      why: 'rounding of the reference',
    });
    expectWithin(occultationPhase(e, omega + 2 * Math.PI), phase, {
      abs: 1e-12,
      unit: '1',
      why: 'whole turns of omega',
    });
    expectWithin(phase, 0.5 + (2 / Math.PI) * e * Math.cos(omega), {
      abs: 0.3 * e * e,
      unit: '1',
      why: 'first order',
    });
  });
});
