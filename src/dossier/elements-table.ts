/** `elements.csv`: every number of the solution, one a row, at full precision. */
import type { Quantity, SolutionRecord } from '../solving/types.js';
import { csvLines, csvText } from './escape.js';
import { machineNumber } from './numbers.js';
import { DERIVED_ORDER, ELEMENT_ORDER } from './titles.js';

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

/**
 * Columns: name, value, sigma, lower, upper (central 68.3 %), unit, note (`fixed`, or why a value is missing).
 * Names follow the keys of `solution.json`: `companions.b.period`, `instruments.north.jitter`, `drift.slope`.
 */
export function elementsTable(record: SolutionRecord): string {
  const rows: string[][] = [['name', 'value', 'sigma', 'lower', 'upper', 'unit', 'note']];
  rows.push(row('star.mass', record.star.mass));
  rows.push(row('star.radius', record.star.radius));
  rows.push(row('star.effectiveTemperature', record.star.effectiveTemperature));
  for (const companion of record.companions) {
    const owner = `companions.${companion.letter}`;
    for (const key of ELEMENT_ORDER) rows.push(row(`${owner}.${key}`, companion.elements[key]));
    for (const key of DERIVED_ORDER) rows.push(row(`${owner}.${key}`, companion.derived[key]));
  }
  for (const neighbour of record.neighbours)
    rows.push(
      row(`neighbours.${neighbour.letters.join('-')}.mutualHillSpacing`, neighbour.mutualHillSpacing),
    );
  for (const instrument of record.velocity.instruments) {
    rows.push(row(`instruments.${instrument.name}.zeroPoint`, instrument.zeroPoint));
    rows.push(row(`instruments.${instrument.name}.jitter`, instrument.jitter));
  }
  rows.push(row('drift.slope', record.velocity.slope));
  rows.push(row('drift.curvature', record.velocity.curvature));
  return csvLines(rows);
}
