import type { Channel, FromConsole, ToConsole } from './channel.ts';
import type { RunningConsole } from './console.ts';
import { StartError, startConsole } from './start.ts';

/** Closing the log and stopping the rig may take this long before the process ends all the same [ms]. */
const CLOSE_DEADLINE = 4000;

/** Electron's utility process has this port; a plain child process talks over its IPC channel. */
interface ParentPort {
  postMessage(message: unknown): void;
  on(event: 'message', listener: (event: { data: unknown }) => void): void;
}

/** Runs the console for whichever shell started this process; when the shell goes away, motion ends and the log is closed. */
const serve = (channel: Channel<FromConsole, ToConsole>): void => {
  let console_: RunningConsole | null = null;
  let ending = false;

  const end = async (): Promise<void> => {
    if (ending) return;
    ending = true;
    setTimeout(() => process.exit(1), CLOSE_DEADLINE).unref();
    await console_?.close();
    channel.send({ kind: 'closed' });
    setTimeout(() => process.exit(0), 20);
  };

  channel.onGone(() => void end());
  channel.onMessage((message) => {
    if (message.kind === 'start') {
      startConsole(message.options, (client, sent) =>
        channel.send({ kind: 'message', client, message: sent }),
      ).then(
        (started) => {
          console_ = started;
          channel.send({ kind: 'started', missionFolder: started.missionFolder() });
        },
        (error: unknown) => {
          const text =
            error instanceof StartError
              ? error.message
              : `The console could not start: ${error instanceof Error ? error.stack : String(error)}`;
          channel.send({ kind: 'failed', text });
        },
      );
    } else if (message.kind === 'close') void end();
    else if (console_ === null) return;
    else if (message.kind === 'join') console_.join(message.client);
    else if (message.kind === 'leave') console_.leave(message.client);
    else {
      const running = console_;
      void running
        .request(message.client, message.request)
        .catch((error: unknown) => {
          process.stderr.write(`request failed: ${error instanceof Error ? error.stack : String(error)}\n`);
          return {
            ok: false as const,
            code: 'internal',
            text: 'The console met an internal error; the request was not carried out.',
          };
        })
        .then((answer) =>
          channel.send({ kind: 'answer', id: message.id, answer, missionFolder: running.missionFolder() }),
        );
    }
  });
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
  return {
    send: (message) => {
      if (process.connected) process.send?.(message);
    },
    onMessage: (listener) => process.on('message', (message) => listener(message as ToConsole)),
    onGone: (listener) => process.on('disconnect', listener),
  };
};

serve(channelOfThisProcess());
