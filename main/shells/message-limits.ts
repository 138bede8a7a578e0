/** A waypoint's picture, in base64, with its request around it. */
export const MESSAGE_MAX = 16 * 1024 * 1024;
/** Any other request. */
const PLAIN_MAX = 64 * 1024;
/** Requests one window may send in a second; a held control sends 20. */
const RATE_MAX = 200;
const BYTES_MAX = 2 * MESSAGE_MAX;

/** One request of a window, with the number that its answer will carry. */
export interface NumberedRequest {
  readonly id: number;
  readonly request: unknown;
}

export type Admission =
  | { readonly ok: true; readonly message: NumberedRequest }
  /** WebSocket close code and reason (RFC 6455, 7.4.1). */
  | { readonly ok: false; readonly code: number; readonly why: string };

/** Judges what one window sends; `now` in whole or part seconds. One judge a window. */
export const createMessageLimits = (): ((data: Buffer, isBinary: boolean, now: number) => Admission) => {
  let [second, count, bytes] = [Number.NaN, 0, 0];
  return (data, isBinary, now) => {
    if (Math.floor(now) !== second) [second, count, bytes] = [Math.floor(now), 0, 0];
    count++;
    bytes += data.length;
    if (isBinary) return no(1003, 'only text is read here');
    if (count > RATE_MAX || bytes > BYTES_MAX) return no(1008, 'too much at once');
    const message = numberedRequest(data);
    if (message === null) return no(1008, 'not a request');
    if (data.length > PLAIN_MAX && kindOf(message.request) !== 'log-waypoint')
      return no(1009, 'only a picture may be this large');
    return { ok: true, message };
  };
};

const no = (code: number, why: string): Admission => ({ ok: false, code, why });

const numberedRequest = (data: Buffer): NumberedRequest | null => {
  try {
    const { id, request } = JSON.parse(data.toString('utf8')) as { id?: unknown; request?: unknown };
    return typeof id === 'number' && Number.isSafeInteger(id) ? { id, request } : null;
  } catch {
    return null;
  }
};

const kindOf = (request: unknown): unknown => (request as { kind?: unknown } | null | undefined)?.kind;
