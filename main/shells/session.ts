import { randomBytes, timingSafeEqual } from 'node:crypto';
import type { IncomingMessage } from 'node:http';

const SESSIONS_MAX = 16;
const KEYS_MAX = 16;

/** Keys that each open one session, once, and the sessions that were opened. */
export interface Sessions {
  /** A fresh key, valid for one exchange. */
  issueKey(): string;
  /** The cookie for a valid key; null for a wrong or a used one. */
  exchange(key: unknown): string | null;
  isOpen(request: IncomingMessage): boolean;
}

/** @param port distinguishes the consoles on one computer: a browser sends cookies to every port of an address. */
export const createSessions = (port: number): Sessions => {
  const name = `foldback_session_${port}`;
  const keys: Buffer[] = [];
  const sessions: Buffer[] = [];
  return {
    issueKey: () => {
      const key = randomBytes(24).toString('base64url');
      keys.push(Buffer.from(key));
      if (keys.length > KEYS_MAX) keys.shift();
      return key;
    },
    exchange: (key) => {
      if (typeof key !== 'string') return null;
      const found = keys.findIndex((one) => same(one, Buffer.from(key)));
      if (found < 0) return null;
      keys.splice(found, 1);
      const token = randomBytes(24).toString('base64url');
      sessions.push(Buffer.from(token));
      if (sessions.length > SESSIONS_MAX) sessions.shift();
      return `${name}=${token}; HttpOnly; SameSite=Strict; Path=/`;
    },
    isOpen: (request) => {
      const token = cookieOf(request, name);
      return token !== null && sessions.some((one) => same(one, Buffer.from(token)));
    },
  };
};

const cookieOf = (request: IncomingMessage, wanted: string): string | null => {
  for (const part of (request.headers.cookie ?? '').split(';')) {
    const [name, value] = part.trim().split('=');
    if (name === wanted && value !== undefined) return value;
  }
  return null;
};

const same = (a: Buffer, b: Buffer): boolean => a.length === b.length && timingSafeEqual(a, b);
