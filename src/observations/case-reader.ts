/** From a case file to a `Case`; and the same from bare tables and options. */
import { dirname } from 'node:path';
import { InputDataError, UsageError } from '../errors.js';
import { addSchemaIssues } from './case-issues.js';
import { mockPlan } from './case-mock.js';
import {
  caseSchema,
  DEFAULT_MOST_COMPANIONS,
  isZero,
  type CaseEntry,
  type CompanionEntry,
} from './case-schema.js';
import { rememberPlaces } from './case-places.js';
import { toRequest } from './case-table.js';
import { readYaml, type YamlText } from './case-yaml.js';
import { IssueList } from './issues.js';
import { parseMeasured } from './quantity.js';
import { readTextFile } from './read-text.js';
import { requestFor } from './table-reader.js';
import { fileStem, quoted, withoutControls } from './text.js';
import type {
  BandChoice,
  Case,
  CompanionChoice,
  ElementChoice,
  ElementName,
  InstrumentChoice,
  Measured,
  TransitChoice,
} from './types.js';
import type { QuantityKind } from './units.js';

/** Larger case files are refused unread. */
export const LARGEST_CASE_BYTES = 1e6;

/**
 * Reads a case file; table paths in it are taken from its own folder.
 *
 * @throws InputDataError with all problems, each with line, column and key
 */
export async function readCase(path: string): Promise<Case> {
  const { text, sha256 } = await readTextFile(path, LARGEST_CASE_BYTES);
  return { ...parseCase(text, path), sha256 };
}

/** What `readCase` does once the file is read. @throws InputDataError with all problems of the text */
export function parseCase(text: string, path: string): Case {
  const issues = new IssueList(path);
  if (text.length > LARGEST_CASE_BYTES)
    issues.add({ code: 'too-large', message: `a case has at most ${LARGEST_CASE_BYTES} characters` });
  if (text.includes('\0'))
    issues.add({
      code: 'binary-file',
      message: 'this is a binary file (it contains NUL characters), not a case',
    });
  const yaml = issues.count > 0 ? null : readYaml(text.replace(/^\ufeff/, ''), issues);
  if (yaml === null) throw new InputDataError(issues.list());
  if (yaml.value === null || yaml.value === undefined)
    issues.add({
      code: 'empty-file',
      message: 'the case is empty',
      hint: 'it needs at least: target and tables',
    });
  else {
    const result = caseSchema.safeParse(yaml.value);
    if (result.success) return toCase(result.data, path, yaml);
    addSchemaIssues(result.error.issues, yaml, issues);
  }
  throw new InputDataError(issues.list());
}

function toCase(entry: CaseEntry, path: string, yaml: YamlText): Case {
  const circular = entry.circular ?? 'auto';
  const companions = entry.companions ?? 'auto';
  return {
    path,
    target: withoutControls(entry.target),
    star: {
      massSolar: entry.star?.mass ?? null,
      radiusSolar: entry.star?.radius ?? null,
      effectiveTemperatureK: entry.star?.temperature ?? null,
      ...(entry.star?.density === undefined ? {} : { densityGcc: entry.star.density }),
    },
    tables: (entry.tables ?? []).map((table) => toRequest(table, dirname(path))),
    companions: Array.isArray(companions) ? toCompanions(companions, circular) : companions,
    maximumCompanions: entry.search?.['at-most'] ?? DEFAULT_MOST_COMPANIONS,
    drift: entry.drift ?? 'auto',
    circular,
    instruments: toInstruments(entry.instruments ?? {}, yaml),
    ...(entry.bands === undefined ? {} : { bands: toBands(entry.bands, yaml) }),
    periodRangeDays: {
      low: entry.search?.['shortest-period'] ?? null,
      high: entry.search?.['longest-period'] ?? null,
    },
    mock: entry.mock === undefined ? null : mockPlan(entry.mock, entry.star),
  };
}

