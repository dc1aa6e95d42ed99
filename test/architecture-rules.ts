/**
 * The rules of the house, checked on the text of the source files: who may import whom, who may touch the process and the
 * console, how long a file may be. The files come in as a map, so that planted violations can be tried.
 */
import { posix } from 'node:path';
import ts from 'typescript';

/** From the top down: a folder may import its own files and those of folders further down. */
const LAYERS = [
  'cli',
  'dossier',
  'planning',
  'solving',
  'signals',
  'orbit',
  'observations',
  'numerics',
] as const;
export const DIRECTION: string =
  'cli > dossier > planning > solving > signals > {orbit, observations} > numerics; observations may use orbit/constants only';

const LONGEST_FILE_LINES = 300;
/** Files allowed to be longer, each with its reason. */
const LONG_FILES: ReadonlyMap<string, string> = new Map();

/** Modules that cost start-up time and memory; only charts need them, and only once a chart is painted. */
const HEAVY_MODULES = ['chart.js', 'chartjs-plugin-annotation', '@napi-rs/canvas'];
const CHARTS_FOLDER = 'dossier/charts/';

/** Path from `src/`, with forward slashes, to text. */
export type SourceFiles = ReadonlyMap<string, string>;

interface ImportLine {
  readonly line: number;
  readonly module: string;
  readonly dynamic: boolean;
  /** `import type`, or nothing but `type` names: gone after compiling. */
  readonly typeOnly: boolean;
}

interface Parsed {
  readonly imports: readonly ImportLine[];
  readonly violations: readonly string[];
}

function isTypeOnly(node: ts.ImportDeclaration | ts.ExportDeclaration): boolean {
  if (ts.isExportDeclaration(node)) return node.isTypeOnly;
  const clause = node.importClause;
  if (clause === undefined) return false;
  if (clause.phaseModifier === ts.SyntaxKind.TypeKeyword) return true;
  const { namedBindings } = clause;
  return (
    clause.name === undefined &&
    namedBindings !== undefined &&
    ts.isNamedImports(namedBindings) &&
    namedBindings.elements.length > 0 &&
    namedBindings.elements.every((element) => element.isTypeOnly)
  );
}

/** `process` in `a.process` or `{ process: 1 }` is a name of ours, not the global. */
function isGlobal(node: ts.Identifier): boolean {
  const { parent } = node;
  if (ts.isPropertyAccessExpression(parent)) return parent.name !== node;
  return !(
    (ts.isPropertyAssignment(parent) || ts.isPropertySignature(parent) || ts.isMethodSignature(parent)) &&
    parent.name === node
  );
}

function parse(path: string, text: string): Parsed {
  const source = ts.createSourceFile(path, text, ts.ScriptTarget.Latest, true);
  const imports: ImportLine[] = [];
  const violations: string[] = [];
  const lineOf = (node: ts.Node): number =>
    source.getLineAndCharacterOfPosition(node.getStart(source)).line + 1;
  const visit = (node: ts.Node): void => {
    if (
      (ts.isImportDeclaration(node) || ts.isExportDeclaration(node)) &&
      node.moduleSpecifier !== undefined
    ) {
      const module = (node.moduleSpecifier as ts.StringLiteral).text;
      imports.push({ line: lineOf(node), module, dynamic: false, typeOnly: isTypeOnly(node) });
    } else if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) {
      const [argument] = node.arguments;
      if (argument !== undefined && ts.isStringLiteralLike(argument))
        imports.push({ line: lineOf(node), module: argument.text, dynamic: true, typeOnly: false });
      else
        violations.push(`src/${path}:${lineOf(node)}: imports a module whose name is computed; write it out`);
    } else if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) {
      const { literal } = node.argument;
      if (ts.isStringLiteral(literal))
        imports.push({ line: lineOf(node), module: literal.text, dynamic: false, typeOnly: true });
    } else if (node.kind === ts.SyntaxKind.AnyKeyword) {
      violations.push(`src/${path}:${lineOf(node)}: the type any; say what it is, or unknown`);
    } else if (ts.isIdentifier(node) && (node.text === 'process' || node.text === 'console')) {
      if (!path.startsWith('cli/') && isGlobal(node))
        violations.push(`src/${path}:${lineOf(node)}: touches ${node.text}; only src/cli may`);
    }
    ts.forEachChild(node, visit);
  };
  visit(source);
  return { imports, violations };
}

