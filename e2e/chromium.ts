import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { chromium } from 'playwright';
import { installPackages, type Run } from '../test/peers/debian.ts';
import { findProgram } from '../test/peers/programs.ts';

/** A page that draws without a GPU and asks nothing of the network. */
export const CHROMIUM_ARGS = [
  '--no-sandbox',
  '--use-angle=swiftshader',
  '--enable-unsafe-swiftshader',
  '--disable-background-networking',
];

/** Path of a Chromium that runs here: named by CHROMIUM, on the search path, or Playwright's own; null without one. */
export const findChromium = (): string | null => {
  const named = process.env.CHROMIUM;
  const candidates = [
    ...(named === undefined || named === '' ? [] : [named]),
    findProgram('chromium'),
    findProgram('chromium-browser'),
    chromium.executablePath(),
  ];
  return candidates.find((path) => path !== null && existsSync(path) && runs(path)) ?? null;
};

/** Some systems put a script in its place that only says where to get it. */
const runs = (path: string): boolean => spawnSync(path, ['--version'], { stdio: 'ignore' }).status === 0;

/** Fetches one: Debian's as root, otherwise Playwright's own. Says whether there is one now. */
export const fetchChromium = (run: Run): boolean => {
  if (installPackages(['chromium'], run) && findChromium() !== null) return true;
  const home = dirname(createRequire(import.meta.url).resolve('playwright/package.json'));
  return run(process.execPath, [join(home, 'cli.js'), 'install', 'chromium']) && findChromium() !== null;
};

export const NO_CHROMIUM =
  'no Chromium: name one with the variable CHROMIUM, or install the package "chromium" of the system';
