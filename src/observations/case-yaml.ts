/** YAML text to a plain value, with the place of every key; what YAML itself refuses becomes issues. */
import {
  isMap,
  isNode,
  isPair,
  isScalar,
  isSeq,
  LineCounter,
  parseDocument,
  visit,
  type Alias,
  type Document,
} from 'yaml';
import type { IssueList } from './issues.js';

export interface Place {
  readonly line: number | null;
  readonly column: number | null;
}

export interface YamlText {
  readonly value: unknown;
  /** Place of the value at `path`, or of its nearest ancestor that exists. */
  placeOf(path: readonly PropertyKey[]): Place;
  /** Place of the key `key` itself in the mapping at `path`. */
  placeOfKey(path: readonly PropertyKey[], key: string): Place;
}

/** An alias may be used this often in all: enough for any honest case, too little for one that multiplies itself. */
const MOST_ALIASES = 50;
/** Deeper nesting than any case needs; it bounds the recursion of everything that follows. */
const DEEPEST = 40;

/** One slip in YAML brings many others: the first ones tell the cause. */
const MOST_YAML_ERRORS = 10;

const WORDS: Readonly<Record<string, string>> = {
  DUPLICATE_KEY: 'this key stands twice in the same mapping',
  TAB_AS_INDENT: 'a tab is used to indent; YAML wants blanks',
  BAD_INDENT: 'the indentation does not fit the lines around it',
  MISSING_CHAR: 'a character is missing (a closing bracket, quotation mark, or colon)',
  BLOCK_AS_IMPLICIT_KEY: 'a mapping cannot begin here; a value that contains ": " needs quotation marks',
  MULTILINE_IMPLICIT_KEY: 'a key must fit on one line: is a colon missing behind it?',
  MULTIPLE_DOCS: 'the file holds several YAML documents; one is expected',
};

/** @returns `null` when the text is no YAML that can be used; the issues say why */
export function readYaml(text: string, issues: IssueList): YamlText | null {
  const counter = new LineCounter();
  const at = (offset: number): Place => {
    const { line, col } = counter.linePos(offset);
    return line === 0 ? { line: null, column: null } : { line, column: col };
  };
  const deep = depthProblem(text);
  if (deep !== null) {
    issues.add({
      code: 'too-deep',
      message: `the file nests deeper than ${DEEPEST} levels`,
      line: deep,
      hint: 'is this a case?',
    });
    return null;
  }
  const document = parseDocument(text, {
    lineCounter: counter,
    prettyErrors: false,
    logLevel: 'silent',
    merge: false,
  });
  for (const error of document.errors.slice(0, MOST_YAML_ERRORS)) {
    issues.add({
      code: 'yaml',
      message: WORDS[error.code] ?? error.message,
      ...at(error.pos[0]),
      hint: error.code === 'DUPLICATE_KEY' ? 'remove one of them' : '',
    });
  }
  if (document.errors.length > 0) return null;
  try {
    const value: unknown = document.toJS({ maxAliasCount: MOST_ALIASES });
    return {
      value,
      placeOf: (path) => placeIn(document, path, at),
      placeOfKey: (path, key) => keyPlace(document, path, key, at),
    };
  } catch (cause) {
    if (!(cause instanceof ReferenceError || cause instanceof RangeError)) throw cause;
    addAliasIssue(document, cause, at, issues);
    return null;
  }
}

/** The alias that names nothing; or else the last one, which is where a file that multiplies itself has grown largest. */
function addAliasIssue(
  document: Document,
  cause: Error,
  at: (offset: number) => Place,
  issues: IssueList,
): void {
  const aliases: Alias[] = [];
  visit(document, { Alias: (_, alias) => void aliases.push(alias) });
  // Looking an alias up walks through the whole document: the first few tell the cause.
  const missing = aliases.slice(0, 20).find((alias) => alias.resolve(document) === undefined);
  const culprit = missing ?? aliases.at(-1);
  const place = culprit?.range ? at(culprit.range[0]) : {};
  if (missing !== undefined) {
    const message = `the alias *${missing.source} names nothing that stands before it`;
    issues.add({
      code: 'yaml-aliases',
      ...place,
      message,
      hint: 'a text that begins with * needs quotation marks',
    });
  } else if (culprit !== undefined) {
    const message = 'the aliases (*name) multiply the file beyond the limit';
    issues.add({ code: 'yaml-aliases', ...place, message, hint: 'write the values out' });
  } else {
    const message = `the file cannot be understood as YAML (${cause.message.slice(0, 100)})`;
    issues.add({ code: 'yaml', message });
  }
}

/** First line that opens more than `DEEPEST` brackets, dashes or indentations; a rough count, before any parser recurses. */
function depthProblem(text: string): number | null {
  let brackets = 0;
  const indents: number[] = [];
  for (const [index, line] of text.split(/\r\n|\n|\r/).entries()) {
    for (const character of line) {
      if (character === '[' || character === '{') brackets++;
      else if ((character === ']' || character === '}') && brackets > 0) brackets--;
    }
    const indent = line.search(/\S/);
    if (indent >= 0) {
      while (indents.length > 0 && indents.at(-1)! >= indent) indents.pop();
      indents.push(indent);
    }
    const marks = /^(?:\s*[-?:](?=\s))+/.exec(line)?.[0].split(/[-?:]/).length ?? 0;
    if (Math.max(brackets, marks, indents.length) > DEEPEST) return index + 1;
  }
  return null;
}

function placeIn(document: Document, path: readonly PropertyKey[], at: (offset: number) => Place): Place {
  for (let length = path.length; length >= 0; length--) {
    const node: unknown = length === 0 ? document.contents : document.getIn(path.slice(0, length), true);
    if (isNode(node) && node.range) {
      // A mapping or list that begins on the next line is shown at its key, which is where people look.
      if (length > 0 && (isMap(node) || isSeq(node)) && typeof path[length - 1] === 'string') {
        return keyPlace(document, path.slice(0, length - 1), String(path[length - 1]), at);
      }
      return at(node.range[0]);
    }
    const last = path[length - 1];
    if (node === null && typeof last === 'string')
      return keyPlace(document, path.slice(0, length - 1), last, at);
  }
  return { line: 1, column: 1 };
}

function keyPlace(
  document: Document,
  path: readonly PropertyKey[],
  key: string,
  at: (offset: number) => Place,
): Place {
  const map: unknown = path.length === 0 ? document.contents : document.getIn(path, true);
  if (isMap(map)) {
    for (const pair of map.items) {
      if (isPair(pair) && isScalar(pair.key) && String(pair.key.value) === key && pair.key.range)
        return at(pair.key.range[0]);
    }
  }
  return path.length === 0 ? { line: 1, column: 1 } : placeIn(document, path, at);
}
