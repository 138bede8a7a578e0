import type { ConsoleProcess } from '../../../main/shells/console-process.ts';
import type { ConsoleMessage } from '../../../shared-model/contract/frame.ts';
import type { Answer } from '../../../shared-model/contract/request.ts';

/** A console that notes what reaches it and answers every request with "ok". */
export interface ConsoleStandIn extends ConsoleProcess {
  readonly joined: string[];
  readonly left: string[];
  readonly requests: { readonly client: string; readonly request: unknown }[];
  /** Sends a message to one window, as the console does. */
  say(client: string, message: ConsoleMessage): void;
}

export const consoleStandIn = (missionFolder = '/nowhere'): ConsoleStandIn => {
  const listeners: ((client: string, message: ConsoleMessage) => void)[] = [];
  const standIn: ConsoleStandIn = {
    joined: [],
    left: [],
    requests: [],
    request: (client, request): Promise<Answer> => {
      standIn.requests.push({ client, request });
      return Promise.resolve({ ok: true, value: standIn.requests.length });
    },
    join: (client) => standIn.joined.push(client),
    leave: (client) => standIn.left.push(client),
    onMessage: (listener) => listeners.push(listener),
    onExit: () => {},
    missionFolder: () => missionFolder,
    close: () => Promise.resolve(),
    say: (client, message) => {
      for (const listener of listeners) listener(client, message);
    },
  };
  return standIn;
};
