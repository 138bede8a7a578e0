import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, posix, relative, sep } from 'node:path';
import { parseSync } from 'vite';

export const PROJECT = join(import.meta.dirname, '..', '..');

/** A syntax tree node as the parser gives it (ESTree with TypeScript). */
export interface Node {
  readonly type: string;
  readonly [key: string]: unknown;
}

/** One source file, `path` from the project's top with forward slashes. */
export interface Source {
  readonly path: string;
  readonly program: Node;
}

export const parseText = (path: string, text: string): Source => {
  const { program, errors } = parseSync(path, text);
  if (errors.length > 0) throw new Error(`${path}: ${errors[0]?.message}`);
  return { path, program: program as unknown as Node };
};

/** Every source file below these folders. */
export const sourcesBelow = (...folders: string[]): Source[] =>
  folders
    .flatMap((folder) => readdirSync(join(PROJECT, folder), { recursive: true, withFileTypes: true }))
    .filter((entry) => entry.isFile() && /\.(ts|tsx|mjs|js|cts|mts)$/.test(entry.name))
    .map((entry) => join(entry.parentPath, entry.name))
    .map((path) => parseText(relative(PROJECT, path).split(sep).join('/'), readFileSync(path, 'utf8')));

/** Visits every node with its parent and the key it stands under. */
export const walk = (
  node: Node,
  visit: (node: Node, parent: Node | null, key: string) => void,
  parent: Node | null = null,
  key = '',
): void => {
  visit(node, parent, key);
  for (const [name, value] of Object.entries(node))
    for (const child of Array.isArray(value) ? value : [value])
      if (isNode(child)) walk(child, visit, node, name);
};

export const isNode = (value: unknown): value is Node =>
  typeof value === 'object' && value !== null && typeof (value as Node).type === 'string';

/** A module that a file names, in whatever way; null where the name is computed. */
export interface Reference {
  readonly target: string | null;
  /** The names taken from it, as they are called there. */
  readonly names: readonly string[];
}

/** Imports, re-exports, type-only and dynamic imports, `import()` types, `require` and `new URL(…, import.meta.url)`. */
export const referencesOf = ({ path, program }: Source): Reference[] => {
  const found: Reference[] = [];
  walk(program, (node) => {
    const source = sourceOf(node);
    if (source === undefined) return;
    const text = literalText(source);
    found.push({ target: text === null ? null : resolved(path, text), names: namesOf(node) });
  });
  return found;
};

const sourceOf = (node: Node): unknown => {
  if (/^(Import|ExportAll|ExportNamed)Declaration$/.test(node.type)) return node.source ?? undefined;
  if (node.type === 'ImportExpression' || node.type === 'TSImportType') return node.source;
  if (node.type === 'TSExternalModuleReference') return node.expression;
  if (node.type === 'CallExpression' && nameOf(node.callee) === 'require')
    return (node.arguments as unknown[])[0];
  if (node.type === 'NewExpression' && nameOf(node.callee) === 'URL') {
    const [first, base] = node.arguments as unknown[];
    // Only an address beside this very file is a reference to another.
    return isNode(base) && isNode(base.object) && base.object.type === 'MetaProperty' ? first : undefined;
  }
  return undefined;
};

export const nameOf = (node: unknown): string | null =>
  isNode(node) && node.type === 'Identifier' ? String(node.name) : null;

export const literalText = (node: unknown): string | null => {
  if (!isNode(node)) return null;
  if (node.type === 'Literal' && typeof node.value === 'string') return node.value;
  const quasis = node.type === 'TemplateLiteral' ? (node.quasis as { value: { cooked: string } }[]) : [];
  return quasis.length === 1 ? (quasis[0]?.value.cooked ?? null) : null;
};

const namesOf = (node: Node): string[] =>
  ((node.specifiers as Node[] | undefined) ?? []).flatMap((one) => {
    const name = nameOf(one.imported ?? one.local);
    return name === null ? [] : [name];
  });

/** A relative name as a path from the project's top, `./main/…`; a package's name as it stands. */
const resolved = (from: string, name: string): string =>
  name.startsWith('.') ? `./${posix.normalize(posix.join(dirname(from), name))}` : name;
