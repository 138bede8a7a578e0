import { spawn } from 'node:child_process';
import { accessSync, constants } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { delimiter, join } from 'node:path';

/** Programs that show a page as a window of its own (`--app`), as they are called on a search path. */
const PROGRAMS = ['chromium', 'chromium-browser', 'google-chrome', 'microsoft-edge'];
const FIXED_PLACES: Readonly<Partial<Record<NodeJS.Platform, readonly string[]>>> = {
  darwin: [
    '/Applications/Chromium.app/Contents/MacOS/Chromium',
    '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
    '/Applications/Microsoft Edge.app/Contents/MacOS/Microsoft Edge',
  ],
  win32: [
    'C:\\Program Files\\Google\\Chrome\\Application\\chrome.exe',
    'C:\\Program Files (x86)\\Microsoft\\Edge\\Application\\msedge.exe',
    'C:\\Program Files\\Microsoft\\Edge\\Application\\msedge.exe',
  ],
};

/**
 * Opens the address as an app window where a Chromium-family browser and a display are there; says what it did.
 * @param onClosed called when the window that was opened here has been closed
 */
export const openAppWindow = async (url: string, onClosed: () => void): Promise<string> => {
  const why = whyNoWindow();
  if (why !== null) return `${why} Open the address above in a browser on this computer.`;
  const browser = findBrowser();
  if (browser === null)
    return 'No Chromium-family browser was found. Open the address above in a browser on this computer.';
  // A profile of its own: the key in the address must not reach a synchronised history.
  const profile = await mkdtemp(join(tmpdir(), 'foldback-window-'));
  const window = spawn(browser, [`--app=${url}`, `--user-data-dir=${profile}`, '--no-first-run'], {
    stdio: 'ignore',
  });
  const began = performance.now();
  const closed = (): void => {
    // A browser that hands the page over to another process and ends at once says nothing about its window.
    if (performance.now() - began < HANDED_OVER) return;
    void rm(profile, { recursive: true, force: true }).catch(() => {});
    onClosed();
  };
  window.once('error', closed);
  window.once('exit', closed);
  return `Opened as a window of ${browser}; closing it ends Foldback when no other window is connected.`;
};

/** A browser process that ends sooner than this never was the window [ms]. */
const HANDED_OVER = 5000;

const whyNoWindow = (): string | null => {
  if (process.platform === 'linux' && !process.env.DISPLAY && !process.env.WAYLAND_DISPLAY)
    return 'There is no display here.';
  if (process.getuid?.() === 0) return 'A browser does not run safely as root.';
  return null;
};

const findBrowser = (): string | null => {
  const onPath = (process.env.PATH ?? '')
    .split(delimiter)
    .flatMap((folder) => PROGRAMS.map((name) => join(folder, name)));
  return [...onPath, ...(FIXED_PLACES[process.platform] ?? [])].find(mayRun) ?? null;
};

const mayRun = (path: string): boolean => {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
};
