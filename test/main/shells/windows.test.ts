import { EventEmitter } from 'node:events';
import { describe, expect, it } from 'vitest';
import type { WebSocket } from 'ws';
import { createWindows } from '../../../main/shells/windows.ts';
import type { ConsoleFrame, ConsoleMessage } from '../../../shared-model/contract/frame.ts';
import { closeCode, freshFolder, heard, openWindow, shellOver } from './a-shell.ts';
import { consoleStandIn } from './console-stand-in.ts';

const start = async (pingEvery?: number) => {
  const console_ = consoleStandIn();
  const shell = await shellOver(console_, await freshFolder(), pingEvery);
  return { console_, shell };
};
const stop = { kind: 'stop' };

describe('a connected window', () => {
  it('gets the answer to its own request, by number', async () => {
    const { shell, console_ } = await start();
    const [one, other] = [await openWindow(shell), await openWindow(shell)];
    const answers = [heard(one, () => true), heard(other, () => true)];
    one.send(JSON.stringify({ id: 7, request: stop }));
    await answers[0];
    other.send(JSON.stringify({ id: 7, request: stop }));
    expect(await Promise.all(answers)).toEqual([
      { kind: 'answer', id: 7, answer: { ok: true, value: 1 } },
      { kind: 'answer', id: 7, answer: { ok: true, value: 2 } },
    ]);
    expect(console_.requests.map(({ client }) => client)).toEqual(console_.joined);
  });

  it('hears only what the console says to it', async () => {
    const { shell, console_ } = await start();
    const [one, other] = [await openWindow(shell), await openWindow(shell)];
    const messages = [heard(one, () => true), heard(other, () => true)];
    console_.say(console_.joined[1] ?? '', { kind: 'event', event: 2 } as unknown as ConsoleMessage);
    console_.say(console_.joined[0] ?? '', { kind: 'event', event: 1 } as unknown as ConsoleMessage);
    expect(await Promise.all(messages)).toEqual([
      { kind: 'event', event: 1 },
      { kind: 'event', event: 2 },
    ]);
  });

  it('leaves the console when it closes or its line is cut', async () => {
    const { shell, console_ } = await start();
    const [closed, cut] = [await openWindow(shell), await openWindow(shell)];
    closed.close();
    await expect.poll(() => console_.left).toEqual([console_.joined[0]]);
    cut.terminate();
    await expect.poll(() => console_.left).toEqual(console_.joined);
  });

  it('leaves the console when its line is half open: it answers no ping', async () => {
    const { shell, console_ } = await start(20);
    await openWindow(shell, { autoPong: false });
    await openWindow(shell);
    await expect.poll(() => console_.left).toEqual([console_.joined[0]]);
  });

  // Close codes: RFC 6455, 7.4.1.
  it.each<[string, number, string | Buffer]>([
    ['garbage', 1008, 'not json {'],
    ['an empty message', 1008, ''],
    ['null', 1008, 'null'],
    ['a request without a number', 1008, JSON.stringify({ request: stop })],
    ['a request numbered by text', 1008, JSON.stringify({ id: '1', request: stop })],
    ['bytes that are no text', 1003, Buffer.from([1, 2, 3])],
    [
      'a large request that carries no picture',
      1009,
      JSON.stringify({ id: 1, request: { kind: 'stop', x: 'x'.repeat(70_000) } }),
    ],
    [
      'a picture above 16 MB',
      1009,
      JSON.stringify({ id: 1, request: { kind: 'log-waypoint', picture: 'A'.repeat(17_000_000) } }),
    ],
  ])('is cut off after %s, and the console sees none of it', async (_, code, sent) => {
    const { shell, console_ } = await start();
    const socket = await openWindow(shell);
    const closed = closeCode(socket);
    socket.send(sent);
    expect(await closed).toBe(code);
    await expect.poll(() => console_.left).toEqual(console_.joined);
    expect(console_.requests).toEqual([]);
  });

  it('may log a waypoint with a picture of 10 MB', async () => {
    const { shell, console_ } = await start();
    const socket = await openWindow(shell);
    const answer = heard(socket, () => true);
    socket.send(
      JSON.stringify({ id: 1, request: { kind: 'log-waypoint', picture: 'A'.repeat(10_000_000) } }),
    );
    await answer;
    expect(console_.requests).toHaveLength(1);
  });

  it('is cut off when it floods the console', async () => {
    const { shell, console_ } = await start();
    const socket = await openWindow(shell);
    const closed = closeCode(socket);
    for (let id = 0; id < 3000; id++) socket.send(JSON.stringify({ id, request: stop }));
    expect(await closed).toBe(1008);
    expect(console_.requests.length).toBeLessThan(3000);
  });
});

it('a window that does not keep up misses plain frames, never events or the shape of the body', () => {
  const console_ = consoleStandIn();
  const sent: unknown[] = [];
  const slow = Object.assign(new EventEmitter(), {
    OPEN: 1,
    readyState: 1,
    bufferedAmount: 2_000_000,
    send: (text: string) => sent.push(JSON.parse(text)),
    ping: () => {},
  });
  createWindows(console_, 60_000).admit(slow as unknown as WebSocket);
  const messages = [
    { kind: 'frame', seq: 1 },
    { kind: 'frame', seq: 2, body: { points: [], laid: 0 } },
    { kind: 'event', event: 3 },
  ];
  for (const message of messages) console_.say(console_.joined[0] ?? '', message as unknown as ConsoleFrame);
  expect(sent).toEqual(messages.slice(1));
  slow.emit('close');
});
