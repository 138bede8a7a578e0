import { spawn } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { ConsoleOptions } from '../console/start.ts';
import { ensureRenderer } from './renderer-build.ts';

const PROJECT = fileURLToPath(new URL('../..', import.meta.url));

/** Path of Electron's binary, or null: its npm package comes without one and fetches it on first use. */
export const electronBinary = (): string | null => {
  try {
    const home = dirname(createRequire(import.meta.url).resolve('electron/package.json'));
    const relative = readFileSync(join(home, 'path.txt'), 'utf8').trim();
    const binary = join(home, 'dist', relative);
    return existsSync(binary) ? binary : null;
  } catch {
    return null;
  }
};

/** Why Electron cannot be used here, or null. */
export const whyNotElectron = (): string | null => {
  if (electronBinary() === null)
    return "Electron's binary is not on this computer (fetch it once with `npx install-electron`).";
  if (process.platform === 'linux' && !process.env.DISPLAY && !process.env.WAYLAND_DISPLAY)
    return 'there is no display.';
  return null;
};

/** Builds what Electron needs and runs it until its window is closed; returns its exit code. */
export const runElectron = async (options: ConsoleOptions): Promise<number> => {
  await ensureRenderer();
  const { build } = await import('vite');
  await build({
    root: PROJECT,
    configFile: join(PROJECT, 'vite.config.ts'),
    mode: 'main',
    logLevel: 'error',
  });
  const binary = electronBinary();
  if (binary === null) return 1;
  const child = spawn(binary, [join(PROJECT, 'dist', 'main', 'electron.js')], {
    stdio: 'inherit',
    env: { ...process.env, FOLDBACK_OPTIONS: JSON.stringify(options) },
  });
  return new Promise((resolve) => child.on('exit', (code) => resolve(code ?? 1)));
};
