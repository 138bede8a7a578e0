import { contextBridge, type IpcRendererEvent, ipcRenderer } from 'electron';
import type { ConsoleApi } from '../../shared-model/contract/api.ts';
import type { ConsoleMessage } from '../../shared-model/contract/frame.ts';
import type { Answer } from '../../shared-model/contract/request.ts';
import { IPC } from './ipc-names.ts';

const DISCONNECTED: Answer = {
  ok: false,
  code: 'disconnected',
  text: 'The console cannot be reached from this window. What was moving has stopped.',
};

let joined = false;
let connected = true;

/** All that the page gets; each listener is wrapped, so that no IPC event object reaches it. */
const api: ConsoleApi = {
  shell: 'electron',
  request: (request) =>
    (ipcRenderer.invoke(IPC.request, request) as Promise<Answer>).catch(() => DISCONNECTED),
  subscribe: (listener) => {
    const hear = (_: IpcRendererEvent, message: ConsoleMessage): void => listener(message);
    ipcRenderer.on(IPC.message, hear);
    // The first listener is told who it is; joining sooner would lose the greeting.
    if (!joined) ipcRenderer.send(IPC.join);
    joined = true;
    return () => void ipcRenderer.off(IPC.message, hear);
  },
  onConnection: (listener) => {
    const hear = (): void => listener(false);
    ipcRenderer.on(IPC.gone, hear);
    listener(connected);
    return () => void ipcRenderer.off(IPC.gone, hear);
  },
};
ipcRenderer.on(IPC.gone, () => {
  connected = false;
});

contextBridge.exposeInMainWorld('foldback', api);
