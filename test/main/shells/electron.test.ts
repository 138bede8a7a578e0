import { beforeEach, describe, expect, it, vi } from 'vitest';
import type * as StandIn from './electron-stand-in.ts';

let electron: typeof StandIn;

/** Electron's main process with the console process and the window as Electron would give them. */
const start = async () => {
  await import('../../../main/shells/electron.ts');
  await vi.waitFor(() => expect(electron.BrowserWindow.all[0]?.loaded).toHaveLength(1));
  const window = electron.BrowserWindow.all[0]!;
  const contents = window.webContents;
  const fromPage = { sender: contents, senderFrame: contents.mainFrame };
  const { process: console_ } = electron.forked[0]!;
  return { window, contents, fromPage, console_ };
};
const joined = async () => {
  const one = await start();
  electron.ipcMain.emit('console-join', one.fromPage);
  return one;
};
const kinds = (console_: StandIn.UtilityProcess): string[] => console_.sent.map(({ kind }) => kind);

beforeEach(async () => {
  vi.resetModules();
  vi.spyOn(process, 'on').mockReturnThis();
  electron = await import('./electron-stand-in.ts');
  vi.doMock('electron', () => electron);
});

describe('the window', () => {
  it('is sandboxed and gives its page nothing of Node', async () => {
    const { window } = await start();
    expect(electron.app.sandboxed).toBe(true);
    expect(window.options.webPreferences).toMatchObject({
      sandbox: true,
      contextIsolation: true,
      nodeIntegration: false,
      webviewTag: false,
    });
  });

  it('shows our own page from our own secure scheme', async () => {
    const { window } = await start();
    expect(electron.schemes).toEqual([
      { scheme: 'foldback', privileges: { standard: true, secure: true, supportFetchAPI: true } },
    ]);
    expect([window.loaded, window.shown]).toEqual([['foldback://console/index.html'], true]);
  });

  it.each(['will-navigate', 'will-frame-navigate', 'will-redirect', 'will-attach-webview'])(
    'prevents %s, in whatever contents there are',
    async (event) => {
      const { contents } = await start();
      const preventDefault = vi.fn();
      contents.emit(event, { preventDefault, url: 'https://elsewhere.example/' });
      expect(preventDefault).toHaveBeenCalledOnce();
      expect(contents.openHandler?.()).toEqual({ action: 'deny' });
    },
  );

  it('is the only one: a second start brings it to the front', async () => {
    const { window } = await start();
    window.shown = false;
    electron.app.emit('second-instance');
    expect(window.shown).toBe(true);
  });

  it('does not open in a second instance', async () => {
    electron.app.firstInstance = false;
    await import('../../../main/shells/electron.ts');
    expect([electron.app.quits, electron.forked]).toEqual([1, []]);
  });

  it('joins the console as a new client each time its page begins to listen', async () => {
    const { console_, fromPage } = await joined();
    electron.ipcMain.emit('console-join', fromPage);
    expect(kinds(console_)).toEqual(['start', 'join', 'leave', 'join']);
  });

  it.each<[string, (one: Awaited<ReturnType<typeof start>>) => void]>([
    ['its page crashes', ({ contents }) => contents.emit('render-process-gone', {}, { reason: 'crashed' })],
    ['its page freezes', ({ contents }) => contents.emit('unresponsive')],
    [
      'its page is loaded again',
      ({ contents }) => contents.emit('did-start-navigation', { isMainFrame: true, isSameDocument: false }),
    ],
    ['the computer goes to sleep', () => electron.powerMonitor.emit('suspend')],
    ['it is closed', ({ window }) => window.emit('closed')],
  ])('leaves the console when %s, which ends its lease', async (_, happen) => {
    const one = await joined();
    happen(one);
    expect(kinds(one.console_).at(-1)).toBe('leave');
  });

  it('loads its page again after a crash, a freeze and a sleep', async () => {
    const { contents } = await joined();
    contents.emit('render-process-gone', {}, { reason: 'oom' });
    contents.emit('unresponsive');
    electron.powerMonitor.emit('resume');
    expect(contents.reloads).toBe(3);
  });

  it('gives up, with a remedy, when its page keeps crashing', async () => {
    const { contents, window } = await joined();
    for (let crash = 0; crash < 4; crash++) contents.emit('render-process-gone', {}, { reason: 'crashed' });
    expect([contents.reloads, window.destroyed]).toEqual([3, true]);
    expect(electron.errorBoxes[0]?.[1]).toContain('browser shell');
  });
});

