import { fork } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import type { ConsoleMessage } from '../../shared-model/contract/frame.ts';
import type { Answer } from '../../shared-model/contract/request.ts';
import type { Channel, FromConsole, ToConsole } from '../console/channel.ts';
import type { ConsoleOptions } from '../console/start.ts';

/** The console process as a shell sees it. */
export interface ConsoleProcess {
  request(client: string, request: unknown): Promise<Answer>;
  join(client: string): void;
  leave(client: string): void;
  onMessage(listener: (client: string, message: ConsoleMessage) => void): void;
  /** The process ended without being asked to. */
  onExit(listener: () => void): void;
  missionFolder(): string;
  /** Ends motion, closes the log; resolves when the process is done or the deadline has passed. */
  close(): Promise<void>;
}

const CLOSE_DEADLINE = 5000;
const GONE: Answer = {
  ok: false,
  code: 'console-gone',
  text: 'The console process has ended. Start Foldback again.',
};

/** Starts the console behind a channel; rejects with the reason when it cannot start. */
export const attachConsole = (
  channel: Channel<ToConsole, FromConsole>,
  kill: () => void,
  options: ConsoleOptions,
): Promise<ConsoleProcess> =>
  new Promise((resolve, reject) => {
    const waiting = new Map<number, (answer: Answer) => void>();
    const messageListeners: ((client: string, message: ConsoleMessage) => void)[] = [];
    const exitListeners: (() => void)[] = [];
    let nextId = 1;
    let folder = '';
    let gone = false;
    let closing: (() => void) | null = null;

    channel.onMessage((message) => {
      if (message.kind === 'message')
        for (const listener of messageListeners) listener(message.client, message.message);
      else if (message.kind === 'answer') {
        folder = message.missionFolder;
        waiting.get(message.id)?.(message.answer);
        waiting.delete(message.id);
      } else if (message.kind === 'started') {
        folder = message.missionFolder;
        resolve(handle);
      } else if (message.kind === 'failed') {
        reject(new Error(message.text));
        channel.send({ kind: 'close' });
      } else closing?.();
    });
    channel.onGone(() => {
      gone = true;
      for (const answer of waiting.values()) answer(GONE);
      waiting.clear();
      reject(new Error('The console process ended before it had started.'));
      if (closing !== null) closing();
      else for (const listener of exitListeners) listener();
    });

    const handle: ConsoleProcess = {
      request: (client, request) =>
        new Promise((done) => {
          if (gone) return done(GONE);
          const id = nextId++;
          waiting.set(id, done);
          channel.send({ kind: 'request', id, client, request });
        }),
      join: (client) => channel.send({ kind: 'join', client }),
      leave: (client) => channel.send({ kind: 'leave', client }),
      onMessage: (listener) => messageListeners.push(listener),
      onExit: (listener) => exitListeners.push(listener),
      missionFolder: () => folder,
      close: () =>
        new Promise((done) => {
          if (gone) return done();
          const timer = setTimeout(() => {
            kill();
            done();
          }, CLOSE_DEADLINE);
          closing = () => {
            clearTimeout(timer);
            done();
          };
          channel.send({ kind: 'close' });
        }),
    };
    channel.send({ kind: 'start', options });
  });

/** The console as a child process of the browser shell; TypeScript runs there as it does here. */
export const forkConsole = (options: ConsoleOptions): Promise<ConsoleProcess> => {
  const entry = fileURLToPath(new URL('../console/process.mjs', import.meta.url));
  // Standard output is the shell's alone: it carries the address.
  const child = fork(entry, { stdio: ['ignore', 2, 2, 'ipc'], execArgv: [] });
  child.on('error', () => child.kill('SIGKILL'));
  const channel: Channel<ToConsole, FromConsole> = {
    send: (message) => {
      if (child.connected) child.send(message, () => {});
    },
    onMessage: (listener) => child.on('message', (message) => listener(message as FromConsole)),
    onGone: (listener) => child.on('exit', listener),
  };
  return attachConsole(channel, () => child.kill('SIGKILL'), options);
};
