import { join } from 'node:path';
import { BrowserWindow, dialog, ipcMain, powerMonitor } from 'electron';
import { START_PAGE } from './app-protocol.ts';
import type { ConsoleProcess } from './console-process.ts';
import { linkWindow } from './window-link.ts';

/** A window that dies this often within this time is not opened again [ms]. */
const DEATHS_MAX = 3;
const DEATHS_WITHIN = 60_000;

/** The console's one window. Whatever takes it from the operator's hands ends its lease at once. */
export const openConsoleWindow = async (console_: ConsoleProcess, folder: string): Promise<BrowserWindow> => {
  const window = new BrowserWindow({
    width: 1280,
    height: 800,
    minWidth: 1024,
    minHeight: 680,
    show: false,
    autoHideMenuBar: true,
    webPreferences: {
      preload: join(folder, 'preload.cjs'),
      sandbox: true,
      contextIsolation: true,
      nodeIntegration: false,
      webviewTag: false,
      // A window behind another still shows the machine as it is.
      backgroundThrottling: false,
      spellcheck: false,
    },
  });
  const { webContents } = window;
  const link = linkWindow(ipcMain, webContents, console_);
  const reload = reloader(window);

  window.once('ready-to-show', () => window.show());
  window.on('closed', link.leave);
  webContents.on('did-start-navigation', (details) => {
    if (details.isMainFrame && !details.isSameDocument) link.leave();
  });
  webContents.on('render-process-gone', () => {
    link.leave();
    reload();
  });
  webContents.on('unresponsive', () => {
    link.leave();
    // A frozen page cannot be told to reload; it is ended first, which comes back as "gone".
    webContents.forcefullyCrashRenderer();
  });
  powerMonitor.on('suspend', link.leave);
  powerMonitor.on('resume', () => {
    if (!window.isDestroyed()) webContents.reload();
  });
  await window.loadURL(START_PAGE);
  return window;
};

const reloader = (window: BrowserWindow): (() => void) => {
  const deaths: number[] = [];
  return () => {
    const now = performance.now();
    deaths.push(now);
    const recent = deaths.filter((at) => now - at < DEATHS_WITHIN).length;
    if (recent <= DEATHS_MAX) return window.webContents.reload();
    dialog.showErrorBox(
      'The window keeps failing',
      'Motion has ended. Start Foldback again, or use the browser shell: npm start -- --shell browser',
    );
    window.destroy();
  };
};
