import { spawn } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import type { ConsoleOptions } from '../console/start.ts';
import { ensureElectronBundles, ensureRenderer } from './builds.ts';

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
  const binary = electronBinary();
  if (binary === null) throw new Error("Electron's binary is not on this computer.");
  await ensureRenderer();
  const folder = await ensureElectronBundles();
  // Set by some editors' terminals, it would turn Electron into plain Node.
  const { ELECTRON_RUN_AS_NODE: _, ...env } = process.env;
  const child = spawn(binary, [join(folder, 'electron.js'), ...asArguments(options)], {
    stdio: 'inherit',
    env,
  });
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const)
    process.on(signal, () => child.kill('SIGTERM'));
  return new Promise((resolve, reject) => {
    child.on('error', reject);
    child.on('exit', (code) => resolve(code ?? 1));
  });
};

const asArguments = ({ rigFile, serialPath, missionsDir, seed }: ConsoleOptions): string[] => [
  ...(rigFile === null ? [] : ['--rig', rigFile]),
  ...(serialPath === null ? [] : ['--serial', serialPath]),
  ...['--missions', missionsDir, '--seed', String(seed)],
];
