import { beforeEach, expect, it, vi } from 'vitest';
import type { ConsoleApi } from '../../../shared-model/contract/api.ts';
import type * as StandIn from './electron-stand-in.ts';

let electron: typeof StandIn;
let api: ConsoleApi;

beforeEach(async () => {
  vi.resetModules();
  electron = await import('./electron-stand-in.ts');
  vi.doMock('electron', () => electron);
  await import('../../../main/shells/preload.ts');
  api = electron.exposed.foldback as ConsoleApi;
});

it('the page gets the console and nothing else', () => {
  expect(Object.keys(electron.exposed)).toEqual(['foldback']);
  expect(Object.keys(api).sort()).toEqual(['onConnection', 'request', 'shell', 'subscribe']);
});

it('the page joins when it begins to listen, once', () => {
  expect(electron.ipcRenderer.sent).toEqual([]);
  api.subscribe(() => {});
  api.subscribe(() => {});
  expect(electron.ipcRenderer.sent).toEqual([['console-join']]);
});

it('the page hears messages without the event that carried them, until it stops listening', () => {
  const listener = vi.fn();
  const stop = api.subscribe(listener);
  electron.ipcRenderer.emit('console-message', { sender: 'secret' }, { kind: 'event' });
  stop();
  electron.ipcRenderer.emit('console-message', { sender: 'secret' }, { kind: 'frame' });
  expect(listener.mock.calls).toEqual([[{ kind: 'event' }]]);
});

it('a request that cannot be delivered is answered "disconnected", never rejected', async () => {
  electron.ipcRenderer.invoke = () => Promise.reject(new Error('the other side is gone'));
  expect(await api.request({ kind: 'stop' })).toMatchObject({ ok: false, code: 'disconnected' });
});

it('the page is told at once and afterwards when the console is gone', () => {
  const [early, late] = [vi.fn(), vi.fn()];
  api.onConnection(early);
  electron.ipcRenderer.emit('console-gone', {});
  api.onConnection(late);
  expect([early.mock.calls, late.mock.calls]).toEqual([[[true], [false]], [[false]]]);
});
