import { randomUUID } from 'node:crypto';
import type { WebSocket } from 'ws';
import type { ConsoleMessage } from '../../shared-model/contract/frame.ts';
import type { ConsoleProcess } from './console-process.ts';
import { createMessageLimits } from './message-limits.ts';

/** What waits unsent to one window before frames that may be missed are left out [bytes]. */
const BACKLOG_MAX = 1_000_000;

/** The windows that are connected over a WebSocket each. */
export interface Windows {
  count(): number;
  /** Joins a window to the console until its socket closes. */
  admit(socket: WebSocket): void;
  close(): void;
}

export const createWindows = (console_: ConsoleProcess, pingEvery: number): Windows => {
  const sockets = new Map<string, WebSocket>();

  const relay = (client: string, socket: WebSocket): void => {
    const judge = createMessageLimits();
    socket.on('message', (data, isBinary) => {
      const admission = judge(data as Buffer, isBinary, performance.now() / 1000);
      if (!admission.ok) return socket.close(admission.code, admission.why);
      const { id, request } = admission.message;
      void console_.request(client, request).then((answer) => send(socket, { kind: 'answer', id, answer }));
    });
  };

  console_.onMessage((client, message) => {
    const socket = sockets.get(client);
    // A window that does not keep up misses frames; it must not hold up the others.
    if (socket === undefined || (mayBeMissed(message) && socket.bufferedAmount > BACKLOG_MAX)) return;
    send(socket, message);
  });

  return {
    count: () => sockets.size,
    admit: (socket) => {
      const client = randomUUID();
      sockets.set(client, socket);
      const stopPing = endWhenHalfOpen(socket, pingEvery);
      relay(client, socket);
      socket.on('error', () => socket.terminate());
      socket.on('close', () => {
        stopPing();
        sockets.delete(client);
        console_.leave(client);
      });
      console_.join(client);
    },
    close: () => {
      for (const socket of sockets.values()) socket.terminate();
    },
  };
};

const send = (socket: WebSocket, message: object): void => {
  if (socket.readyState === socket.OPEN) socket.send(JSON.stringify(message));
};

const mayBeMissed = (message: ConsoleMessage): boolean =>
  message.kind === 'frame' && message.body === undefined;

/** A half-open socket must not keep a driver in its seat: whoever misses a whole round of pings is cut off. */
const endWhenHalfOpen = (socket: WebSocket, every: number): (() => void) => {
  let alive = true;
  socket.on('pong', () => {
    alive = true;
  });
  const timer = setInterval(() => {
    if (!alive) return socket.terminate();
    alive = false;
    socket.ping();
  }, every);
  return () => clearInterval(timer);
};
