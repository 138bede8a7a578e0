import { expect, test } from 'vitest';
import { initialState, receive } from '../../renderer/store/console-store.ts';
import type { ConsoleFrame, ConsoleHello } from '../../shared-model/contract/frame.ts';
import type { MissionEvent } from '../../shared-model/mission/event.ts';

const tip = {
  position: [0, 0, 2] as [number, number, number],
  quaternion: [1, 0, 0, 0] as [number, number, number, number],
};
const extended = (seq: number, length: number): MissionEvent => ({
  kind: 'extended',
  seq,
  at: seq,
  time: '2026-01-01T00:00:00Z',
  length,
  tip,
});

test('the mission on screen is the fold of hello’s events and those that follow, each once', () => {
  const hello = {
    kind: 'hello',
    role: 'driver',
    rig: { name: 'r' },
    events: [extended(0, 1), extended(1, 2)],
  } as unknown as ConsoleHello;
  let state = receive(initialState, hello, 0);
  state = receive(state, { kind: 'event', event: extended(1, 2) }, 1);
  state = receive(state, { kind: 'event', event: extended(2, 3) }, 1);
  expect(state.role).toBe('driver');
  expect(state.mission.length).toBe(3);
});

test('the body and the outlook stay on screen when a frame leaves them out', () => {
  const frame = { kind: 'frame', seq: 1 } as ConsoleFrame;
  const body = { points: [0, 0, 0], laid: 1 };
  let state = receive(initialState, { ...frame, body }, 5);
  state = receive(state, { ...frame, seq: 2 }, 6);
  expect(state.body).toBe(body);
  expect(state.framedAt).toBe(6);
});
