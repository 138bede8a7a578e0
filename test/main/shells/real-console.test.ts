import { describe, expect, it, onTestFinished } from 'vitest';
import type { WebSocket } from 'ws';
import { forkConsole } from '../../../main/shells/console-process.ts';
import type { ConsoleFrame, ConsoleHello } from '../../../shared-model/contract/frame.ts';
import {
  type Answer,
  type ConsoleRequest,
  STILL,
  type Wish,
} from '../../../shared-model/contract/request.ts';
import { freshFolder, heard, openWindow, shellOver } from './a-shell.ts';

/** The console process with the built-in rig, behind a browser shell. */
const start = async () => {
  const folder = await freshFolder();
  const console_ = await forkConsole({ rigFile: null, serialPath: null, missionsDir: folder, seed: 1 });
  onTestFinished(() => console_.close());
  return shellOver(console_, folder);
};

/** A window, what it was told on joining, and how it asks. */
const join = async (shell: Awaited<ReturnType<typeof start>>) => {
  const socket = await openWindow(shell);
  let lastId = 0;
  const ask = async (request: ConsoleRequest): Promise<Answer> => {
    const id = ++lastId;
    const answered = heard<{ kind: 'answer'; id: number; answer: Answer }>(
      socket,
      (message) => message.kind === 'answer' && message.id === id,
    );
    socket.send(JSON.stringify({ id, request }));
    return (await answered).answer;
  };
  return { socket, ask };
};

const roleOf = async (socket: WebSocket, role: ConsoleHello['role']): Promise<ConsoleHello> =>
  heard<ConsoleHello>(socket, (message) => message.kind === 'hello' && message.role === role);
const frameWhere = (socket: WebSocket, fits: (frame: ConsoleFrame) => boolean): Promise<ConsoleFrame> =>
  heard<ConsoleFrame>(socket, (message) => message.kind === 'frame' && fits(message));

const grow: Wish = { ...STILL, motion: { kind: 'grow' }, tipSpeed: 0.1 };

describe('windows on one console', () => {
  it('drive from the first only; the others watch, and may stop it', async () => {
    const shell = await start();
    const driver = await join(shell);
    const watcher = await join(shell);
    await frameWhere(driver.socket, (frame) => frame.link.state === 'open');
    expect(await watcher.ask({ kind: 'hold', press: 1, seq: 0, wish: grow })).toMatchObject({
      ok: false,
      code: 'watching',
    });
    expect(await driver.ask({ kind: 'hold', press: 1, seq: 0, wish: grow })).toEqual({ ok: true });
    expect(await watcher.ask({ kind: 'stop' })).toEqual({ ok: true });
    expect(await driver.ask({ kind: 'hold', press: 1, seq: 1, wish: grow })).toMatchObject({
      code: 'not-held',
    });
  });

  it('pass the wheel on request, and the former driver then watches', async () => {
    const shell = await start();
    const [first, second] = [await join(shell), await join(shell)];
    const told = [roleOf(first.socket, 'watcher'), roleOf(second.socket, 'driver')];
    expect(await second.ask({ kind: 'take-over' })).toEqual({ ok: true });
    await Promise.all(told);
    expect(await first.ask({ kind: 'hold', press: 1, seq: 0, wish: grow })).toMatchObject({
      code: 'watching',
    });
  });

  it('stop what moves when the driving one is cut off while it holds a control', async () => {
    const shell = await start();
    const [driver, watcher] = [await join(shell), await join(shell)];
    await frameWhere(watcher.socket, (frame) => frame.link.state === 'open');
    let seq = 0;
    const holding = setInterval(
      () => void driver.ask({ kind: 'hold', press: 1, seq: seq++, wish: grow }),
      50,
    );
    onTestFinished(() => clearInterval(holding));
    await frameWhere(watcher.socket, (frame) => frame.drive.permitted > 0);
    clearInterval(holding);
    driver.socket.terminate();
    await frameWhere(watcher.socket, (frame) => frame.hold.state !== 'held' && frame.drive.permitted === 0);
  });

  it('get a reason for a request that is none', async () => {
    const { ask } = await join(await start());
    for (const request of [
      null,
      7,
      'grow',
      {},
      { kind: 'fly' },
      { kind: 'hold', press: 1, seq: 0, wish: { tipSpeed: 'fast' } },
    ])
      expect(await ask(request as unknown as ConsoleRequest)).toMatchObject({
        ok: false,
        code: 'bad-request',
      });
  });
});
