import type { IncomingMessage } from 'node:http';
import { isIPv6 } from 'node:net';

const LOOPBACK = ['127.0.0.1', '::1', 'localhost'];

export const isLoopback = (address: string): boolean => LOOPBACK.includes(address);

/** The `Host` that a browser sends for an address and port. */
export const hostFor = (address: string, port: number): string =>
  `${isIPv6(address) ? `[${address}]` : address}:${port}`;

/**
 * Whether a request was meant for this server. A page elsewhere whose name was made to point here (DNS rebinding)
 * arrives with its own name in `Host`.
 */
export const isOurHost = (request: IncomingMessage, address: string, port: number): boolean => {
  const names = isLoopback(address) ? [address, 'localhost'] : [address];
  return names.some((name) => request.headers.host === hostFor(name, port));
};

/** Whether a page of this very server sent the request. A missing `Origin` is a foreign one. */
export const isOurOrigin = (request: IncomingMessage): boolean =>
  request.headers.origin === `http://${request.headers.host}`;
