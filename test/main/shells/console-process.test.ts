import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { Channel, FromConsole, ToConsole } from '../../../main/console/channel.ts';
import { attachConsole } from '../../../main/shells/console-process.ts';

const OPTIONS = { rigFile: null, serialPath: null, missionsDir: '/missions', seed: 1 };

/** The pipe to a console process that does only what the test says. */
const pipe = () => {
  const sent: ToConsole[] = [];
  let hear: (message: FromConsole) => void = () => {};
  let gone: () => void = () => {};
  const channel: Channel<ToConsole, FromConsole> = {
    send: (message) => sent.push(message),
    onMessage: (listener) => {
      hear = listener;
    },
    onGone: (listener) => {
      gone = listener;
    },
  };
  const kill = vi.fn();
  return {
    sent,
    kill,
    attached: attachConsole(channel, kill, OPTIONS),
    say: (message: FromConsole) => hear(message),
    die: () => gone(),
  };
};
const started = async () => {
  const one = pipe();
  one.say({ kind: 'started', missionFolder: '/missions/one' });
  return { ...one, console_: await one.attached };
};

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

describe('the console process, seen from its shell', () => {
  it('is started with the options and tells where it records', async () => {
    const { sent, console_ } = await started();
    expect([sent, console_.missionFolder()]).toEqual([
      [{ kind: 'start', options: OPTIONS }],
      '/missions/one',
    ]);
  });

  it('does not start when it says why not, and is told to end', async () => {
    const { attached, say, sent } = pipe();
    say({ kind: 'failed', text: 'rig.yaml:3: limits: missing' });
    await expect(attached).rejects.toThrow('rig.yaml:3: limits: missing');
    expect(sent.at(-1)).toEqual({ kind: 'close' });
  });

  it('does not start when it dies first', async () => {
    const { attached, die } = pipe();
    die();
    await expect(attached).rejects.toThrow('ended before it had started');
  });

  it('answers requests in whatever order it likes', async () => {
    const { console_, say } = await started();
    const answers = [console_.request('a', 1), console_.request('b', 2)];
    const missionFolder = '/missions/two';
    say({ kind: 'answer', id: 2, answer: { ok: true, value: 'second' }, missionFolder });
    say({ kind: 'answer', id: 1, answer: { ok: true, value: 'first' }, missionFolder });
    expect(await Promise.all(answers)).toMatchObject([{ value: 'first' }, { value: 'second' }]);
    expect(console_.missionFolder()).toBe(missionFolder);
  });

  it('leaves no request without an answer when it dies, and tells the shell', async () => {
    const { console_, die } = await started();
    const exit = vi.fn();
    console_.onExit(exit);
    const waiting = console_.request('a', {});
    die();
    expect(await waiting).toMatchObject({ ok: false, code: 'console-gone' });
    expect(await console_.request('a', {})).toMatchObject({ ok: false, code: 'console-gone' });
    expect(exit).toHaveBeenCalledOnce();
  });

  it('is closed when it says so, and that is no unexpected end', async () => {
    const { console_, say, die, kill } = await started();
    const exit = vi.fn();
    console_.onExit(exit);
    const closing = console_.close();
    say({ kind: 'closed' });
    die();
    await closing;
    await vi.runAllTimersAsync();
    expect([exit.mock.calls, kill.mock.calls]).toEqual([[], []]);
  });

  it('is ended by force when it does not close', async () => {
    const { console_, kill } = await started();
    const closing = console_.close();
    await vi.runAllTimersAsync();
    await closing;
    expect(kill).toHaveBeenCalledOnce();
  });
});
