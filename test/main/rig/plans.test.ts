import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { decodeSignal, encodeSignal, registersOf } from '../../../main/rig/codec.ts';
import { planReads } from '../../../main/rig/read-plan.ts';
import type { Table, WireSignal, WireType } from '../../../main/rig/signal.ts';
import { planWrites } from '../../../main/rig/write-plan.ts';

const signal = (over: Partial<WireSignal> = {}): WireSignal => ({
  slave: 1,
  table: 'input',
  address: 0,
  type: 'u16',
  wordOrder: 'high-first',
  scale: 1,
  offset: 0,
  min: Number.NEGATIVE_INFINITY,
  max: Number.POSITIVE_INFINITY,
  sentinels: [],
  unit: '',
  ...over,
});

describe('the read plan', () => {
  test('reads neighbours together and far ones apart', () => {
    const plan = planReads([
      ['a', signal({ address: 0 })],
      ['b', signal({ address: 4, type: 'f32' })],
      ['c', signal({ address: 300 })],
      ['d', signal({ address: 1, table: 'holding' })],
    ]);
    expect(plan.map(({ question }) => [question.table, question.address, question.count])).toEqual([
      ['input', 0, 6],
      ['input', 300, 1],
      ['holding', 1, 1],
    ]);
  });

  test('covers every signal whole, within 125 registers, in one table of one slave', () => {
    const any = fc.record({
      slave: fc.integer({ min: 1, max: 3 }),
      table: fc.constantFrom<Table>('holding', 'input'),
      address: fc.nat(400),
      type: fc.constantFrom<WireType>('u16', 'i32', 'f32'),
    });
    fc.assert(
      fc.property(fc.array(any, { minLength: 1, maxLength: 60 }), (wires) => {
        const signals = wires.map((wire, i) => [`s${i}`, signal(wire)] as const);
        const plan = planReads(signals);
        const found = plan.flatMap(({ question, signals: members }) => {
          expect(question.count).toBeLessThanOrEqual(125);
          for (const { signal: one, offset, width } of members) {
            expect([one.slave, one.table]).toEqual([question.slave, question.table]);
            expect(question.address + offset).toBe(one.address);
            expect(offset + width).toBeLessThanOrEqual(question.count);
            expect(width).toBe(registersOf(one.type));
          }
          return members.map(({ name }) => name);
        });
        expect(found.sort()).toEqual(signals.map(([name]) => name).sort());
      }),
    );
  });
});

describe('a signal', () => {
  test.each<[WireType, number]>([
    ['u16', 65_535],
    ['i16', -32_768],
    ['u32', 4_000_000_000],
    ['i32', -2_000_000_000],
    ['f32', 0.15625],
  ])('of type %s comes back as it was written, in both word orders', (type, raw) => {
    for (const wordOrder of ['high-first', 'low-first'] as const) {
      const one = signal({ type, wordOrder });
      expect(decodeSignal(one, encodeSignal(one, raw))).toEqual({ ok: true, value: raw });
    }
  });

  test('of type f32 lies on the wire as IEEE 754 says: 1.0 is 3F80 0000', () => {
    expect(encodeSignal(signal({ type: 'f32' }), 1)).toEqual([0x3f80, 0]);
  });

  test('is bad, never a number, out of range, at a sentinel and where it is not a number', () => {
    expect(decodeSignal(signal({ min: 0, max: 10 }), [11]).ok).toBe(false);
    expect(decodeSignal(signal({ sentinels: [0xffff] }), [0xffff]).ok).toBe(false);
    expect(decodeSignal(signal({ type: 'f32' }), [0x7fc0, 0]).ok).toBe(false);
    expect(decodeSignal(signal(), []).ok).toBe(false);
  });

  test('is written clamped to its range, and a setpoint that is not a number is never written', () => {
    expect(encodeSignal(signal({ min: 0, max: 10 }), 99)).toEqual([10]);
    expect(() => encodeSignal(signal(), Number.NaN)).toThrow('not a number');
  });
});

test('setpoints that lie side by side travel in one frame, each slave in its own, coils alone', () => {
  const holding = (address: number, slave = 1) => signal({ table: 'holding', address, slave });
  expect(
    planWrites([
      [holding(0), 5],
      [holding(1), 6],
      [holding(7), 7],
      [holding(0, 2), 8],
      [signal({ table: 'coil', address: 3 }), 1],
    ]),
  ).toEqual([
    { kind: 'write-registers', slave: 1, address: 0, values: [5, 6] },
    { kind: 'write-registers', slave: 1, address: 7, values: [7] },
    { kind: 'write-registers', slave: 2, address: 0, values: [8] },
    { kind: 'write-coil', slave: 1, address: 3, on: true },
  ]);
});
