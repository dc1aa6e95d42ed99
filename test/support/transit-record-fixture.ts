/** What light curves add to an invented solution: mid-times, quantities of a companion, columns of the posterior. */
import type { FittedMidTimes, TransitEventRecord } from '../../src/solving/transit-types.js';
import type { CompanionRecord, PosteriorColumn, Quantity, Solved } from '../../src/solving/types.js';
import { randomSource } from './solved-fixture.js';
import { quantity, unknown } from './solved-record-fixture.js';
import { durationDays, HOURS, type Transiting } from './transiting-companions.js';

/** Old mid-times from tables, one in three an occultation, and those of the light curves. */
export function midTimesOf(
  one: Transiting,
  events: readonly TransitEventRecord[],
  source: string,
  random: { gauss(): number },
): FittedMidTimes {
  const old = Array.from({ length: 14 }, (_, i) => ({ cycle: -620 + 41 * i, source: i % 2 === 0 ? source : 'Moor survey', occultation: i % 5 === 3, sigmaMinutes: 0.5 + 0.3 * (i % 3) })); // prettier-ignore
  const own = events.filter(({ letter }) => letter === one.letter).map((event) => ({ cycle: event.cycle, source: event.table, occultation: false, sigmaMinutes: 0.4 })); // prettier-ignore
  const rows = [...old, ...own].sort((a, b) => a.cycle - b.cycle);
  const oMinusC = Float64Array.from(rows, (row) => row.sigmaMinutes * random.gauss());
  return {
    letter: one.letter,
    sources: rows.map((row) => row.source),
    cycles: Int32Array.from(rows, (row) => row.cycle),
    timesBjdTdb: Float64Array.from(rows, (row, i) => one.midTimeBjdTdb + (row.cycle + (row.occultation ? 0.5 : 0)) * one.periodDays + oMinusC[i]! / 1440), // prettier-ignore
    sigmasDays: Float64Array.from(rows, (row) => row.sigmaMinutes / 1440),
    oMinusCMinutes: oMinusC,
    ephemerisSigmaMinutes: Float64Array.from(rows, (row) => Math.hypot(0.12, 0.0006 * (row.cycle + 150))),
    isOccultation: Uint8Array.from(rows, (row) => (row.occultation ? 1 : 0)),
  };
}

export function transitQuantities(
  companion: CompanionRecord,
  one: Transiting,
  hasVelocities: boolean,
): CompanionRecord {
  const none = 'there are no velocities';
  const inclination = (Math.acos(one.impact / one.scaledAxis) * 180) / Math.PI;
  const hours = HOURS * durationDays(one);
  const velocityOnly = (value: number, sigma: number, unit: string): Quantity =>
    hasVelocities ? quantity(value, sigma, unit) : unknown(unit, none);
  return {
    ...companion,
    elements: {
      ...companion.elements,
      semiAmplitude: velocityOnly(one.semiAmplitudeMps, 0.9, 'm/s'),
      timeOfInferiorConjunction: quantity(one.midTimeBjdTdb, 0.00012, 'd'),
      period: quantity(one.periodDays, 0.0000031, 'd'),
      inclination: quantity(inclination, 0.31, 'deg'),
      radiusRatio: quantity(one.ratio, 0.0006, ''),
      scaledSemiMajorAxis: quantity(one.scaledAxis, 0.14, ''),
      impactParameter: quantity(one.impact, 0.05, ''),
    },
    derived: {
      ...companion.derived,
      semiMajorAxis: quantity(0.0451, 0.0007, 'au'),
      minimumMass: velocityOnly(0.512, 0.013, 'M_jup'),
      mass: velocityOnly(0.5127, 0.013, 'M_jup'),
      massFunction: velocityOnly(1.2e-10, 0.1e-10, 'M_sun'),
      transitProbability: quantity(0.11, 0.002, ''),
      radius: quantity(9.9 * one.ratio, 0.017, 'R_jup'),
      meanDensity: velocityOnly(0.72, 0.04, 'g/cm3'),
      surfaceGravity: velocityOnly(14.9, 0.6, 'm/s2'),
      totalDuration: quantity(hours, 0.012, 'h'),
      fullDuration: quantity(0.78 * hours, 0.02, 'h'),
      midTransitDepth: quantity(1.14e6 * one.ratio ** 2, 55, 'ppm'),
      timeOfOccultation: quantity(one.midTimeBjdTdb + one.periodDays / 2 + 0.0005, 0.0002, 'd'),
      scaleHeight: velocityOnly(510, 30, 'km'),
      rossiterMcLaughlin: quantity(8.1, 0.2, 'm/s'),
    },
  };
}

/** Columns of the posterior that only light curves give: radius ratio, impact parameter and a/R bend around one another. */
export function transitColumns(solved: Solved, seed: number): PosteriorColumn[] {
  const random = randomSource(seed);
  const total = solved.posterior!.chains * solved.posterior!.drawsPerChain;
  const columns: PosteriorColumn[] = [];
  const add = (key: string, make: (index: number) => number, unit = ''): Float64Array => {
    const values = Float64Array.from({ length: total }, (_, index) => make(index));
    columns.push({ key, unit, values, cycle: 0 });
    return values;
  };
  for (const one of solved.record.companions) {
    const { radiusRatio, scaledSemiMajorAxis, impactParameter } = one.elements;
    if (radiusRatio === undefined) continue;
    const start = `companions.${one.letter}.elements.`;
    const b = add(`${start}impactParameter`, () => Math.abs(impactParameter!.value! + 0.08 * random.gauss()));
    add(`${start}radiusRatio`, (i) => radiusRatio.value! * (1 + 0.02 * b[i]! ** 2) + 0.0004 * random.gauss());
    add(`${start}scaledSemiMajorAxis`, (i) => scaledSemiMajorAxis!.value! * (1 - 0.2 * (b[i]! ** 2 - impactParameter!.value! ** 2)) + 0.05 * random.gauss()); // prettier-ignore
    add(`companions.${one.letter}.derived.radius`, () => one.derived.radius!.value! + 0.017 * random.gauss(), 'R_jup'); // prettier-ignore
  }
  for (const { name, u1, u2 } of solved.record.photometry!.bands) {
    const first = add(`photometry.bands.${name}.u1`, () => u1.value! + 0.05 * random.gauss());
    add(`photometry.bands.${name}.u2`, (i) => u2.value! - 0.8 * (first[i]! - u1.value!) + 0.03 * random.gauss()); // prettier-ignore
  }
  for (const { name } of solved.record.photometry!.lightCurves)
    add(`photometry.lightCurves.${name}.jitter`, () => Math.abs(60 * random.gauss()), 'ppm');
  return columns;
}
