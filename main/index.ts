import { onParentGone } from './parent-watch.ts';
import { openAppWindow } from './shells/app-window.ts';
import { type BrowserShell, listen, serveConsole } from './shells/browser.ts';
import { ensureRenderer } from './shells/builds.ts';
import { type ConsoleProcess, forkConsole } from './shells/console-process.ts';
import { runElectron, whyNotElectron } from './shells/electron-launch.ts';
import { isLoopback } from './shells/own-address.ts';
import { consoleOptions, refusedOptions, type StartOptions, startCommand } from './start-options.ts';

// Whoever started this may stop reading; that must not end it.
for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {});

const say = (line: string): void => void process.stdout.write(`${line}\n`);

const fail = (error: Error | string): never => {
  process.stderr.write(`${typeof error === 'string' ? error : error.message}\n`);
  process.exit(1);
};

const start = async (options: StartOptions): Promise<void> => {
  const refused = refusedOptions(options);
  if (refused !== null) fail(refused);
  const trouble = options.shell === 'browser' ? null : whyNotElectron();
  if (options.shell === 'electron' && trouble !== null) fail(`Electron cannot be started: ${trouble}`);
  if (options.shell !== 'browser' && trouble === null) {
    say('Shell: Electron, because its program is on this computer.');
    process.exit(await runElectron(consoleOptions(options)).catch(fail));
  }
  await runBrowserShell(options, trouble);
};

/** Serves the screen until a signal, the console's end or its own window's end; `instead` says why not Electron. */
const runBrowserShell = async (options: StartOptions, instead: string | null): Promise<void> => {
  const rendererDir = await ensureRenderer().catch(fail);
  const server = await listen(options.listen, options.port).catch((error) =>
    fail(listenTrouble(options, error)),
  );
  const console_ = await forkConsole(consoleOptions(options)).catch(fail);
  const shell = serveConsole(server, console_, { rendererDir });
  const end = endOnce(console_, shell);
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => void end(0));
  onParentGone(() => void end(0));
  console_.onExit(() => {
    process.stderr.write(
      'The console process ended unexpectedly. The base stops by its own watchdog. Start Foldback again.\n',
    );
    void end(1);
  });
  if (!isLoopback(options.listen)) process.stderr.write(`${OPEN_TO_OTHERS}\n`);
  if (instead !== null) say(`Shell: browser, because ${instead}`);
  say(`Foldback console: ${shell.url()}`);
  offerMoreAddresses(shell);
  if (options.shell === 'auto' && options.window) {
    // A key of its own: the printed address stays good for another window.
    const opened = await openAppWindow(shell.url(), () => shell.windows() === 0 && void end(0));
    say(opened);
  }
};

const OPEN_TO_OTHERS =
  'Others on this network can reach the console. Nothing is encrypted: whoever listens there sees the pictures and can take a session over.';

const endOnce = (console_: ConsoleProcess, shell: BrowserShell): ((code: number) => Promise<void>) => {
  let ending = false;
  return async (code) => {
    if (ending) return;
    ending = true;
    await Promise.all([console_.close(), shell.close()]);
    process.exit(code);
  };
};

/** An address opens one window's session, once; a person at the terminal gets another with Enter. */
const offerMoreAddresses = (shell: BrowserShell): void => {
  if (process.stdin.isTTY) process.stdin.on('data', () => say(`Foldback console: ${shell.url()}`));
};

const listenTrouble = ({ port, listen }: StartOptions, error: NodeJS.ErrnoException): string => {
  if (error.code === 'EADDRINUSE')
    return `Port ${port} is in use by another program. Choose another with --port, or 0 for any free one.`;
  if (error.code === 'EACCES')
    return `Port ${port} may not be used by this account. Choose one from 1024 up with --port.`;
  if (error.code === 'EADDRNOTAVAIL')
    return `${listen} is not an address of this computer. Give one of its own with --listen.`;
  return `Cannot listen on ${listen}, port ${port}: ${error.message}`;
};

await start(startCommand().parse().opts<StartOptions>());
