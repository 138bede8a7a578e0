import { spawn, spawnSync } from 'node:child_process';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const CHROMIUM_FAMILY = ['chromium', 'chromium-browser', 'google-chrome', 'microsoft-edge'];

/** Opens the address as an app window where a Chromium-family browser and a display are there; says what it did. */
export const openAppWindow = (url: string): string => {
  if (process.platform === 'linux' && !process.env.DISPLAY && !process.env.WAYLAND_DISPLAY)
    return 'There is no display here; open the address above in a browser on this computer.';
  const browser = CHROMIUM_FAMILY.find(
    (name) => spawnSync(name, ['--version'], { stdio: 'ignore' }).status === 0,
  );
  if (browser === undefined) return 'Open the address above in a browser on this computer.';
  // A profile of its own: the key in the address must not reach a synchronised history.
  const profile = mkdtempSync(join(tmpdir(), 'foldback-window-'));
  spawn(browser, [`--app=${url}`, `--user-data-dir=${profile}`, '--no-first-run'], {
    stdio: 'ignore',
    detached: true,
  }).unref();
  return `Opened as a window of ${browser}.`;
};