describe('what the page asks of the console', () => {
  const stop = { kind: 'stop' };

  it('is relayed and answered', async () => {
    const { fromPage, console_ } = await joined();
    expect(await electron.ipcMain.invoke('console-request', fromPage, stop)).toEqual({ ok: true });
    expect(console_.sent.at(-1)).toMatchObject({ kind: 'request', request: stop });
  });

  it.each<[string, (contents: StandIn.WebContents) => object]>([
    ['another window', () => ({ sender: {}, senderFrame: { url: 'foldback://console/index.html' } })],
    [
      'a frame within the page',
      (sender) => ({ sender, senderFrame: { url: 'foldback://console/index.html' } }),
    ],
    ['a frame that is gone', (sender) => ({ sender, senderFrame: null })],
  ])('is refused to %s', async (_, event) => {
    const { contents, console_ } = await joined();
    const before = console_.sent.length;
    expect(await electron.ipcMain.invoke('console-request', event(contents), stop)).toMatchObject({
      code: 'foreign',
    });
    electron.ipcMain.emit('console-join', event(contents));
    expect(console_.sent).toHaveLength(before);
  });

  it.each([
    'https://elsewhere.example/',
    'foldback://console.elsewhere/',
    'file:///index.html',
    'about:blank',
  ])('is refused when the page has become %s', async (url) => {
    const { contents, fromPage } = await joined();
    contents.mainFrame.url = url;
    expect(await electron.ipcMain.invoke('console-request', fromPage, stop)).toMatchObject({
      code: 'foreign',
    });
  });

  it.each([null, 'stop', {}, { kind: 'fly' }, { kind: 'stop', now: true }])(
    'is refused with a reason when it is no request: %j',
    async (request) => {
      const { fromPage, console_ } = await joined();
      const before = console_.sent.length;
      expect(await electron.ipcMain.invoke('console-request', fromPage, request)).toMatchObject({
        code: 'bad-request',
      });
      expect(console_.sent).toHaveLength(before);
    },
  );

  it('hears the console, and only as its present client', async () => {
    const { contents, console_ } = await joined();
    const { client } = console_.sent.at(-1) as unknown as { client: string };
    console_.say({ kind: 'message', client, message: { kind: 'event' } });
    console_.say({ kind: 'message', client: 'the one before', message: { kind: 'hello' } });
    await vi.waitFor(() => expect(contents.sent).toEqual([['console-message', { kind: 'event' }]]));
  });
});

describe('the console process', () => {
  it('that cannot be started is said so, and no window opens', async () => {
    electron.refuseToFork();
    await import('../../../main/shells/electron.ts');
    await vi.waitFor(() => expect(electron.app.exitCodes).toEqual([1]));
    expect(electron.errorBoxes[0]?.[1]).toContain('could not be started');
    expect(electron.BrowserWindow.all).toEqual([]);
  });

  it('is closed before Electron ends', async () => {
    const { console_ } = await joined();
    electron.app.emit('window-all-closed');
    expect([kinds(console_).at(-1), electron.app.quits]).toEqual(['close', 0]);
    await vi.waitFor(() => expect(electron.app.quits).toBe(1));
  });

  it('that ends unexpectedly is said so, and ends the program', async () => {
    const { console_ } = await joined();
    console_.emit('exit', 1);
    expect(electron.errorBoxes[0]?.[1]).toContain('watchdog');
    expect(electron.app.exitCodes).toEqual([1]);
  });
});

describe('the page may', () => {
  const request = (permission: string, requestingUrl: string, mediaTypes?: string[], isMainFrame = true) => {
    let answer: boolean | null = null;
    const handler = electron.session.defaultSession.requestHandler as unknown as (...args: unknown[]) => void;
    const callback = (granted: boolean): void => {
      answer = granted;
    };
    handler({}, permission, callback, { requestingUrl, isMainFrame, ...(mediaTypes ? { mediaTypes } : {}) });
    return answer;
  };
  const check = (permission: string, origin: string, mediaType?: string): unknown => {
    const handler = electron.session.defaultSession.checkHandler as unknown as (
      ...args: unknown[]
    ) => unknown;
    return handler(null, permission, origin, { isMainFrame: true, ...(mediaType ? { mediaType } : {}) });
  };
  const page = 'foldback://console/index.html';

  it('use a camera', async () => {
    await start();
    expect([request('media', page, ['video']), check('media', 'foldback://console/', 'video')]).toEqual([
      true,
      true,
    ]);
  });

  it('use no microphone, with or without a camera', async () => {
    await start();
    expect([request('media', page, ['audio']), request('media', page, ['video', 'audio'])]).toEqual([
      false,
      false,
    ]);
    expect([request('media', page, []), request('media', page), check('media', page, 'audio')]).toEqual([
      false,
      false,
      false,
    ]);
  });

  it.each(['https://elsewhere.example/', 'foldback://elsewhere/', 'foldbackx://console/', 'null', ''])(
    'not lend the camera to %s',
    async (origin) => {
      await start();
      expect([request('media', origin, ['video']), check('media', origin, 'video')]).toEqual([false, false]);
    },
  );

  it('not lend the camera to a frame within it', async () => {
    await start();
    expect(request('media', page, ['video'], false)).toBe(false);
  });

  it.each([
    'geolocation',
    'notifications',
    'serial',
    'usb',
    'hid',
    'midi',
    'openExternal',
    'clipboard-read',
    'fileSystem',
    'display-capture',
    'pointerLock',
    'unknown',
  ])('not use %s', async (permission) => {
    await start();
    expect([request(permission, page, ['video']), check(permission, page, 'video')]).toEqual([false, false]);
  });

  it.each<[string, boolean]>([
    ['foldback://console/assets/index.js', true],
    ['data:image/png;base64,AA==', true],
    ['blob:foldback://console/1', true],
    ['blob:https://elsewhere.example/1', false],
    ['https://elsewhere.example/x.js', false],
    ['http://127.0.0.1/', false],
    ['file:///etc/passwd', false],
    ['foldback://elsewhere/x', false],
    ['ws://127.0.0.1/', false],
  ])('load %s: %s', async (url, loads) => {
    await start();
    const answer = vi.fn();
    (electron.session.defaultSession.beforeRequest as unknown as (...args: unknown[]) => void)(
      { url },
      answer,
    );
    expect(answer).toHaveBeenCalledWith({ cancel: !loads });
  });

  it('save no file', async () => {
    await start();
    const preventDefault = vi.fn();
    electron.session.defaultSession.emit('will-download', { preventDefault });
    expect(preventDefault).toHaveBeenCalledOnce();
  });
});