/** Letters that are not given go to the companions in order, from b on. */
function toCompanions(list: readonly CompanionEntry[], circular: boolean | 'auto'): CompanionChoice[] {
  const given = new Set(list.map((entry) => entry.letter));
  const free = 'bcdefghijklmnopqrstuvwxyz'.split('').filter((letter) => !given.has(letter));
  return list.map((entry) => {
    const elements: Partial<Record<ElementName, ElementChoice>> = {};
    const set = (name: ElementName, choice: ElementChoice | undefined): void => {
      if (choice !== undefined) elements[name] = choice;
    };
    set('period', entry.period);
    set('eccentricity', entry.eccentricity);
    set('argumentOfPeriastron', entry['argument-of-periastron']);
    set('timeOfPeriastron', entry['time-of-periastron']);
    set('timeOfInferiorConjunction', entry['time-of-inferior-conjunction']);
    set('semiAmplitude', entry['semi-amplitude']);
    // An eccentricity that is stated decides the question of circular or not, whatever holds for the others.
    const stated = entry.eccentricity === undefined ? circular : isZero(entry.eccentricity);
    return {
      letter: entry.letter ?? free.shift()!,
      circular: entry.circular ?? stated,
      elements,
      inclinationDeg: entry.inclination ?? null,
      ...transitOf(entry),
    };
  });
}

function transitOf(entry: CompanionEntry): { readonly transit?: TransitChoice } {
  const { 'radius-ratio': radiusRatio, 'impact-parameter': impactParameter, occultation } = entry;
  if (radiusRatio === undefined && impactParameter === undefined && occultation === undefined) return {};
  return {
    transit: {
      ...(radiusRatio === undefined ? {} : { radiusRatio }),
      ...(impactParameter === undefined ? {} : { impactParameter }),
      ...(occultation === undefined ? {} : { occultation }),
    },
  };
}

/** Without a prototype, so that an instrument called `constructor` finds nothing that was not written. */
function toInstruments(
  entries: NonNullable<CaseEntry['instruments']>,
  yaml: YamlText,
): Readonly<Record<string, InstrumentChoice>> {
  const choices = Object.create(null) as Record<string, InstrumentChoice>;
  for (const [name, entry] of Object.entries(entries)) {
    const zeroPoint = entry['zero-point'] ?? null;
    // The schema refuses a range here.
    choices[name] = {
      zeroPointMps: zeroPoint?.kind === 'range' ? null : zeroPoint,
      jitterMps: entry.jitter ?? null,
    };
  }
  rememberPlaces(choices, 'instruments', yaml);
  return choices;
}

function toBands(
  entries: NonNullable<CaseEntry['bands']>,
  yaml: YamlText,
): Readonly<Record<string, BandChoice>> {
  const choices = Object.create(null) as Record<string, BandChoice>;
  for (const [name, { u1, u2 }] of Object.entries(entries))
    choices[name] = { u1: u1 ?? null, u2: u2 ?? null };
  rememberPlaces(choices, 'bands', yaml);
  return choices;
}

/** Options of the command line, as text; what is absent keeps its default. */
export interface BareCaseOptions {
  readonly starMass?: string | undefined;
  readonly starRadius?: string | undefined;
  readonly starTemperature?: string | undefined;
  readonly target?: string | undefined;
}

/**
 * A case for tables without a case file: everything is left to the data. The target is called after the first table unless named.
 *
 * @throws UsageError when an option is no quantity of its kind
 */
export function caseFromTables(paths: readonly string[], options: BareCaseOptions = {}): Case {
  return {
    path: null,
    target: options.target ?? fileStem(paths[0] ?? ''),
    star: {
      massSolar: positive(options.starMass, 'star mass'),
      radiusSolar: positive(options.starRadius, 'star radius'),
      effectiveTemperatureK: positive(options.starTemperature, 'temperature'),
    },
    tables: paths.map(requestFor),
    companions: 'auto',
    maximumCompanions: DEFAULT_MOST_COMPANIONS,
    drift: 'auto',
    circular: 'auto',
    instruments: Object.create(null) as Record<string, InstrumentChoice>,
    periodRangeDays: { low: null, high: null },
    mock: null,
  };
}

function positive(written: string | undefined, kind: QuantityKind): Measured | null {
  if (written === undefined) return null;
  const measured = parseMeasured(written, kind);
  if (measured.value > 0) return measured;
  throw new UsageError(`found ${quoted(written)}; a ${kind} must be > 0`);
}
