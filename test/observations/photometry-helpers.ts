/** Invented light curves and mid-times, and short ways to their readers. */
import { parseAnyTable, requestFor } from '../../src/observations/index.js';
import type { LightCurveTable, MidTimeTable, TableRequest } from '../../src/observations/index.js';
import type { InputIssue } from '../../src/errors.js';
import type { AnyTable } from '../../src/observations/index.js';
import { issuesOf } from './helpers.js';

export function readAny(text: string, declared: Partial<TableRequest> = {}, path = 'harbour.csv'): AnyTable {
  return parseAnyTable(text, path, { ...requestFor(path), ...declared });
}

export function readCurve(
  text: string,
  declared: Partial<TableRequest> = {},
  path = 'harbour.csv',
): LightCurveTable {
  const table = readAny(text, declared, path);
  if (table.content !== 'light curve') throw new Error(`read as ${table.content}`);
  return table;
}

export function readMidTimes(
  text: string,
  declared: Partial<TableRequest> = {},
  path = 'harbour.csv',
): MidTimeTable {
  const table = readAny(text, declared, path);
  if (table.content !== 'mid-times') throw new Error(`read as ${table.content}`);
  return table;
}

export function anyIssues(text: string, declared: Partial<TableRequest> = {}): readonly InputIssue[] {
  return issuesOf(() => readAny(text, declared));
}

export interface CurveChoices {
  readonly header?: string;
  readonly separator?: string;
  /** First time and step, days. */
  readonly start?: number;
  readonly step?: number;
  readonly rows?: number;
  /** Cells behind the time. */
  readonly cells?: (row: number) => readonly (number | string)[];
}

/** Small regular changes, so that a scatter exists without any chance. */
export function wiggle(row: number): number {
  return [0, 3, -2, 1, -3, 2][row % 6]! * 1e-4;
}

/** Text of a light curve; by default 60 rows, a minute apart, near 1. */
export function curveText(choices: CurveChoices = {}): string {
  const {
    header = 'BJD_TDB,flux,flux_err\n',
    separator = ',',
    start = 2459000.5,
    step = 1 / 1440,
    rows = 60,
  } = choices;
  const cells = choices.cells ?? ((row) => [(1 + wiggle(row)).toFixed(6), '0.000200']);
  const lines = Array.from({ length: rows }, (_, row) => [(start + row * step).toFixed(8), ...cells(row)].join(separator)); // prettier-ignore
  return `${header}${lines.join('\n')}\n`;
}
