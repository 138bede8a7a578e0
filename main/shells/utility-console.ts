import { join } from 'node:path';
import { type UtilityProcess, utilityProcess } from 'electron';
import type { Channel, FromConsole, ToConsole } from '../console/channel.ts';
import type { ConsoleOptions } from '../console/start.ts';
import { attachConsole, type ConsoleProcess } from './console-process.ts';

/** The console as a process of its own under Electron; `folder` is where the bundles lie. */
export const forkUtilityConsole = (options: ConsoleOptions, folder: string): Promise<ConsoleProcess> => {
  const child = utilityProcess.fork(join(folder, 'console-process.js'), [], {
    serviceName: 'Foldback console',
    stdio: 'inherit',
  });
  return attachConsole(channelTo(child), () => void child.kill(), options);
};

const channelTo = (child: UtilityProcess): Channel<ToConsole, FromConsole> => {
  // Messages sent before the process has begun are kept by Electron and delivered then.
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
