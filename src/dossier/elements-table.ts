/** `elements.csv`: every number of the solution, one a row, at full precision. */
import type { PhotometryRecord } from '../solving/transit-types.js';
import type { Quantity, SolutionRecord } from '../solving/types.js';
import { csvLines, csvText } from './escape.js';
import { machineNumber } from './numbers.js';
import { titledDerived, titledElements } from './titles.js';

function row(name: string, quantity: Quantity): string[] {
  return [
    csvText(name),
    machineNumber(quantity.value),
    machineNumber(quantity.sigma),
    machineNumber(quantity.lower),
    machineNumber(quantity.upper),
    csvText(quantity.unit),
    csvText(quantity.fixed === true ? 'fixed' : (quantity.why ?? '')),
  ];
}

function photometryRows(photometry: PhotometryRecord): string[][] {
  return [
    row('photometry.starDensity', photometry.starDensity),
    row('photometry.starDensityGiven', photometry.starDensityGiven),
    ...photometry.bands.flatMap(({ name, u1, u2, occultationDepths }) => [
      row(`photometry.bands.${name}.u1`, u1),
      row(`photometry.bands.${name}.u2`, u2),
      ...Object.entries(occultationDepths ?? {}).map(([letter, depth]) =>
        row(`photometry.bands.${name}.occultationDepths.${letter}`, depth),
      ),
    ]),
    ...photometry.lightCurves.flatMap(({ name, jitter, dilution, correlatedNoise }) => [
      row(`photometry.lightCurves.${name}.jitter`, jitter),
      row(`photometry.lightCurves.${name}.dilution`, dilution),
      ...(correlatedNoise === null
        ? []
        : [
            row(`photometry.lightCurves.${name}.correlatedNoise.amplitude`, correlatedNoise.amplitude),
            row(`photometry.lightCurves.${name}.correlatedNoise.timescale`, correlatedNoise.timescale),
          ]),
    ]),
    ...photometry.events.flatMap(({ letter, table, cycle, midTime, oMinusC }) => [
      row(`photometry.events.${letter}.${table}.${cycle}.midTime`, midTime),
      row(`photometry.events.${letter}.${table}.${cycle}.oMinusC`, oMinusC),
    ]),
    ...photometry.midTimes.map(({ letter, path, jitter }) =>
      row(`photometry.midTimes.${letter}.${path}.jitter`, jitter),
    ),
  ];
}

/**
 * Columns: name, value, sigma, lower, upper (central 68.3 %), unit, note (`fixed`, or why a value is missing).
 * Names follow the keys of `solution.json`: `companions.b.period`, `instruments.north.jitter`, `drift.slope`;
 * an event of a light curve is `photometry.events.<letter>.<table>.<cycle>`. Without velocities there is no drift.
 */
export function elementsTable(record: SolutionRecord): string {
  const rows: string[][] = [['name', 'value', 'sigma', 'lower', 'upper', 'unit', 'note']];
  rows.push(row('star.mass', record.star.mass));
  rows.push(row('star.radius', record.star.radius));
  rows.push(row('star.effectiveTemperature', record.star.effectiveTemperature));
  for (const companion of record.companions) {
    const owner = `companions.${companion.letter}`;
    for (const { key, quantity } of [...titledElements(companion), ...titledDerived(companion)])
      rows.push(row(`${owner}.${key}`, quantity));
  }
  for (const neighbour of record.neighbours)
    rows.push(
      row(`neighbours.${neighbour.letters.join('-')}.mutualHillSpacing`, neighbour.mutualHillSpacing),
    );
  for (const instrument of record.velocity.instruments) {
    rows.push(row(`instruments.${instrument.name}.zeroPoint`, instrument.zeroPoint));
    rows.push(row(`instruments.${instrument.name}.jitter`, instrument.jitter));
  }
  if (record.velocity.instruments.length > 0 || record.photometry === undefined) {
    rows.push(row('drift.slope', record.velocity.slope));
    rows.push(row('drift.curvature', record.velocity.curvature));
  }
  if (record.photometry !== undefined) rows.push(...photometryRows(record.photometry));
  return csvLines(rows);
}
