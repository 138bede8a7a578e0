import { join } from 'node:path';
import { type UtilityProcess, utilityProcess } from 'electron';
import type { Channel, FromConsole, ToConsole } from '../console/channel.ts';
import type { ConsoleOptions } from '../console/start.ts';
import { attachConsole, type ConsoleProcess } from './console-process.ts';

/**
 * The console as a process of its own under Electron; `folder` is where the bundles lie. Rejects with the reason when
 * it cannot start.
 */
export const forkUtilityConsole = async (
  options: ConsoleOptions,
  folder: string,
): Promise<ConsoleProcess> => {
  const child = utilityProcess.fork(join(folder, 'console-process.js'), [], {
    serviceName: 'Foldback console',
    stdio: 'inherit',
  });
  await spawned(child);
  return attachConsole(channelTo(child), () => void child.kill(), options);
};

const spawned = (child: UtilityProcess): Promise<void> =>
  new Promise((resolve, reject) => {
    child.once('spawn', resolve);
    child.once('exit', () => reject(new Error('The console process could not be started.')));
  });

const channelTo = (child: UtilityProcess): Channel<ToConsole, FromConsole> => {
  let running = true;
  child.on('exit', () => {
    running = false;
  });
  return {
    send: (message) => {
      if (running) child.postMessage(message);
    },
    onMessage: (listener) => child.on('message', (message) => listener(message as FromConsole)),
    onGone: (listener) => child.on('exit', listener),
  };
};
