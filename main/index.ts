import { homedir } from 'node:os';
import { join, resolve } from 'node:path';
import { Command, InvalidArgumentError, Option } from 'commander';
import { openAppWindow } from './shells/app-window.ts';
import { startBrowserShell } from './shells/browser.ts';
import { forkConsole } from './shells/console-process.ts';
import { runElectron, whyNotElectron } from './shells/electron-launch.ts';
import { ensureRenderer } from './shells/renderer-build.ts';

interface StartOptions {
  readonly shell: 'auto' | 'electron' | 'browser';
  readonly port: number;
  readonly missions: string;
  readonly rig?: string;
  readonly serial?: string;
  readonly window: boolean;
  readonly listen: string;
  readonly insecure: boolean;
  readonly seed: number;
}

const whole =
  (low: number, high: number) =>
  (text: string): number => {
    const value = Number(text);
    if (!Number.isInteger(value) || value < low || value > high)
      throw new InvalidArgumentError(`Allowed is a whole number from ${low} to ${high}.`);
    return value;
  };

const command = new Command('foldback start')
  .description('Starts the operator console.')
  .addOption(
    new Option('--shell <shell>', 'window to show it in')
      .choices(['auto', 'electron', 'browser'])
      .default('auto'),
  )
  .option('--port <number>', 'port of the browser shell; 0 for any free one', whole(0, 65535), 0)
  .option('--missions <folder>', 'where missions are recorded', join(homedir(), 'foldback-missions'))
  .option('--rig <file>', 'rig file; without it the built-in rig (simulated)')
  .option('--serial <path>', 'serial port instead of the one in the rig file')
  .option('--seed <number>', "seed of the built-in rig's true parameters", whole(0, 2 ** 31), 1)
  .option('--no-window', 'open no window, only print the address')
  .option('--listen <address>', 'address to listen on', '127.0.0.1')
  .option(
    '--insecure',
    'allow listening on another address than loopback, without encryption: everyone on that network can read what passes',
    false,
  )
  .parse();

const fail = (text: string): never => {
  process.stderr.write(`${text}\n`);
  process.exit(1);
};

const start = async (options: StartOptions): Promise<void> => {
  if (!['127.0.0.1', 'localhost', '::1'].includes(options.listen) && !options.insecure)
    fail(
      `Listening on ${options.listen} lets others on the network reach the console, unencrypted. Add --insecure if that is meant.`,
    );
  const electronTrouble = options.shell === 'browser' ? null : whyNotElectron();
  if (options.shell === 'electron' && electronTrouble !== null)
    fail(`Electron cannot be started: ${electronTrouble}`);
  const consoleOptions = {
    rigFile: options.rig === undefined ? null : resolve(options.rig),
    serialPath: options.serial ?? null,
    missionsDir: resolve(options.missions),
    seed: options.seed,
  };
  if (options.shell !== 'browser' && electronTrouble === null) {
    process.stdout.write('Shell: Electron.\n');
    process.exit(await runElectron(consoleOptions));
  }

  const rendererDir = await ensureRenderer();
  const console_ = await forkConsole(consoleOptions).catch((error: Error) => fail(error.message));
  const shell = await startBrowserShell(console_, {
    rendererDir,
    address: options.listen,
    port: options.port,
  }).catch(async (error: NodeJS.ErrnoException) => {
    await console_.close();
    return fail(
      error.code === 'EADDRINUSE'
        ? `Port ${options.port} is in use by another program. Choose another with --port, or 0 for any free one.`
        : `Cannot listen on ${options.listen}:${options.port}: ${error.message}`,
    );
  });

  let ending = false;
  const end = async (code: number): Promise<void> => {
    if (ending) return;
    ending = true;
    await Promise.all([console_.close(), shell.close()]);
    process.exit(code);
  };
  process.on('SIGINT', () => void end(0));
  process.on('SIGTERM', () => void end(0));
  process.on('SIGHUP', () => void end(0));
  console_.onExit(() => {
    process.stderr.write(
      'The console process ended unexpectedly. The base stops by its own watchdog. Start Foldback again.\n',
    );
    void end(1);
  });

  const url = shell.url();
  if (options.shell === 'auto') process.stdout.write(`Shell: browser, because ${electronTrouble}\n`);
  process.stdout.write(`Foldback console: ${url}\n`);
  if (options.shell === 'auto' && options.window) process.stdout.write(`${openAppWindow(url)}\n`);
};

await start(command.opts<StartOptions>());
