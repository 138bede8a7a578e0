import { randomUUID } from 'node:crypto';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import { type WebSocket, WebSocketServer } from 'ws';
import type { ConsoleProcess } from './console-process.ts';
import { createSessions } from './session.ts';
import { contentSecurityPolicy, readStatic, readStill, type StaticFile } from './static-files.ts';

export interface BrowserShellOptions {
  readonly rendererDir: string;
  /** 127.0.0.1 unless the person asked for another. */
  readonly address: string;
  /** 0 for any free port. */
  readonly port: number;
}

export interface BrowserShell {
  readonly port: number;
  /** Address with a key that opens one session, once. */
  url(): string;
  close(): Promise<void>;
}

const CONNECTIONS_MAX = 12;
/** A waypoint's picture, in base64, with its request around it. */
const MESSAGE_MAX = 16 * 1024 * 1024;
const BODY_MAX = 4096;
/** Requests one window may send in a second; a held control sends 20. */
const RATE_MAX = 200;
const PING_EVERY = 2000;

/** The renderer over HTTP and the console over one WebSocket a window. Rejects when the port cannot be had. */
export const startBrowserShell = (
  console_: ConsoleProcess,
  options: BrowserShellOptions,
): Promise<BrowserShell> => {
  const sessions = createSessions();
  const sockets = new Map<string, WebSocket>();
  const server = createServer((request, response) => {
    void serve(request, response).catch(() => refuse(response, 500, 'The request could not be answered.'));
  });
  const upgrader = new WebSocketServer({ noServer: true, maxPayload: MESSAGE_MAX });
  let port = options.port;

  const hostsOf = (): string[] => [
    `127.0.0.1:${port}`,
    `localhost:${port}`,
    ...(options.address === '127.0.0.1' ? [] : [`${options.address}:${port}`]),
  ];
  const isOurHost = (request: IncomingMessage): boolean => hostsOf().includes(request.headers.host ?? '');
  const isOurOrigin = (request: IncomingMessage): boolean =>
    request.headers.origin === `http://${request.headers.host}`;

  const serve = async (request: IncomingMessage, response: ServerResponse): Promise<void> => {
    if (!isOurHost(request)) return refuse(response, 421, 'This server answers to its own address only.');
    const path = (request.url ?? '/').split('?')[0] ?? '/';
    if (request.method === 'POST' && path === '/session') return openSession(request, response);
    if (request.method !== 'GET') return refuse(response, 405, 'Only GET is answered here.');
    if (path.startsWith('/stills/')) {
      if (!sessions.isOpen(request))
        return refuse(response, 403, 'Open the console with the address that it printed.');
      return answerFile(response, await readStill(console_.missionFolder(), path.slice('/stills/'.length)));
    }
    return answerFile(response, await readStatic(options.rendererDir, path));
  };

  const answerFile = (response: ServerResponse, file: StaticFile | null): void => {
    if (file === null) {
      refuse(response, 404, 'There is no such file.');
      return;
    }
    response.writeHead(200, {
      ...headers(`'self' ws://127.0.0.1:${port} ws://localhost:${port}`),
      'Content-Type': file.type,
      'Content-Length': file.bytes.length,
    });
    response.end(file.bytes);
  };

  const openSession = async (request: IncomingMessage, response: ServerResponse): Promise<void> => {
    if (!isOurOrigin(request)) return refuse(response, 403, 'Requests from other pages are refused.');
    const body = await readBody(request);
    if (body === null) return refuse(response, 413, 'The request is too large.');
    const cookie = sessions.exchange(keyIn(body));
    if (cookie === null)
      return refuse(
        response,
        403,
        'The key is wrong or was used before. Take the address from the console again.',
      );
    response.writeHead(204, { ...headers("'self'"), 'Set-Cookie': cookie });
    response.end();
  };

  const admit = (socket: WebSocket): void => {
    const client = randomUUID();
    let alive = true;
    let [second, count] = [0, 0];
    sockets.set(client, socket);
    const ping = setInterval(() => {
      // A half-open socket must not keep a driver in its seat.
      if (!alive) return socket.terminate();
      alive = false;
      socket.ping();
    }, PING_EVERY);
    socket.on('pong', () => {
      alive = true;
    });
    socket.on('message', (data, isBinary) => {
      const now = Math.floor(performance.now() / 1000);
      if (now !== second) [second, count] = [now, 0];
      if (isBinary || ++count > RATE_MAX) return socket.close(1008, 'too many or not text');
      const message = parseJson(String(data)) as { id?: unknown; request?: unknown } | null;
      if (typeof message?.id !== 'number') return socket.close(1008, 'not a request');
      const { id } = message;
      void console_.request(client, message.request).then((answer) => {
        if (socket.readyState === socket.OPEN) socket.send(JSON.stringify({ kind: 'answer', id, answer }));
      });
    });
    socket.on('error', () => socket.terminate());
    socket.on('close', () => {
      clearInterval(ping);
      sockets.delete(client);
      console_.leave(client);
    });
    console_.join(client);
  };

  console_.onMessage((client, message) => {
    const socket = sockets.get(client);
    // A window that does not keep up misses frames; it must not hold up the others.
    if (
      socket?.readyState !== 1 ||
      (message.kind === 'frame' && message.body === undefined && socket.bufferedAmount > 1_000_000)
    )
      return;
    socket.send(JSON.stringify(message));
  });

  server.on('upgrade', (request, socket, head) => {
    const allowed =
      isOurHost(request) && isOurOrigin(request) && request.url === '/console' && sessions.isOpen(request);
    if (!allowed || sockets.size >= CONNECTIONS_MAX)
      return void socket.end('HTTP/1.1 403 Forbidden\r\nConnection: close\r\n\r\n');
    upgrader.handleUpgrade(request, socket, head, admit);
  });

  return listening(server, options).then((bound) => {
    port = bound;
    return {
      port,
      url: () =>
        `http://${options.address === '0.0.0.0' ? '127.0.0.1' : options.address}:${port}/#key=${sessions.issueKey()}`,
      close: () =>
        new Promise((done) => {
          for (const socket of sockets.values()) socket.terminate();
          server.close(() => done());
          server.closeAllConnections();
        }),
    };
  });
};

const listening = (server: Server, options: BrowserShellOptions): Promise<number> =>
  new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(options.port, options.address, () => {
      const address = server.address();
      resolve(typeof address === 'object' && address !== null ? address.port : options.port);
    });
  });

const headers = (connect: string): Record<string, string> => ({
  'Content-Security-Policy': contentSecurityPolicy(connect),
  'X-Content-Type-Options': 'nosniff',
  'Referrer-Policy': 'no-referrer',
  'Cross-Origin-Opener-Policy': 'same-origin',
  'Cross-Origin-Resource-Policy': 'same-origin',
  'Cache-Control': 'no-store',
});

const refuse = (response: ServerResponse, status: number, text: string): void => {
  if (response.headersSent) return void response.end();
  response.writeHead(status, { ...headers("'self'"), 'Content-Type': 'text/plain; charset=utf-8' });
  response.end(`${text}\n`);
};

const readBody = async (request: IncomingMessage): Promise<string | null> => {
  const parts: Buffer[] = [];
  let size = 0;
  for await (const part of request) {
    size += (part as Buffer).length;
    if (size > BODY_MAX) return null;
    parts.push(part as Buffer);
  }
  return Buffer.concat(parts).toString('utf8');
};

const parseJson = (text: string): unknown => {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
};

const keyIn = (body: string): unknown => (parseJson(body) as { key?: unknown } | null)?.key;
