/** The committed values of Kepler's equation (test/reference/kepler, mpmath with 80 digits). */
import { readFileSync } from 'node:fs';

export interface KeplerRow {
  readonly eccentricity: number;
  readonly meanAnomalyRad: number;
  readonly eccentricAnomalyRad: number;
  readonly sinE: number;
  readonly cosE: number;
  readonly trueAnomalyRad: number;
}

export const KEPLER_FILES = ['low-e', 'high-e', 'near-parabolic', 'many-revolutions'] as const;

export function keplerRows(file: (typeof KEPLER_FILES)[number]): KeplerRow[] {
  const path = new URL(`../reference/kepler/${file}.json`, import.meta.url);
  const { rows } = JSON.parse(readFileSync(path, 'utf8')) as { rows: number[][] };
  return rows.map((row) => ({
    eccentricity: row[0]!,
    meanAnomalyRad: row[1]!,
    eccentricAnomalyRad: row[2]!,
    sinE: row[3]!,
    cosE: row[4]!,
    trueAnomalyRad: row[5]!,
  }));
}
