import { describe, expect, test } from 'vitest';
import { readPad } from '../../renderer/drive/gamepad.ts';
import { createHand, type HeldPart } from '../../renderer/drive/hand.ts';
import type { ConsoleRequest } from '../../shared-model/contract/request.ts';

const GROW: HeldPart = { motion: { kind: 'grow' } };
const LEFT: HeldPart = { steer: { kind: 'bend', right: -1, down: 0 } };

const bench = () => {
  const sent: ConsoleRequest[] = [];
  let renew: (() => void) | null = null;
  const hand = createHand({
    send: (request) => void sent.push(request),
    tipSpeed: () => 0.2,
    repeat: (run) => {
      renew = run;
      return () => {
        renew = null;
      };
    },
    changed: () => {},
  });
  return { hand, sent, renews: () => renew !== null, tick: () => renew?.() };
};
const kinds = (sent: readonly ConsoleRequest[]): string[] =>
  sent.map((request) =>
    request.kind === 'hold'
      ? `hold ${request.press}.${request.seq}`
      : request.kind === 'release'
        ? `release ${request.press}`
        : request.kind,
  );

describe('the hand', () => {
  test('asks while a control is held, with rising numbers, and says at once when it is let go', () => {
    const { hand, sent, tick, renews } = bench();
    hand.hold('grow', GROW);
    tick();
    tick();
    hand.release('grow');
    expect(kinds(sent)).toEqual(['hold 1.0', 'hold 1.1', 'hold 1.2', 'release 1']);
    expect(renews()).toBe(false);
  });

  test('makes one press of all held controls together', () => {
    const { hand, sent } = bench();
    hand.hold('grow', GROW);
    hand.hold('left', LEFT);
    expect(sent.at(-1)).toMatchObject({
      press: 1,
      seq: 1,
      wish: { motion: { kind: 'grow' }, tipSpeed: 0.2, steer: { right: -1 } },
    });
    hand.release('grow');
    expect(sent.at(-1)).toMatchObject({
      kind: 'hold',
      press: 1,
      wish: { motion: { kind: 'still' }, tipSpeed: 0 },
    });
    hand.release('left');
    expect(sent.at(-1)).toEqual({ kind: 'release', press: 1 });
  });

  test('asks for nothing more once the console calls the press burnt, until everything is let go and pressed afresh', () => {
    const { hand, sent, tick } = bench();
    hand.hold('grow', GROW);
    hand.burnt(1);
    const before = sent.length;
    tick();
    hand.hold('left', LEFT);
    expect(sent).toHaveLength(before);
    hand.release('grow');
    hand.release('left');
    expect(sent.at(-1)).toEqual({ kind: 'release', press: 1 });
    hand.hold('grow', GROW);
    expect(sent.at(-1)).toMatchObject({ kind: 'hold', press: 2, seq: 0 });
  });

  test('lets go of everything on blur and the like, and the held pointer’s late release says nothing more', () => {
    const { hand, sent, renews } = bench();
    hand.hold('grow', GROW);
    hand.letGo();
    expect(renews()).toBe(false);
    const before = sent.length;
    hand.release('grow');
    hand.letGo();
    expect(sent).toHaveLength(before);
  });

  test('is not burnt by an old press', () => {
    const { hand, sent, tick } = bench();
    hand.hold('grow', GROW);
    hand.release('grow');
    hand.hold('grow', GROW);
    hand.burnt(1);
    tick();
    expect(kinds(sent).at(-1)).toBe('hold 2.1');
  });
});

describe('a gamepad in the standard mapping (W3C Gamepad)', () => {
  const pad = (enable: boolean, axes: number[], mapping = 'standard') => ({
    mapping,
    buttons: Array.from({ length: 17 }, (_, i) => ({ pressed: i === 5 && enable })),
    axes,
  });
  const ready = readPad('must-be-neutral', pad(false, [0, 0, 0, 0])).memory;

  test('moves nothing until it has been seen neutral', () => {
    expect(ready).toBe('ready');
    const held = readPad('must-be-neutral', pad(true, [0, -1, 0, 0]));
    expect(held).toEqual({ memory: 'must-be-neutral', part: null });
  });
  test('needs the enable button and an axis', () => {
    expect(readPad(ready, pad(false, [0, -1, 0, 0])).part).toBeNull();
    expect(readPad(ready, pad(true, [0, 0.1, 0, 0])).part).toBeNull();
    expect(readPad(ready, pad(true, [0, -1, 0, 0])).part?.motion).toEqual({ kind: 'grow' });
    expect(readPad(ready, pad(true, [0, 1, 0, 0])).part?.motion).toEqual({ kind: 'retract' });
  });
  test('steers with the right stick', () => {
    expect(readPad(ready, pad(true, [0, 0, 0.5, 0])).part).toEqual({
      motion: { kind: 'still' },
      steer: { kind: 'bend', right: 0.5, down: 0 },
    });
  });
  test('must be neutral again after it was lost, and counts for nothing in another mapping or out of range', () => {
    expect(readPad(ready, null)).toEqual({ memory: 'must-be-neutral', part: null });
    expect(readPad(ready, pad(true, [0, -1, 0, 0], '')).part).toBeNull();
    for (const axis of [Number.NaN, -40]) expect(readPad(ready, pad(true, [0, axis, 0, 0])).part).toBeNull();
  });
});
