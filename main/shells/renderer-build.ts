import { existsSync, readdirSync, statSync } from 'node:fs';
import { mkdir, mkdtemp, rename, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const PROJECT = fileURLToPath(new URL('../..', import.meta.url));
const BUILT = join(PROJECT, 'dist', 'renderer');
const SOURCES = ['renderer', 'shared-model', 'vite.config.ts', 'package-lock.json'];

/** Folder of the built renderer; builds it when it is missing or older than its sources. */
export const ensureRenderer = async (): Promise<string> => {
  const built = join(BUILT, 'index.html');
  if (existsSync(built) && statSync(built).mtimeMs >= newestSource()) return BUILT;
  const { build } = await import('vite');
  // Built beside and renamed, so that two starts at once never serve half a build.
  const fresh = await mkdtemp(join(PROJECT, 'dist-'));
  await build({
    root: PROJECT,
    configFile: join(PROJECT, 'vite.config.ts'),
    logLevel: 'error',
    build: { outDir: fresh, emptyOutDir: true },
  });
  const old = `${fresh}-old`;
  await mkdir(join(PROJECT, 'dist'), { recursive: true });
  await rename(BUILT, old).catch(() => {});
  await rename(fresh, BUILT).catch(() => {});
  await Promise.all([rm(old, { recursive: true, force: true }), rm(fresh, { recursive: true, force: true })]);
  return BUILT;
};

const newestSource = (): number => Math.max(...SOURCES.map((name) => newestBelow(join(PROJECT, name))));

const newestBelow = (path: string): number => {
  if (!existsSync(path)) return 0;
  const facts = statSync(path);
  if (!facts.isDirectory()) return facts.mtimeMs;
  return Math.max(facts.mtimeMs, ...readdirSync(path).map((name) => newestBelow(join(path, name))));
};
