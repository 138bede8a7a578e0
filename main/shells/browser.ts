import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { Duplex } from 'node:stream';
import { WebSocketServer } from 'ws';
import type { ConsoleProcess } from './console-process.ts';
import { answerCookie, answerFile, readJson, refuse } from './http-answers.ts';
import { MESSAGE_MAX } from './message-limits.ts';
import { hostFor, isOurHost, isOurOrigin } from './own-address.ts';
import { createSessions } from './session.ts';
import { readStatic, readStill } from './static-files.ts';
import { createWindows } from './windows.ts';

export interface BrowserShellOptions {
  readonly rendererDir: string;
  /** How often each window is asked whether it is still there [ms]. */
  readonly pingEvery?: number;
}

export interface BrowserShell {
  readonly port: number;
  /** Address with a key that opens one session, once. */
  url(): string;
  windows(): number;
  close(): Promise<void>;
}

const WINDOWS_MAX = 12;
const CONNECTIONS_MAX = 100;
const PING_EVERY = 2000;
const STILLS = '/stills/';

/** A port that is ours, before anything else is started for it. */
export interface ListeningServer {
  readonly server: Server;
  readonly address: string;
  readonly port: number;
}

/**
 * Takes the port, 0 for any free one; until the console is served there it says so. `address` is 127.0.0.1 unless the
 * person asked for another. Rejects with the system's error.
 */
export const listen = (address: string, port: number): Promise<ListeningServer> =>
  new Promise((resolve, reject) => {
    const server = createServer((_, response) => refuse(response, 503, 'The console is starting.'));
    server.maxConnections = CONNECTIONS_MAX;
    server.once('error', reject);
    server.listen(port, address, () => {
      const bound = server.address();
      resolve({ server, address, port: typeof bound === 'object' && bound !== null ? bound.port : port });
    });
  });

/** The renderer over HTTP and the console over one WebSocket a window. */
export const serveConsole = (
  { server, address, port }: ListeningServer,
  console_: ConsoleProcess,
  options: BrowserShellOptions,
): BrowserShell => {
  const { rendererDir } = options;
  const sessions = createSessions(port);
  const windows = createWindows(console_, options.pingEvery ?? PING_EVERY);
  const upgrader = new WebSocketServer({ noServer: true, maxPayload: MESSAGE_MAX });

  const serve = async (request: IncomingMessage, response: ServerResponse): Promise<void> => {
    if (!isOurHost(request, address, port))
      return refuse(response, 421, 'This server answers to its own address only.');
    const path = (request.url ?? '/').split('?')[0] ?? '/';
    if (request.method === 'POST' && path === '/session') return openSession(request, response);
    if (request.method !== 'GET') return refuse(response, 405, 'Only GET is answered here.');
    const connect = `'self' ws://${request.headers.host}`;
    if (!path.startsWith(STILLS)) return answerFile(response, await readStatic(rendererDir, path), connect);
    if (!sessions.isOpen(request))
      return refuse(response, 403, 'Open the console with the address that it printed.');
    answerFile(response, await readStill(console_.missionFolder(), path.slice(STILLS.length)), connect);
  };

  const openSession = async (request: IncomingMessage, response: ServerResponse): Promise<void> => {
    if (!isOurOrigin(request)) return refuse(response, 403, 'Requests from other pages are refused.');
    const body = await readJson(request);
    if (body === null) return refuse(response, 413, 'The request is too large.');
    const cookie = sessions.exchange((body as { key?: unknown } | undefined)?.key);
    if (cookie !== null) return answerCookie(response, cookie);
    refuse(response, 403, 'The key is wrong or was used before. Take a new address from the console.');
  };

  const upgrade = (request: IncomingMessage, socket: Duplex, head: Buffer): void => {
    socket.on('error', () => socket.destroy());
    const allowed =
      request.url === '/console' &&
      isOurHost(request, address, port) &&
      isOurOrigin(request) &&
      sessions.isOpen(request);
    if (!allowed) cut(socket, '403 Forbidden');
    else if (windows.count() >= WINDOWS_MAX) cut(socket, '503 Service Unavailable');
    else upgrader.handleUpgrade(request, socket, head, (opened) => windows.admit(opened));
  };

  server.removeAllListeners('request');
  server.on('request', (request, response) => {
    serve(request, response).catch(() => refuse(response, 500, 'The request could not be answered.'));
  });
  server.on('upgrade', upgrade);
  return {
    port,
    url: () => `http://${hostFor(address, port)}/#key=${sessions.issueKey()}`,
    windows: () => windows.count(),
    close: () =>
      new Promise((done) => {
        windows.close();
        server.close(() => done());
        server.closeAllConnections();
      }),
  };
};

const cut = (socket: Duplex, status: string): void => {
  socket.end(`HTTP/1.1 ${status}\r\nConnection: close\r\n\r\n`);
};
