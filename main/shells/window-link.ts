import { randomUUID } from 'node:crypto';
import type { IpcMain, IpcMainEvent, IpcMainInvokeEvent, WebContents } from 'electron';
import { type Answer, requestSchema } from '../../shared-model/contract/request.ts';
import { isOurs } from './app-protocol.ts';
import type { ConsoleProcess } from './console-process.ts';
import { IPC } from './ipc-names.ts';

/** The one window's place at the console. */
export interface WindowLink {
  /** The window is gone, frozen or asleep: its lease must not live on. It joins again by itself when it is back. */
  leave(): void;
}

const FOREIGN: Answer = { ok: false, code: 'foreign', text: 'Only the console window may ask for this.' };
const NOT_JOINED: Answer = {
  ok: false,
  code: 'not-joined',
  text: 'This window has not joined the console. Reload it.',
};

/** Relays between the window and the console; every message is checked for who sent it and what it says. */
export const linkWindow = (ipc: IpcMain, contents: WebContents, console_: ConsoleProcess): WindowLink => {
  let client: string | null = null;

  const isWindow = (event: IpcMainEvent | IpcMainInvokeEvent): boolean =>
    event.sender === contents &&
    event.senderFrame !== null &&
    event.senderFrame === contents.mainFrame &&
    isOurs(event.senderFrame.url);

  const leave = (): void => {
    if (client === null) return;
    console_.leave(client);
    client = null;
  };

  ipc.on(IPC.join, (event) => {
    if (!isWindow(event)) return;
    leave();
    client = randomUUID();
    console_.join(client);
  });
  ipc.handle(IPC.request, async (event, request: unknown): Promise<Answer> => {
    if (!isWindow(event)) return FOREIGN;
    if (client === null) return NOT_JOINED;
    const parsed = requestSchema.safeParse(request);
    if (!parsed.success)
      return { ok: false, code: 'bad-request', text: `Not a request: ${parsed.error.issues[0]?.message}` };
    return console_.request(client, parsed.data);
  });
  console_.onMessage((to, message) => {
    if (to === client && !contents.isDestroyed()) contents.send(IPC.message, message);
  });
  console_.onExit(() => {
    client = null;
    if (!contents.isDestroyed()) contents.send(IPC.gone);
  });
  return { leave };
};
