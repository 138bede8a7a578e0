import { describe, expect, test } from 'vitest';
import { withCrc } from '../../../main/rig/crc.ts';
import type { Question } from '../../../main/rig/frames.ts';
import { createMaster, type Reply } from '../../../main/rig/master.ts';
import { createRandom } from '../../../main/simulator/random.ts';
import { createVirtualClock } from '../virtual-clock.ts';
import { type Answerer, createScriptedLine } from './scripted-line.ts';

const TIMING = { baudRate: 115_200, bitsPerCharacter: 10, replyTimeout: 0.04 };
const read = (address: number, count = 1): Question => ({
  kind: 'read',
  slave: 1,
  table: 'input',
  address,
  count,
});

/** A slave whose register n reads 1000 + n. */
const honest = (frame: Uint8Array): Uint8Array => {
  if (frame[1] === 16 || frame[1] === 6) return withCrc(frame.slice(0, 6));
  const address = (frame[2]! << 8) | frame[3]!;
  const count = (frame[4]! << 8) | frame[5]!;
  const words = Array.from({ length: count }, (_, i) => 1000 + address + i);
  return withCrc([frame[0]!, frame[1]!, 2 * count, ...words.flatMap((word) => [word >> 8, word & 0xff])]);
};

const bench = (answer: Answerer) => {
  const clock = createVirtualClock();
  const scripted = createScriptedLine(clock, answer);
  return { clock, ...scripted, master: createMaster(scripted.line, TIMING, clock) };
};

describe('the master', () => {
  test('asks one question at a time and gives each its own answer', async () => {
    const { clock, master, written } = bench((frame) => [{ after: 0.003, bytes: honest(frame) }]);
    const replies = Promise.all([master.ask(read(5)), master.ask(read(9, 2))]);
    await clock.advanceTo(0.001);
    expect(written).toHaveLength(1);
    await clock.advanceTo(1);
    expect(await replies).toEqual([
      { outcome: 'answer', values: [1005] },
      { outcome: 'answer', values: [1009, 1010] },
    ]);
  });

  test('never takes the late reply to one question for the answer to the next', async () => {
    let asked = 0;
    // The first answer comes 60 ms late, when the next question of the same shape would be on its way.
    const { clock, master } = bench((frame) => [
      { after: asked++ === 0 ? 0.06 : 0.003, bytes: honest(frame) },
    ]);
    const replies = Promise.all([master.ask(read(5)), master.ask(read(9))]);
    await clock.advanceTo(1);
    expect(await replies).toEqual([{ outcome: 'timeout' }, { outcome: 'answer', values: [1009] }]);
  });

  test('takes the answer that lay unread while the process stood still, and gives up on a silent unit after it', async () => {
    const { clock, master } = bench((frame) =>
      frame[3] === 5 ? [{ after: 0.2, bytes: honest(frame) }] : [],
    );
    const late = master.ask(read(5));
    await clock.advanceTo(0.001);
    // The timer of 40 ms rings at 190 ms, and the answer is read 10 ms later.
    await clock.stallUntil(0.19);
    await clock.advanceTo(0.21);
    expect(await late).toEqual({ outcome: 'answer', values: [1005] });
    const never = master.ask(read(6));
    await clock.advanceTo(0.22);
    await clock.stallUntil(0.5);
    await clock.advanceTo(0.6);
    expect(await never).toEqual({ outcome: 'timeout' });
  });

  test('lets a stop overtake everything that waits, and what waited is never sent', async () => {
    const { clock, master, written } = bench((frame) => [{ after: 0.003, bytes: honest(frame) }]);
    const first = master.ask(read(1));
    const motion = master.ask({ kind: 'write-registers', slave: 1, address: 0, values: [500, 500] });
    const stop = master.overtake([{ kind: 'write-registers', slave: 1, address: 0, values: [0, 0] }]);
    await clock.advanceTo(1);
    expect((await first).outcome).toBe('answer');
    expect((await motion).outcome).toBe('dropped');
    expect((await stop)[0]?.outcome).toBe('answer');
    expect(written).toHaveLength(2);
    expect([...written[1]!.slice(7, 11)]).toEqual([0, 0, 0, 0]);
  });

  test('sends nothing once it is closed', async () => {
    const { clock, master, written } = bench(() => []);
    const asked = master.ask(read(1));
    master.close();
    expect((await asked).outcome).toBe('dropped');
    expect((await master.ask(read(2))).outcome).toBe('dropped');
    await clock.advanceTo(1);
    expect(written.length).toBeLessThanOrEqual(1);
  });

  test('in 2,000 seeded runs of late, cut, doubled, spoiled and foreign replies no register ever reads as another', async () => {
    for (let seed = 1; seed <= 2000; seed++) {
      const random = createRandom(seed);
      const { clock, master } = bench((frame) => spoiled(honest(frame), random.uniform));
      const addresses = [3, 8, 21, 3, 40];
      const replies: Reply[] = [];
      const all = addresses.map((address) =>
        master.ask(read(address)).then((reply) => replies.push(reply) - 1),
      );
      await clock.advanceTo(5);
      await Promise.all(all);
      expect(replies).toHaveLength(addresses.length);
      replies.forEach((reply, i) => {
        if (reply.outcome === 'answer') expect(reply.values, `seed ${seed}`).toEqual([1000 + addresses[i]!]);
      });
    }
  });
});

/** What a bad line makes of an honest reply. */
const spoiled = (reply: Uint8Array, uniform: () => number): ReturnType<Answerer> => {
  const kind = Math.floor(uniform() * 8);
  const soon = 0.001 + 0.01 * uniform();
  if (kind === 0) return [];
  // Later than the timeout, but within the longest reply that the quarantine waits for.
  if (kind === 1) return [{ after: 0.045 + 0.03 * uniform(), bytes: reply }];
  if (kind === 2) return [{ after: soon, bytes: reply.slice(0, Math.floor(uniform() * reply.length)) }];
  if (kind === 3) return [{ after: soon, bytes: Uint8Array.from([...reply, ...reply]) }];
  if (kind === 4) {
    const bits = reply.slice();
    bits[Math.floor(uniform() * bits.length)]! ^= 1 << Math.floor(uniform() * 8);
    return [{ after: soon, bytes: bits }];
  }
  if (kind === 5) return [{ after: soon, bytes: withCrc([2, 4, 2, 7, 7]) }];
  if (kind === 6) {
    const cut = Math.floor(uniform() * reply.length);
    return [
      { after: soon, bytes: reply.slice(0, cut) },
      { after: soon + 0.002, bytes: reply.slice(cut) },
    ];
  }
  return [{ after: soon, bytes: reply }];
};
