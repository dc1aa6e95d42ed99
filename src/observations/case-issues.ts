/** Turns what the schema objects to into sentences with a place: file, line, column, key, what to try. */
import type * as z from 'zod';
import { describeValue, type IssueParams } from './case-values.js';
import type { YamlText } from './case-yaml.js';
import type { IssueList } from './issues.js';
import { didYouMean } from './suggest.js';
import { quoted } from './text.js';

/** `companions[0].eccentricity`. */
export function pathText(path: readonly PropertyKey[]): string {
  return path.reduce<string>(
    (text, key) =>
      typeof key === 'number' ? `${text}[${key}]` : `${text}${text === '' ? '' : '.'}${String(key)}`,
    '',
  );
}

export function addSchemaIssues(found: readonly z.core.$ZodIssue[], yaml: YamlText, issues: IssueList): void {
  for (const issue of found) {
    const value = valueAt(yaml.value, issue.path);
    if (issue.code === 'unrecognized_keys') {
      for (const key of issue.keys) {
        const path = [...issue.path, key];
        issues.add({
          code: 'unknown-key', ...yaml.placeOfKey(issue.path, key), field: pathText(path).slice(0, 120),
          message: `found the key ${quoted(key)}, which is not known here`, hint: didYouMean(key, issue.message.split(', ')),
        }); // prettier-ignore
      }
      continue;
    }
    const place = value === undefined ? yaml.placeOf(issue.path.slice(0, -1)) : yaml.placeOf(issue.path);
    const isMissing = value === undefined && issue.path.length > 0;
    issues.add({
      code: isMissing ? 'missing-key' : 'bad-value', ...place, field: pathText(issue.path) || null,
      message: isMissing ? `the key ${quoted(String(issue.path.at(-1)))} is missing` : sentence(issue, value),
      hint: issue.code === 'custom' ? ((issue.params as IssueParams | undefined)?.hint ?? '') : '',
    }); // prettier-ignore
  }
}

function sentence(issue: z.core.$ZodIssue, value: unknown): string {
  if (issue.code === 'custom') return issue.message;
  if (issue.code === 'invalid_type') {
    const words: Readonly<Record<string, string>> = {
      object: 'a mapping (key: value lines)',
      array: 'a list',
      record: 'a mapping (name: choices)',
      string: 'text',
    };
    return `found ${describeValue(value)}; ${words[issue.expected] ?? issue.expected} is expected`;
  }
  return `found ${describeValue(value)}; ${issue.message}`;
}

function valueAt(value: unknown, path: readonly PropertyKey[]): unknown {
  let at = value;
  for (const key of path) {
    if (typeof at !== 'object' || at === null || !Object.hasOwn(at, key)) return undefined;
    at = (at as Record<PropertyKey, unknown>)[key];
  }
  return at;
}
