import type { IncomingMessage, ServerResponse } from 'node:http';
import { contentSecurityPolicy, type StaticFile } from './static-files.ts';

const BODY_MAX = 4096;

export const answerFile = (response: ServerResponse, file: StaticFile | null, connect: string): void => {
  if (file === null) {
    refuse(response, 404, 'There is no such file.');
    return;
  }
  response.writeHead(200, {
    ...headers(connect),
    'Content-Type': file.type,
    'Content-Length': file.bytes.length,
  });
  response.end(file.bytes);
};

export const answerCookie = (response: ServerResponse, cookie: string): void => {
  response.writeHead(204, { ...headers("'self'"), 'Set-Cookie': cookie });
  response.end();
};

export const refuse = (response: ServerResponse, status: number, text: string): void => {
  if (response.headersSent) return void response.end();
  // Whatever the refused request still has to send is not worth reading.
  response.writeHead(status, {
    ...headers("'self'"),
    'Content-Type': 'text/plain; charset=utf-8',
    Connection: 'close',
  });
  response.end(`${text}\n`);
};

/** The JSON that a request carries: undefined when it is none, null when it is too large. */
export const readJson = async (request: IncomingMessage): Promise<unknown> => {
  const parts: Buffer[] = [];
  let size = 0;
  for await (const part of request) {
    size += (part as Buffer).length;
    if (size > BODY_MAX) return null;
    parts.push(part as Buffer);
  }
  try {
    return JSON.parse(Buffer.concat(parts).toString('utf8')) ?? undefined;
  } catch {
    return undefined;
  }
};

const headers = (connect: string): Record<string, string> => ({
  'Content-Security-Policy': contentSecurityPolicy(connect),
  'X-Content-Type-Options': 'nosniff',
  'Referrer-Policy': 'no-referrer',
  'Cross-Origin-Opener-Policy': 'same-origin',
  'Cross-Origin-Resource-Policy': 'same-origin',
  'Cache-Control': 'no-store',
});
