import { join } from 'node:path';
import { app, type BrowserWindow, dialog, powerSaveBlocker, protocol, session } from 'electron';
import { consoleOptions, type StartOptions, startCommand } from '../start-options.ts';
import { answerAppRequest, SCHEME } from './app-protocol.ts';
import type { ConsoleProcess } from './console-process.ts';
import { openConsoleWindow } from './console-window.ts';
import { forkUtilityConsole } from './utility-console.ts';
import { limitSession, pinToOurPage } from './window-rights.ts';

const FOLDER = import.meta.dirname;
const RENDERER = join(FOLDER, '..', 'renderer');

let console_: ConsoleProcess | null = null;
let window: BrowserWindow | null = null;

const main = async (): Promise<void> => {
  await app.whenReady();
  limitSession(session.defaultSession);
  const running = await forkUtilityConsole(consoleOptions(readOptions()), FOLDER);
  console_ = running;
  running.onExit(() => {
    dialog.showErrorBox(
      'The console process ended unexpectedly',
      'The base stops by its own watchdog. Start Foldback again.',
    );
    app.exit(1);
  });
  protocol.handle(SCHEME, (request) => answerAppRequest(request, RENDERER, running.missionFolder));
  // A computer that falls asleep cannot hold a machine.
  powerSaveBlocker.start('prevent-display-sleep');
  window = await openConsoleWindow(running, FOLDER);
};

/** Chromium's own switches may stand among ours. */
const readOptions = (): StartOptions =>
  startCommand()
    .allowUnknownOption()
    .allowExcessArguments()
    .parse(process.argv.slice(app.isPackaged ? 1 : 2), { from: 'user' })
    .opts<StartOptions>();

const fail = (error: unknown): void => {
  dialog.showErrorBox('Foldback cannot start', error instanceof Error ? error.message : String(error));
  app.exit(1);
};

/** Holds still, closes the log, and only then lets Electron end. */
const endConsoleFirst = (event: { preventDefault(): void }): void => {
  const running = console_;
  if (running === null) return;
  event.preventDefault();
  console_ = null;
  void running.close().then(() => app.quit());
};

app.enableSandbox();
protocol.registerSchemesAsPrivileged([
  { scheme: SCHEME, privileges: { standard: true, secure: true, supportFetchAPI: true } },
]);
app.on('web-contents-created', (_, contents) => pinToOurPage(contents));
app.on('window-all-closed', () => app.quit());
app.on('before-quit', endConsoleFirst);
for (const signal of ['SIGINT', 'SIGTERM'] as const) process.on(signal, () => app.quit());
if (app.requestSingleInstanceLock()) {
  app.on('second-instance', () => {
    if (window?.isMinimized()) window.restore();
    window?.focus();
  });
  main().catch(fail);
} else app.quit();
