import type { ConsoleApi } from '../../shared-model/contract/api.ts';
import type { ConsoleMessage } from '../../shared-model/contract/frame.ts';
import type { Answer } from '../../shared-model/contract/request.ts';

const RETRY_FIRST = 300;
const RETRY_MOST = 3000;
const DISCONNECTED: Answer = {
  ok: false,
  code: 'disconnected',
  text: 'The console cannot be reached from this window. What was moving has stopped.',
};

type ServerMessage =
  | ConsoleMessage
  | { readonly kind: 'answer'; readonly id: number; readonly answer: Answer };

/** The console over one WebSocket; opened again by itself, with the hand neutral first. */
export const createBrowserApi = (page: Window): ConsoleApi => {
  const listeners = new Set<(message: ConsoleMessage) => void>();
  const connectionListeners = new Set<(connected: boolean) => void>();
  const waiting = new Map<number, (answer: Answer) => void>();
  let socket: WebSocket | null = null;
  let nextId = 1;
  let retry = RETRY_FIRST;
  let connected = false;

  const tell = (now: boolean): void => {
    connected = now;
    for (const listener of connectionListeners) listener(now);
  };

  const connect = (): void => {
    const scheme = page.location.protocol === 'https:' ? 'wss' : 'ws';
    const opened = new WebSocket(`${scheme}://${page.location.host}/console`);
    socket = opened;
    opened.onopen = () => {
      retry = RETRY_FIRST;
      tell(true);
    };
    opened.onmessage = (event) => {
      const message = JSON.parse(String(event.data)) as ServerMessage;
      if (message.kind !== 'answer') {
        for (const listener of listeners) listener(message);
        return;
      }
      waiting.get(message.id)?.(message.answer);
      waiting.delete(message.id);
    };
    opened.onclose = () => {
      for (const answer of waiting.values()) answer(DISCONNECTED);
      waiting.clear();
      tell(false);
      setTimeout(connect, retry);
      retry = Math.min(RETRY_MOST, 2 * retry);
    };
  };

  void openSession(page).finally(connect);
  return {
    shell: 'browser',
    request: (request) =>
      new Promise((resolve) => {
        if (socket?.readyState !== WebSocket.OPEN) return resolve(DISCONNECTED);
        const id = nextId++;
        waiting.set(id, resolve);
        socket.send(JSON.stringify({ id, request }));
      }),
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    onConnection: (listener) => {
      connectionListeners.add(listener);
      listener(connected);
      return () => connectionListeners.delete(listener);
    },
  };
};

/** Exchanges the key of the address for a session, once, and takes it out of the address and the history. */
const openSession = async (page: Window): Promise<void> => {
  const key = new URLSearchParams(page.location.hash.slice(1)).get('key');
  if (key === null) return;
  page.history.replaceState(null, '', page.location.pathname);
  await fetch('./session', {
    method: 'POST',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({ key }),
  }).catch(() => {});
};
