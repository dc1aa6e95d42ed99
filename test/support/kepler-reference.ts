/** The committed values of Kepler's equation (test/reference/kepler, mpmath; each file names its digits and its generator). */
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

/** A row of the grid; `toleranceRad` is what doubles can be asked for there, in E. */
export interface KeplerGridRow extends KeplerRow {
  readonly toleranceRad: number;
}

/** A worked value of a textbook: computed with 50 digits, and as printed. */
export interface PrintedKeplerRow {
  readonly eccentricity: number;
  readonly meanAnomalyDeg: number;
  readonly eccentricAnomalyDeg: number;
  readonly printedDeg: number;
}

/** grid.json: mpmath with 50 digits, 13 eccentricities times 20 mean anomalies, and the values of Meeus (1998), ch. 30. */
export function keplerGrid(): { rows: KeplerGridRow[]; printed: PrintedKeplerRow[] } {
  const path = new URL('../reference/kepler/grid.json', import.meta.url);
  const file = JSON.parse(readFileSync(path, 'utf8')) as {
    rows: number[][];
    printed: [number, number, number, string][];
  };
  return {
    rows: file.rows.map((row) => ({
      eccentricity: row[0]!,
      meanAnomalyRad: row[1]!,
      eccentricAnomalyRad: row[2]!,
      trueAnomalyRad: row[3]!,
      sinE: row[4]!,
      cosE: row[5]!,
      toleranceRad: row[6]!,
    })),
    printed: file.printed.map(([eccentricity, meanAnomalyDeg, eccentricAnomalyDeg, printed]) => ({
      eccentricity,
      meanAnomalyDeg,
      eccentricAnomalyDeg,
      printedDeg: Number(printed),
    })),
  };
}
