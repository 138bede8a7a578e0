import { execFileSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  arrowsPointOneWay,
  asksForAPermit,
  keepsToItself,
  nothingIsCastToAPermit,
  onlyTheRigLinkWrites,
  type Rule,
} from './rules.ts';
import { PROJECT, parseText, type Source, sourcesBelow } from './source.ts';

const breaches = (rule: Rule, sources: readonly Source[]): string[] => sources.flatMap(rule);
/** What a rule says of one line of code in a file of this name. */
const on = (rule: Rule, path: string, text: string): string[] => rule(parseText(path, text));

const everything = sourcesBelow('main', 'renderer', 'shared-model');
const main = everything.filter(({ path }) => path.startsWith('main/'));
const sharedModel = everything.filter(({ path }) => path.startsWith('shared-model/'));

describe('the house', () => {
  it('lets main and renderer meet in the shared model only', () => {
    expect(breaches(arrowsPointOneWay, everything)).toEqual([]);
  });

  it('keeps clocks, randomness, input and output out of the shared model', () => {
    expect(breaches(keepsToItself, sharedModel)).toEqual([]);
  });

  it('lets the rig link alone write to the line', () => {
    expect(breaches(onlyTheRigLinkWrites, main)).toEqual([]);
  });

  it('asks the interlock for a permit in one place, before the bytes', () => {
    expect(breaches(asksForAPermit, main)).toEqual(['main/console/console.ts']);
  });

  it('casts nothing to a permit', () => {
    expect(breaches(nothingIsCastToAPermit, everything)).toEqual([]);
  });

  it('holds at its top only what the design and the tools ask for', () => {
    const allowed = [
      ...['package.json', 'electron-builder.yml', 'tsconfig.json', 'README.md', 'DEVELOPERS.md'],
      ...['main', 'renderer', 'shared-model', 'e2e', 'test'],
      ...[
        'package-lock.json',
        'biome.json',
        'vite.config.ts',
        'vitest.config.ts',
        '.gitignore',
        '.ci',
        'LICENSE',
      ],
    ];
    const files = execFileSync('git', ['ls-files', '--cached', '--others', '--exclude-standard'], {
      cwd: PROJECT,
    });
    const top = new Set(
      files
        .toString()
        .split('\n')
        .filter(Boolean)
        .map((path) => path.split('/')[0] ?? ''),
    );
    expect([...top].filter((name) => existsSync(join(PROJECT, name)) && !allowed.includes(name))).toEqual([]);
  });

  it('locks its packages by content, without addresses to fetch them from', () => {
    const lock = JSON.parse(readFileSync(join(PROJECT, 'package-lock.json'), 'utf8')) as {
      packages: Record<string, { resolved?: string; integrity?: string }>;
    };
    const packages = Object.entries(lock.packages).filter(([name]) => name !== '');
    expect(packages.filter(([, { resolved }]) => resolved !== undefined).map(([name]) => name)).toEqual([]);
    expect(packages.filter(([, { integrity }]) => integrity === undefined).map(([name]) => name)).toEqual([]);
  });
});

describe('each rule sees what it is there for:', () => {
  it.each([
    ['main/a.ts', "import { x } from '../renderer/x.ts';"],
    ['main/a.ts', "import type { X } from '../renderer/x.ts';"],
    ['main/a.ts', "export * from '../renderer/x.ts';"],
    ['main/a.ts', "export type { X } from '../renderer/x.ts';"],
    ['main/a.ts', "const x = await import('../renderer/x.ts');"],
    ['main/a.ts', 'const x = await import(`../renderer/x.ts`);'],
    ['main/a.ts', 'const x = await import(name);'],
    ['main/a.ts', "let x: import('../renderer/x.ts').X;"],
    ['main/a.ts', "require('../renderer/x.ts');"],
    ['main/a.ts', "fork(new URL('../renderer/x.ts', import.meta.url));"],
    ['main/deep/a.ts', "import '../../test/x.ts';"],
    ['renderer/a.tsx', "import type { X } from '../main/x.ts';"],
    ['renderer/drive/a.tsx', "import { x } from '../../main/rig/x.ts';"],
    ['renderer/a.ts', "import { readFileSync } from 'node:fs';"],
    ['renderer/a.ts', "import { ipcRenderer } from 'electron';"],
    ['shared-model/a.ts', "import type { X } from '../main/x.ts';"],
    ['shared-model/shape/a.ts', "import { x } from '../../renderer/x.ts';"],
    ['shared-model/a.ts', "import { readFileSync } from 'node:fs';"],
    ['shared-model/a.ts', "import { useState } from 'react';"],
  ])('%s may not say %s', (path, text) => {
    expect(on(arrowsPointOneWay, path, text)).toHaveLength(1);
  });

  it.each([
    ['main/a.ts', "import { x } from '../shared-model/x.ts';"],
    ['main/a.ts', "import { readFileSync } from 'node:fs';"],
    ['renderer/drive/a.tsx', "import type { X } from '../../shared-model/x.ts';"],
    ['shared-model/shape/a.ts', "import { z } from 'zod'; import { y } from '../body/y.ts';"],
    ['main/a.ts', "const address = new URL('/stills', base);"],
  ])('%s may say %s', (path, text) => {
    expect(on(arrowsPointOneWay, path, text)).toEqual([]);
  });

  it.each([
    'export const now = () => Date.now();',
    'const { now } = performance;',
    'export const x = Math.random();',
    "export const x = Math['random']();",
    'const { random } = Math;',
    "globalThis['Date'].now();",
    'setTimeout(() => {}, 1);',
    "console.log('x');",
    'process.env.X;',
    "await fetch('x');",
    'export const x = crypto.randomUUID();',
    'export const here = import.meta.url;',
    "new Function('return 1')();",
    'export const x = { performance };',
  ])('the shared model may not say %s', (text) => {
    expect(on(keepsToItself, 'shared-model/a.ts', text)).not.toEqual([]);
  });

  it('the shared model may call its own things what it likes', () => {
    expect(
      on(keepsToItself, 'shared-model/a.ts', 'const a = { process: 1 }; a.process; Math.hypot(1, 2);'),
    ).toEqual([]);
  });

  it.each([
    ['main/console/a.ts', "import { SerialPort } from 'serialport';"],
    ['main/rig/other.ts', "import { SerialPort } from 'serialport';"],
    ['main/console/a.ts', "import type { SerialLine } from '../rig/serial-line.ts';"],
    ['main/console/a.ts', "import type { SerialLine as Line } from '../rig/serial-line.ts';"],
    ['main/console/a.ts', '(await openLine()).write(bytes);'],
    ['main/console/a.ts', '(await simulated.openLine()).write(bytes);'],
    ['main/console/a.ts', '(await serialPortOpener(serial)()).write(bytes);'],
  ])('%s may not say %s', (path, text) => {
    expect(on(onlyTheRigLinkWrites, path, text)).toHaveLength(1);
  });

  it.each([
    'PermittedDrive.judge(request)',
    "PermittedDrive['judge'](request)",
    'PermittedDrive[name](request)',
  ])('a permit is asked for by %s', (text) => {
    expect(on(asksForAPermit, 'main/a.ts', text)).toHaveLength(1);
  });

  it.each(['link.write(x as PermittedDrive, 1);', 'link.write(x as unknown as Partial<PermittedDrive>, 1);'])(
    'nobody may say %s',
    (text) => {
      expect(on(nothingIsCastToAPermit, 'main/a.ts', text)).toHaveLength(1);
    },
  );
});
