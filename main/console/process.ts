import type { Answer } from '../../shared-model/contract/request.ts';
import type { Channel, FromConsole, ToConsole } from './channel.ts';
import type { RunningConsole } from './console.ts';
import { type ConsoleOptions, StartError, startConsole } from './start.ts';

/** Closing the log and stopping the rig may take this long before the process ends all the same [ms]. */
const CLOSE_DEADLINE = 4000;
/** A shell that stalls misses frames; what it has not taken must not fill this process's memory. */
const FRAMES_WAITING_MAX = 50;
const INTERNAL: Answer = {
  ok: false,
  code: 'internal',
  text: 'The console met an internal error; the request was not carried out.',
};

/** Electron's utility process has this port; a plain child process talks over its IPC channel. */
interface ParentPort {
  postMessage(message: unknown): void;
  on(event: 'message', listener: (event: { data: unknown }) => void): void;
}

/** Runs the console for whichever shell started this process; when the shell goes away, motion ends and the log is closed. */
const serve = (channel: Channel<FromConsole, ToConsole>): void => {
  let console_: RunningConsole | null = null;
  let starting: Promise<void> = Promise.resolve();
  let ending = false;

  const end = async (): Promise<void> => {
    if (ending) return;
    ending = true;
    setTimeout(() => process.exit(1), CLOSE_DEADLINE).unref();
    await starting;
    await console_?.close().catch((error: unknown) => complain('closing failed', error));
    channel.send({ kind: 'closed' });
    setTimeout(() => process.exit(0), 20);
  };

  const start = (options: ConsoleOptions): Promise<void> =>
    startConsole(options, (client, sent) => channel.send({ kind: 'message', client, message: sent })).then(
      (started) => {
        console_ = started;
        channel.send({ kind: 'started', missionFolder: started.missionFolder() });
      },
      (error: unknown) => {
        if (!(error instanceof StartError)) complain('starting failed', error);
        const text = error instanceof Error ? error.message : String(error);
        channel.send({ kind: 'failed', text });
      },
    );

  const answer = (running: RunningConsole, id: number, client: string, request: unknown): Promise<void> =>
    running
      .request(client, request)
      .catch((error: unknown): Answer => {
        complain('a request failed', error);
        return INTERNAL;
      })
      .then((given) =>
        channel.send({ kind: 'answer', id, answer: given, missionFolder: running.missionFolder() }),
      );

  channel.onGone(() => void end());
  channel.onMessage((message) => {
    if (message.kind === 'start') starting = start(message.options);
    else if (message.kind === 'close') void end();
    else if (console_ === null) return;
    else if (message.kind === 'join') console_.join(message.client);
    else if (message.kind === 'leave') console_.leave(message.client);
    else void answer(console_, message.id, message.client, message.request);
  });
  // The terminal may be closed; that must not end what holds the machine.
  process.stderr.on('error', () => {});
  // A signal to the whole group reaches this process too; only the shell decides when it ends.
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => {});
};

const channelOfThisProcess = (): Channel<FromConsole, ToConsole> => {
  const { parentPort } = process as unknown as { parentPort?: ParentPort };
  if (parentPort !== undefined)
    return {
      send: (message) => parentPort.postMessage(message),
      onMessage: (listener) => parentPort.on('message', (event) => listener(event.data as ToConsole)),
      // Electron ends the utility process with its parent.
      onGone: () => {},
    };
  let waiting = 0;
  return {
    send: (message) => {
      if (!process.connected || (waiting > FRAMES_WAITING_MAX && mayBeMissed(message))) return;
      waiting++;
      process.send?.(message, undefined, undefined, () => waiting--);
    },
    onMessage: (listener) => process.on('message', (message) => listener(message as ToConsole)),
    onGone: (listener) => process.on('disconnect', listener),
  };
};

const mayBeMissed = (message: FromConsole): boolean =>
  message.kind === 'message' && message.message.kind === 'frame' && message.message.body === undefined;

const complain = (what: string, error: unknown): void => {
  process.stderr.write(`${what}: ${error instanceof Error ? error.stack : String(error)}\n`);
};

serve(channelOfThisProcess());
