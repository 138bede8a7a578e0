import { isIP } from 'node:net';
import { homedir } from 'node:os';
import { join, resolve } from 'node:path';
import { Command, InvalidArgumentError, Option } from 'commander';
import type { ConsoleOptions } from './console/start.ts';
import { isLoopback } from './shells/own-address.ts';

/** What a person asked for when starting the console. */
export interface StartOptions {
  readonly shell: 'auto' | 'electron' | 'browser';
  readonly port: number;
  readonly missions: string;
  readonly rig?: string;
  readonly serial?: string;
  readonly window: boolean;
  /** An address of this computer. */
  readonly listen: string;
  readonly insecure: boolean;
  readonly seed: number;
}

/** The command line of `npm start`, and of the installed program. */
export const startCommand = (): Command =>
  new Command('foldback start')
    .description('Starts the operator console.')
    .addOption(
      new Option('--shell <shell>', 'where the screen is shown')
        .choices(['auto', 'electron', 'browser'])
        .default('auto'),
    )
    .option('--port <number>', 'port of the browser shell; 0 for any free one', whole(0, 65535), 0)
    .option('--missions <folder>', 'where missions are recorded', join(homedir(), 'foldback-missions'))
    .option('--rig <file>', 'rig file; without it the built-in rig (simulated)')
    .option(
      '--serial <path>',
      'serial port instead of the one in the rig file; without a rig file, where the built-in rig is served',
    )
    .option('--seed <number>', "seed of the built-in rig's true parameters", whole(0, 2 ** 31), 1)
    .option('--no-window', 'open no window, only print the address')
    .option('--listen <address>', 'address of this computer to listen on', listenable, '127.0.0.1')
    .option(
      '--insecure',
      'with --listen: let others on that network reach the console. Nothing is encrypted: whoever listens there sees the pictures and can take a session over',
      false,
    );

/** Why these options cannot be carried out, or null. */
export const refusedOptions = (options: StartOptions): string | null =>
  isLoopback(options.listen) || options.insecure
    ? null
    : `Listening on ${options.listen} lets others on that network reach the console, unencrypted. Add --insecure if that is meant.`;

export const consoleOptions = (options: StartOptions): ConsoleOptions => ({
  rigFile: options.rig === undefined ? null : resolve(options.rig),
  serialPath: options.serial ?? null,
  missionsDir: resolve(options.missions),
  seed: options.seed,
});

const whole =
  (low: number, high: number) =>
  (text: string): number => {
    const value = Number(text);
    if (text.trim() === '' || !Number.isInteger(value) || value < low || value > high)
      throw new InvalidArgumentError(`Allowed is a whole number from ${low} to ${high}.`);
    return value;
  };

/** One address, so that `Host` can be checked against it; "all addresses" has no name of its own to check. */
const listenable = (text: string): string => {
  if (text === 'localhost') return '127.0.0.1';
  if (isIP(text) === 0 || text === '0.0.0.0' || /^[0:]+$/.test(text))
    throw new InvalidArgumentError('Allowed is one IP address of this computer, for example 127.0.0.1.');
  return text;
};
