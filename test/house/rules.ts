import { literalText, type Node, nameOf, referencesOf, type Source, walk } from './source.ts';

/** What a file does against the house's rules, one sentence each. */
export type Rule = (source: Source) => string[];

const houseOf = (path: string): string => path.split('/')[0] ?? '';

/** `main → shared-model ← renderer`; a page has no Node, and the shared model has nothing but zod. */
export const arrowsPointOneWay: Rule = (source) => {
  const from = houseOf(source.path);
  return referencesOf(source).flatMap(({ target }) => {
    if (target === null) return [`${source.path} imports a computed name, which nobody can check`];
    return mayImport(from, target) ? [] : [`${source.path} imports ${target}`];
  });
};

const PAGE_HAS_NOT = /^(node:|electron$|ws$|serialport$|vite$|commander$|yaml$|@mcap\/core$)/;

const mayImport = (from: string, target: string): boolean => {
  // The project's folder itself holds no code.
  if (target === './.') return true;
  if (target.startsWith('.')) {
    const to = houseOf(target.slice(2));
    return to === from || to === 'shared-model';
  }
  if (from === 'shared-model') return target === 'zod';
  return from === 'main' || !PAGE_HAS_NOT.test(target);
};

const OUTSIDE = [
  ...['Date', 'performance', 'Temporal', 'Intl'],
  ...['setTimeout', 'setInterval', 'setImmediate', 'queueMicrotask', 'requestAnimationFrame'],
  ...['crypto', 'process', 'Buffer', 'console', 'fetch', 'XMLHttpRequest', 'WebSocket', 'Worker', 'require'],
  ...['window', 'document', 'navigator', 'localStorage', 'globalThis', 'self', 'eval', 'Function'],
];

/** The shared model reads no clock and no random source, and does no input or output. */
export const keepsToItself: Rule = ({ path, program }) => {
  const found: string[] = [];
  walk(program, (node, parent, key) => {
    const name = nameOf(node);
    if (name !== null && OUTSIDE.includes(name) && !isOwnName(parent, key))
      found.push(`${path} uses ${name}`);
    if (node.type === 'MemberExpression' && nameOf(node.object) === 'Math' && memberOf(node) === 'random')
      found.push(`${path} uses Math.random`);
    if (node.type === 'VariableDeclarator' && nameOf(node.init) === 'Math')
      found.push(`${path} takes Math apart, which hides Math.random`);
    if (node.type === 'MetaProperty') found.push(`${path} uses import.meta`);
  });
  return found;
};

/** A property called "process" is a property, not the process. */
const isOwnName = (parent: Node | null, key: string): boolean => {
  if (parent === null) return false;
  if (parent.type === 'MemberExpression') return key === 'property' && parent.computed !== true;
  const keyed = [
    'Property',
    'TSPropertySignature',
    'PropertyDefinition',
    'MethodDefinition',
    'TSMethodSignature',
  ];
  return (
    keyed.includes(parent.type) && key === 'key' && parent.computed !== true && parent.shorthand !== true
  );
};

/** The member that is read, whether as `.name` or as `['name']`; null where it is computed. */
const memberOf = (node: Node): string | null =>
  node.computed === true ? literalText(node.property) : nameOf(node.property);

const isTwinOrRig = (path: string): boolean =>
  path.startsWith('main/rig/') || path.startsWith('main/simulator/');
const PORT_OWNERS = [
  'main/rig/serial-port-line.ts',
  // The device's end of the line, where nobody listens but our own simulated machine.
  'main/commands/simulate.ts',
];

/** Bytes reach the line from the rig link alone: nobody else holds a line, opens one, or opens a port. */
export const onlyTheRigLinkWrites: Rule = (source) => {
  const { path } = source;
  if (!path.startsWith('main/')) return [];
  const found = referencesOf(source).flatMap(({ target, names }) => [
    ...(target === 'serialport' && !PORT_OWNERS.includes(path) ? [`${path} opens serial ports`] : []),
    ...(names.includes('SerialLine') && !isTwinOrRig(path) ? [`${path} holds a serial line`] : []),
  ]);
  if (isTwinOrRig(path)) return found;
  walk(source.program, (node) => {
    if (node.type === 'CallExpression' && opensALine(node.callee as Node))
      found.push(`${path} opens a serial line`);
  });
  return found;
};

const opensALine = (callee: Node): boolean =>
  nameOf(callee) === 'openLine' ||
  (callee.type === 'MemberExpression' && memberOf(callee) === 'openLine') ||
  // serialPortOpener(…)() at once
  (callee.type === 'CallExpression' && nameOf(callee.callee) === 'serialPortOpener');

/** Files of `main` that ask the interlock for a permit to move, once for each time they do. */
export const asksForAPermit: Rule = ({ path, program }) => {
  const found: string[] = [];
  walk(program, (node) => {
    if (
      node.type === 'MemberExpression' &&
      nameOf(node.object) === 'PermittedDrive' &&
      memberOf(node) !== null
    ) {
      if (memberOf(node) === 'judge') found.push(path);
    } else if (node.type === 'MemberExpression' && nameOf(node.object) === 'PermittedDrive')
      found.push(`${path} reaches into PermittedDrive by a computed name`);
  });
  return found;
};

/** A permit is made by the interlock; nothing is declared to be one. */
export const nothingIsCastToAPermit: Rule = ({ path, program }) => {
  const found: string[] = [];
  walk(program, (node) => {
    if (node.type !== 'TSAsExpression' && node.type !== 'TSTypeAssertion') return;
    walk(node.typeAnnotation as Node, (part) => {
      if (nameOf(part) === 'PermittedDrive') found.push(`${path} casts to a permit`);
    });
  });
  return found;
};
