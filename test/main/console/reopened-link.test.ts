import { expect, test } from 'vitest';
import { createConsole } from '../../../main/console/console.ts';
import type { RigLink } from '../../../main/rig/rig-link.ts';
import { withTrials } from '../../../main/rig/trials.ts';
import type { ConsoleFrame, LinkStatus, RigSummary } from '../../../shared-model/contract/frame.ts';
import { STILL } from '../../../shared-model/contract/request.ts';
import { builtInRig } from '../rig/built-in-rig.ts';
import { createVirtualClock } from '../virtual-clock.ts';
import { memoryRecorder } from './a-console.ts';

/** A console on a line that is closed and opened again in no time, where a test says so. */
const start = () => {
  const clock = createVirtualClock();
  let since = 0;
  const status = (): LinkStatus => ({ state: 'open', port: 'p', cycleRate: 20, errors: 0, since });
  const link: RigLink = {
    status,
    read: async (now) => {
      const good = (value: number) => ({ quality: 'good', value, at: now }) as const;
      const muscles = { muscle_1_pressure: good(0), muscle_2_pressure: good(0), muscle_3_pressure: good(0) };
      return { body_pressure: good(9000), tail_payout: good(0), ...muscles };
    },
    write: async () => ({ outcome: 'confirmed' }),
    stop: async () => {},
    reconnect: () => {},
    close: async () => {},
  };
  let frame: ConsoleFrame | null = null;
  const rig = builtInRig();
  const console_ = createConsole({
    tried: withTrials(rig, '/nowhere', '2026-01-01T00:00:00Z'),
    summary: { name: rig.name } as RigSummary,
    link,
    recorder: memoryRecorder([]),
    clock,
    mission: 'm',
    software: 's',
    missionsDir: '/nowhere',
    simulateFault: null,
    send: (_, message) => {
      if (message.kind === 'frame') frame = message;
    },
    complain: (text) => {
      throw new Error(text);
    },
  });
  console_.join('driver');
  return {
    clock,
    console_,
    hold: () => frame?.hold.state,
    press: (seq: number) =>
      console_.request('driver', { kind: 'hold', press: 1, seq, wish: { ...STILL, pressure: 1 } }),
    reopen: () => {
      since++;
    },
  };
};

test('a line closed and opened again between two ticks burns the press under way', async () => {
  const bench = start();
  await bench.clock.advanceTo(0.2);
  await bench.press(0);
  await bench.clock.advanceTo(0.3);
  expect(bench.hold()).toBe('held');
  bench.reopen();
  await bench.press(1);
  await bench.clock.advanceTo(0.4);
  expect(bench.hold()).toBe('burnt');
});