/** Folder of the house, or `null` for files at the top of `src/`. */
function folderOf(path: string): (typeof LAYERS)[number] | null {
  const first = path.split('/')[0]!;
  return LAYERS.find((layer) => layer === first) ?? null;
}

/** Whether `from` may import `to`; both are paths from `src/`. */
function mayImport(from: string, to: string): boolean {
  if (to === 'errors.ts') return true;
  // The library's face gathers everything; nothing inside may lean on it.
  if (from === 'index.ts') return folderOf(to) !== 'cli';
  const [above, below] = [folderOf(from), folderOf(to)];
  if (above === null || below === null) return false;
  if (above === below) return true;
  if (above === 'observations' && below === 'orbit') return to === 'orbit/constants.ts';
  if (above === 'orbit' && below === 'observations') return false;
  return LAYERS.indexOf(above) < LAYERS.indexOf(below);
}

function importViolations(path: string, line: ImportLine, files: SourceFiles): string[] {
  const here = `src/${path}:${line.line}`;
  if (/^(node:)?(process|console)$/.test(line.module) && !path.startsWith('cli/'))
    return [`${here}: imports ${line.module}; only src/cli may`];
  if (line.typeOnly && HEAVY_MODULES.includes(line.module)) return [];
  if (HEAVY_MODULES.some((heavy) => line.module === heavy || line.module.startsWith(`${heavy}/`)))
    return line.dynamic && path.startsWith(CHARTS_FOLDER)
      ? []
      : [`${here}: imports ${line.module}; allowed is await import() inside src/${CHARTS_FOLDER} only`];
  if (!line.module.startsWith('.')) return [];
  if (!line.module.endsWith('.js')) return [`${here}: imports ${line.module}; relative imports end in .js`];
  const target = targetOf(path, line.module);
  if (!files.has(target)) return [`${here}: imports ${line.module}, but src/${target} does not exist`];
  return mayImport(path, target) ? [] : [`${here}: imports src/${target}; allowed is ${DIRECTION}`];
}

function targetOf(path: string, module: string): string {
  return posix.normalize(posix.join(posix.dirname(path), module.replace(/\.js$/, '.ts')));
}

/** Each circle once, as the files along it. Types count too: files that need each other belong together. */
function circles(graph: ReadonlyMap<string, readonly ImportLine[]>): string[] {
  const found: string[] = [];
  const finished = new Set<string>();
  const walk = (path: string, trail: readonly string[]): void => {
    const seenAt = trail.indexOf(path);
    if (seenAt >= 0) {
      found.push([...trail.slice(seenAt), path].map((name) => `src/${name}`).join(' -> '));
      return;
    }
    if (finished.has(path)) return;
    for (const { module } of graph.get(path) ?? []) {
      if (module.startsWith('.')) walk(targetOf(path, module), [...trail, path]);
    }
    finished.add(path);
  };
  for (const path of graph.keys()) walk(path, []);
  return found;
}

/** Every breach of the rules, as `src/file:line: what; what is allowed`. Empty for a house in order. */
export function architectureViolations(files: SourceFiles): string[] {
  const violations: string[] = [];
  const graph = new Map<string, readonly ImportLine[]>();
  for (const [path, text] of files) {
    const parsed = parse(path, text);
    violations.push(...parsed.violations);
    graph.set(path, parsed.imports);
    for (const line of parsed.imports) violations.push(...importViolations(path, line, files));
    const lines = text.split('\n').length - (text.endsWith('\n') ? 1 : 0);
    if (lines > LONGEST_FILE_LINES && !LONG_FILES.has(path))
      violations.push(
        `src/${path}:${LONGEST_FILE_LINES + 1}: ${lines} lines; allowed are ${LONGEST_FILE_LINES}`,
      );
    if (folderOf(path) === null && path !== 'index.ts' && path !== 'errors.ts')
      violations.push(`src/${path}:1: stands outside the folders of the house; allowed is ${DIRECTION}`);
  }
  for (const circle of circles(graph)) violations.push(`${circle}: circular import; ${DIRECTION}`);
  return violations;
}
