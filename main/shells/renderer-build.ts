import { existsSync, readdirSync, statSync } from 'node:fs';
import { mkdir, mkdtemp, rename, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const PROJECT = fileURLToPath(new URL('../..', import.meta.url));
const BUILT = join(PROJECT, 'dist', 'renderer');
const SOURCES = ['renderer', 'shared-model', 'vite.config.ts', 'package-lock.json'];

/**
 * Folder of the built renderer; builds it first when it is missing or older than its sources.
 * Rejects with a message for a person when it cannot be built.
 */
export const ensureRenderer = async (): Promise<string> => {
  const index = join(BUILT, 'index.html');
  if (existsSync(index) && statSync(index).mtimeMs >= newestSource()) return BUILT;
  await mkdir(join(PROJECT, 'dist'), { recursive: true });
  const fresh = await mkdtemp(join(PROJECT, 'dist', '.renderer-'));
  try {
    await buildInto(fresh);
    await putInPlace(fresh);
  } finally {
    await rm(fresh, { recursive: true, force: true });
  }
  return BUILT;
};

const buildInto = async (outDir: string): Promise<void> => {
  const { build } = await import('vite');
  await build({
    root: join(PROJECT, 'renderer'),
    configFile: join(PROJECT, 'vite.config.ts'),
    logLevel: 'silent',
    build: { outDir, emptyOutDir: true },
  }).catch((error: unknown) => {
    const why = error instanceof Error ? error.message : String(error);
    throw new Error(`The screen could not be built: ${why}\nRun \`npm ci\` and start again.`);
  });
};

/** Two starts at once: each moves a whole build, the later one finds the place taken and leaves it so. */
const putInPlace = async (fresh: string): Promise<void> => {
  const old = `${fresh}-old`;
  await rename(BUILT, old).catch(ignoreAbsence);
  await rename(fresh, BUILT).catch(ignoreTaken);
  await rm(old, { recursive: true, force: true });
};

const ignoreAbsence = (error: NodeJS.ErrnoException): void => {
  if (error.code !== 'ENOENT') throw error;
};
const ignoreTaken = (error: NodeJS.ErrnoException): void => {
  if (error.code !== 'ENOTEMPTY' && error.code !== 'EEXIST' && error.code !== 'EPERM') throw error;
};

const newestSource = (): number => Math.max(...SOURCES.map((name) => newestBelow(join(PROJECT, name))));

const newestBelow = (path: string): number => {
  if (!existsSync(path)) return 0;
  const facts = statSync(path);
  if (!facts.isDirectory()) return facts.mtimeMs;
  return Math.max(facts.mtimeMs, ...readdirSync(path).map((name) => newestBelow(join(path, name))));
};
