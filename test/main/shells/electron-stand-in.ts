/**
 * The few parts of Electron that the shell touches, as faithful as its documentation lets them be: events are events,
 * handlers are called with Electron's arguments, and `app.quit` runs through `before-quit`.
 */
import { EventEmitter } from 'node:events';

type Handler = (...args: never[]) => unknown;

class App extends EventEmitter {
  isPackaged = false;
  firstInstance = true;
  sandboxed = false;
  readonly exitCodes: number[] = [];
  quits = 0;
  whenReady = (): Promise<void> => Promise.resolve();
  enableSandbox(): void {
    this.sandboxed = true;
  }
  requestSingleInstanceLock(): boolean {
    return this.firstInstance;
  }
  quit(): void {
    let prevented = false;
    this.emit('before-quit', {
      preventDefault: () => {
        prevented = true;
      },
    });
    if (!prevented) this.quits++;
  }
  exit(code: number): void {
    this.exitCodes.push(code);
  }
}

class IpcMain extends EventEmitter {
  readonly handlers = new Map<string, Handler>();
  handle(channel: string, handler: Handler): void {
    this.handlers.set(channel, handler);
  }
  invoke(channel: string, event: object, ...args: unknown[]): unknown {
    return (this.handlers.get(channel) as (...all: unknown[]) => unknown)(event, ...args);
  }
}

export class WebContents extends EventEmitter {
  readonly sent: unknown[][] = [];
  readonly mainFrame = { url: 'foldback://console/index.html' };
  reloads = 0;
  crashes = 0;
  openHandler: (() => { action: string }) | null = null;
  send(...message: unknown[]): void {
    this.sent.push(message);
  }
  isDestroyed = (): boolean => false;
  reload(): void {
    this.reloads++;
  }
  forcefullyCrashRenderer(): void {
    this.crashes++;
    this.emit('render-process-gone', {}, { reason: 'crashed' });
  }
  setWindowOpenHandler(handler: () => { action: string }): void {
    this.openHandler = handler;
  }
}

export class BrowserWindow extends EventEmitter {
  static readonly all: BrowserWindow[] = [];
  readonly webContents = new WebContents();
  readonly options: { webPreferences: Record<string, unknown> };
  readonly loaded: string[] = [];
  shown = false;
  destroyed = false;
  constructor(options: { webPreferences: Record<string, unknown> }) {
    super();
    this.options = options;
    BrowserWindow.all.push(this);
    app.emit('web-contents-created', {}, this.webContents);
  }
  loadURL(address: string): Promise<void> {
    this.loaded.push(address);
    this.emit('ready-to-show');
    return Promise.resolve();
  }
  show(): void {
    this.shown = true;
  }
  isMinimized = (): boolean => false;
  restore(): void {}
  focus(): void {
    this.shown = true;
  }
  isDestroyed(): boolean {
    return this.destroyed;
  }
  destroy(): void {
    this.destroyed = true;
    this.emit('closed');
  }
}

class Session extends EventEmitter {
  requestHandler: Handler | null = null;
  checkHandler: Handler | null = null;
  deviceHandler: Handler | null = null;
  beforeRequest: Handler | null = null;
  setPermissionRequestHandler(handler: Handler): void {
    this.requestHandler = handler;
  }
  setPermissionCheckHandler(handler: Handler): void {
    this.checkHandler = handler;
  }
  setDevicePermissionHandler(handler: Handler): void {
    this.deviceHandler = handler;
  }
  readonly webRequest = {
    onBeforeRequest: (handler: Handler): void => {
      this.beforeRequest = handler;
    },
  };
}

/** A console process that starts at once, answers "ok" and closes when asked. */
export class UtilityProcess extends EventEmitter {
  readonly sent: { kind: string; id?: number }[] = [];
  postMessage(message: { kind: string; id?: number }): void {
    this.sent.push(message);
    if (message.kind === 'start') this.say({ kind: 'started', missionFolder: '/missions/one' });
    if (message.kind === 'request')
      this.say({ kind: 'answer', id: message.id, answer: { ok: true }, missionFolder: '/missions/one' });
    if (message.kind === 'close') this.say({ kind: 'closed' });
  }
  say(message: object): void {
    queueMicrotask(() => this.emit('message', message));
  }
  kill(): boolean {
    return true;
  }
}

export const app = new App();
export const ipcMain = new IpcMain();
export const session = { defaultSession: new Session() };
export const powerMonitor = new EventEmitter();
export const blockers: string[] = [];
export const powerSaveBlocker = { start: (kind: string) => blockers.push(kind) };
export const errorBoxes: string[][] = [];
export const dialog = { showErrorBox: (...text: string[]) => errorBoxes.push(text) };
export const schemes: { scheme: string; privileges: Record<string, boolean> }[] = [];
export const protocolHandlers = new Map<string, (request: Request) => Promise<Response>>();
export const protocol = {
  registerSchemesAsPrivileged: (registered: typeof schemes) => schemes.push(...registered),
  handle: (scheme: string, handler: (request: Request) => Promise<Response>) =>
    protocolHandlers.set(scheme, handler),
};
export const forked: { path: string; process: UtilityProcess }[] = [];
let canFork = true;
export const refuseToFork = (): void => {
  canFork = false;
};
export const utilityProcess = {
  fork: (path: string): UtilityProcess => {
    const process = new UtilityProcess();
    forked.push({ path, process });
    queueMicrotask(() => process.emit(canFork ? 'spawn' : 'exit'));
    return process;
  },
};

export const exposed: Record<string, unknown> = {};
export const contextBridge = {
  exposeInMainWorld: (name: string, api: unknown) => {
    exposed[name] = api;
  },
};
class IpcRenderer extends EventEmitter {
  readonly sent: unknown[][] = [];
  invoke = (..._: unknown[]): Promise<unknown> => Promise.resolve({ ok: true });
  send(...message: unknown[]): void {
    this.sent.push(message);
  }
}
export const ipcRenderer = new IpcRenderer();
