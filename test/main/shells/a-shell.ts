import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { type IncomingHttpHeaders, request } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';
import { WebSocket } from 'ws';
import { type BrowserShell, listen, serveConsole } from '../../../main/shells/browser.ts';
import type { ConsoleProcess } from '../../../main/shells/console-process.ts';

/** The smallest JPEG file: start and end of image. */
export const PICTURE = Buffer.from([0xff, 0xd8, 0xff, 0xd9]);
export const SCREEN = '<!doctype html><title>Foldback</title>';

export const freshFolder = async (): Promise<string> => {
  const folder = await mkdtemp(join(tmpdir(), 'foldback-shell-'));
  onTestFinished(() => rm(folder, { recursive: true, force: true }));
  return folder;
};

/** A folder with the renderer's index.html and a picture of a mission, and beside them a file that is nobody's business. */
export const screenAndStills = async () => {
  const folder = await freshFolder();
  await mkdir(join(folder, 'screen'));
  await mkdir(join(folder, 'mission', 'stills'), { recursive: true });
  await writeFile(join(folder, 'screen', 'index.html'), SCREEN);
  await writeFile(join(folder, 'mission', 'stills', '001-ab12.jpg'), PICTURE);
  await writeFile(join(folder, 'secret.json'), '{"secret":true}');
  await writeFile(join(folder, 'mission', 'secret.jpg'), PICTURE);
  return { screen: join(folder, 'screen'), mission: join(folder, 'mission') };
};

/** A browser shell over this console, closed after the test. */
export const shellOver = async (
  console_: ConsoleProcess,
  rendererDir: string,
  pingEvery?: number,
): Promise<BrowserShell> => {
  const shell = serveConsole(await listen('127.0.0.1', 0), console_, {
    rendererDir,
    ...(pingEvery === undefined ? {} : { pingEvery }),
  });
  onTestFinished(() => shell.close());
  return shell;
};

export interface Reply {
  readonly status: number;
  readonly headers: IncomingHttpHeaders;
  readonly body: Buffer;
}

/** One request with exactly this path and these headers; `fetch` would tidy both. */
export const ask = (
  port: number,
  path: string,
  how: { method?: string; headers?: Record<string, string>; body?: string } = {},
): Promise<Reply> =>
  new Promise((resolve, reject) => {
    const { method = 'GET', headers = {}, body } = how;
    const sent = request({ host: '127.0.0.1', port, path, method, headers, agent: false }, (response) => {
      const parts: Buffer[] = [];
      response.on('data', (part: Buffer) => parts.push(part));
      response.on('end', () =>
        resolve({ status: response.statusCode ?? 0, headers: response.headers, body: Buffer.concat(parts) }),
      );
    });
    sent.on('error', reject);
    sent.end(body);
  });

export const keyOf = (shell: BrowserShell): string => new URL(shell.url()).hash.slice('#key='.length);

export const exchange = (port: number, key: unknown, headers: Record<string, string> = {}): Promise<Reply> =>
  ask(port, '/session', {
    method: 'POST',
    headers: { Origin: `http://127.0.0.1:${port}`, ...headers },
    body: JSON.stringify({ key }),
  });

/** The `Cookie` of a session that a fresh key has opened. */
export const sessionOf = async (shell: BrowserShell): Promise<string> => {
  const reply = await exchange(shell.port, keyOf(shell));
  return (reply.headers['set-cookie']?.[0] ?? '').split(';')[0] ?? '';
};

/** Opens a window's socket; resolves with it, or with the status of the refusal. */
export const connect = (
  port: number,
  headers: Record<string, string>,
  options: { path?: string; autoPong?: boolean } = {},
): Promise<WebSocket | number> =>
  new Promise((resolve) => {
    const { path = '/console', autoPong = true } = options;
    const socket = new WebSocket(`ws://127.0.0.1:${port}${path}`, { headers, autoPong });
    socket.on('open', () => resolve(socket));
    socket.on('unexpected-response', (_, response) => resolve(response.statusCode ?? 0));
    socket.on('error', () => {});
    onTestFinished(() => socket.terminate());
  });

/** A window with a session of its own. */
export const openWindow = async (
  shell: BrowserShell,
  options: { autoPong?: boolean } = {},
): Promise<WebSocket> => {
  const socket = await connect(
    shell.port,
    { Origin: `http://127.0.0.1:${shell.port}`, Cookie: await sessionOf(shell) },
    options,
  );
  if (typeof socket === 'number') throw new Error(`the window was refused with ${socket}`);
  return socket;
};

/** The close code that the shell ends this window with. */
export const closeCode = (socket: WebSocket): Promise<number> =>
  new Promise((resolve) => socket.once('close', resolve));

/** The first message that fits. */
export const heard = <T>(socket: WebSocket, fits: (message: T) => boolean): Promise<T> =>
  new Promise((resolve) => {
    const listen = (data: Buffer): void => {
      const message = JSON.parse(data.toString()) as T;
      if (!fits(message)) return;
      socket.off('message', listen);
      resolve(message);
    };
    socket.on('message', listen);
  });
