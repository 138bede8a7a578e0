import { existsSync, readdirSync, statSync } from 'node:fs';
import { mkdir, mkdtemp, rename, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const PROJECT = fileURLToPath(new URL('../..', import.meta.url));
const DIST = join(PROJECT, 'dist');

/** Something built from sources: a folder of `dist`, the file in it that is looked at, and the ways into vite.config.ts. */
interface Built {
  readonly folder: string;
  readonly file: string;
  readonly modes: readonly string[];
  readonly sources: readonly string[];
}

const SCREEN: Built = {
  folder: 'renderer',
  file: 'index.html',
  modes: ['production'],
  sources: ['renderer', 'shared-model', 'vite.config.ts', 'package-lock.json'],
};
const ELECTRON: Built = {
  folder: 'main',
  file: 'electron.js',
  modes: ['main', 'preload'],
  sources: ['main', 'shared-model', 'vite.config.ts', 'package-lock.json'],
};

/**
 * Folder of the built renderer; builds it first when it is missing or older than its sources.
 * Rejects with a message for a person when it cannot be built.
 */
export const ensureRenderer = (): Promise<string> => ensureBuilt(SCREEN);

/** Folder of what Electron loads, built likewise. */
export const ensureElectronBundles = (): Promise<string> => ensureBuilt(ELECTRON);

const ensureBuilt = async (built: Built): Promise<string> => {
  const place = join(DIST, built.folder);
  const file = join(place, built.file);
  const newest = Math.max(...built.sources.map((name) => newestBelow(join(PROJECT, name))));
  if (existsSync(file) && statSync(file).mtimeMs >= newest) return place;
  await mkdir(DIST, { recursive: true });
  const fresh = await mkdtemp(join(DIST, `.${built.folder}-`));
  try {
    for (const mode of built.modes) await buildInto(fresh, mode);
    await putInPlace(fresh, place);
  } finally {
    await rm(fresh, { recursive: true, force: true });
  }
  return place;
};

const buildInto = async (outDir: string, mode: string): Promise<void> => {
  const { build } = await import('vite');
  await build({
    configFile: join(PROJECT, 'vite.config.ts'),
    mode,
    logLevel: 'silent',
    build: { outDir, emptyOutDir: false },
  }).catch((error: unknown) => {
    const why = error instanceof Error ? error.message : String(error);
    throw new Error(`Foldback could not be built: ${why}\nRun \`npm ci\` and start again.`);
  });
};

/** Two starts at once: each moves a whole build, and one that finds the place taken anew leaves it so. */
export const putInPlace = async (fresh: string, place: string): Promise<void> => {
  const old = `${fresh}-old`;
  await rename(place, old).catch(unless('ENOENT'));
  await rename(fresh, place).catch(unless('ENOTEMPTY', 'EEXIST', 'EPERM'));
  await rm(old, { recursive: true, force: true });
};

const unless =
  (...codes: readonly string[]) =>
  (error: NodeJS.ErrnoException): void => {
    if (!codes.includes(error.code ?? '')) throw error;
  };

/** Newest change of any file below, [ms] since the epoch. */
const newestBelow = (path: string): number => {
  if (!existsSync(path)) return 0;
  const facts = statSync(path);
  if (!facts.isDirectory()) return facts.mtimeMs;
  return Math.max(0, ...readdirSync(path).map((name) => newestBelow(join(path, name))));
};
