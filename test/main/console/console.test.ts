import { describe, expect, test } from 'vitest';
import { LEASE_LIFE } from '../../../main/console/lease.ts';
import { STILL } from '../../../shared-model/contract/request.ts';
import { type Bench, startBench } from './a-console.ts';

const GROW = { motion: { kind: 'grow' } } as const;
const RETRACT = { motion: { kind: 'retract' } } as const;
const length = (bench: Bench): number => bench.frame().estimate?.length ?? Number.NaN;
const grownTo = (bench: Bench, metres: number) => bench.hold(GROW, () => length(bench) >= metres);
/** Engages the tip retractor and waits until it grips. */
const engage = async (bench: Bench): Promise<void> => {
  await bench.console_.request('driver', { kind: 'set-tip-retractor', attached: true, confirmed: true });
  await bench.run(3);
};
const kinds = (bench: Bench): string[] => bench.events.map((event) => event.kind);
const moving = (bench: Bench, from: number, to = Number.POSITIVE_INFINITY) =>
  bench.wire.filter(({ at, spool, retractor }) => at > from && at <= to && (spool !== 0 || retractor !== 0));
const press = (bench: Bench, seq: number, over = {}) =>
  bench.console_.request('driver', {
    kind: 'hold',
    press: 50,
    seq,
    wish: { ...STILL, ...GROW, tipSpeed: 0.2, ...over },
  });

describe('the console, driving the built-in rig in virtual time', () => {
  test('writes no motion before anyone holds a control', async () => {
    const bench = await startBench();
    await bench.run(3);
    expect(bench.wire.length).toBeGreaterThan(40);
    expect(moving(bench, 0)).toEqual([]);
    await bench.close();
  });

  test('pulls a short body back from the base, and refuses a long one with its numbers', async () => {
    const bench = await startBench();
    await grownTo(bench, 1);
    await bench.hold(RETRACT, () => length(bench) < 0.5);
    expect(bench.rig.truth().length).toBeLessThan(0.52);
    await grownTo(bench, 4);
    const from = bench.clock.now();
    await bench.hold(RETRACT, () => false, 3);
    expect(moving(bench, from)).toEqual([]);
    expect(bench.rig.truth().folded).toBe(0);
    const [refused, ...more] = bench.events.filter((event) => event.kind === 'pull-refused');
    expect(more).toEqual([]);
    expect(refused).toMatchObject({ motion: 'retract', margin: 1.25 });
    expect(refused?.forces?.ratio).toBeLessThan(1.25);
    await bench.close();
  });

  test.each([1, 2, 3])(
    'backtracks to the fork by the tip retractor and stops within 2 cm of it, in truth (machine %i)',
    async (seed) => {
      const bench = await startBench(seed);
      await grownTo(bench, 9.5);
      await bench.console_.request('driver', {
        kind: 'mark-branch-point',
        label: 'Fork',
        arms: ['left', 'right'],
      });
      const marked = bench.rig.truth();
      await bench.hold({ ...GROW, steer: { kind: 'bend', right: -1, down: 0 } }, () => length(bench) > 10.2);
      await bench.hold(
        { steer: { kind: 'straighten' } },
        () => Math.abs(bench.frame().estimate?.bend.right ?? 1) < 0.05,
        5,
      );
      await grownTo(bench, 12);
      expect(bench.rig.truth().tip[0]).toBeLessThan(-0.8);
      await engage(bench);
      expect(bench.frame().wayBack.kind).toBe('by-tip-retractor');
      const target = bench.events.find((event) => event.kind === 'branch-point-marked')?.id ?? '';
      await bench.hold(
        { motion: { kind: 'backtrack', target } },
        () => bench.frame().backtrack?.arrived === true,
      );
      await bench.run(2);
      expect(Math.abs(bench.rig.truth().length - marked.length)).toBeLessThan(0.02);
      expect(bench.rig.truth().folded).toBe(0);
      expect(kinds(bench).filter((kind) => kind.startsWith('backtrack'))).toEqual([
        'backtrack-started',
        'backtrack-arrived',
      ]);
      await bench.close();
    },
  );

  test('ends motion within the lease and a tick after the last renewal', async () => {
    const bench = await startBench();
    for (let seq = 0; seq < 20; seq++) {
      await press(bench, seq);
      await bench.run(0.05);
    }
    const last = bench.clock.now() - 0.05;
    await bench.run(2);
    expect(moving(bench, 0).length).toBeGreaterThan(5);
    expect(moving(bench, last + LEASE_LIFE + 0.05)).toEqual([]);
    expect(bench.frame().hold.state).toBe('burnt');
    await bench.close();
  });

  test('Stop from a window that only watches ends motion at once and burns the press', async () => {
    const bench = await startBench();
    bench.console_.join('watcher');
    for (let seq = 0; seq < 10; seq++) {
      await press(bench, seq);
      await bench.run(0.05);
    }
    const at = bench.clock.now();
    expect((await bench.console_.request('watcher', { kind: 'stop' })).ok).toBe(true);
    for (let seq = 10; seq < 20; seq++) {
      await press(bench, seq);
      await bench.run(0.05);
    }
    // One transaction may be on the wire when Stop comes.
    expect(moving(bench, at + 0.012)).toEqual([]);
    expect(kinds(bench)).toContain('stopped');
    await bench.close();
  });

  test('takes driving from the driver alone', async () => {
    const bench = await startBench();
    bench.console_.join('watcher');
    expect(bench.hello('watcher').role).toBe('watcher');
    const hold = { kind: 'hold', press: 1, seq: 0, wish: { ...STILL, ...GROW, tipSpeed: 0.2 } };
    for (const client of ['watcher', 'nobody'])
      expect(await bench.console_.request(client, hold)).toMatchObject({ ok: false, code: 'watching' });
    await bench.run(1);
    expect(moving(bench, 0)).toEqual([]);
    await bench.close();
  });

  test('is disarmed by a take-over, and the new driver must press afresh', async () => {
    const bench = await startBench();
    bench.console_.join('second');
    for (let seq = 0; seq < 5; seq++) {
      await press(bench, seq);
      await bench.run(0.05);
    }
    await bench.console_.request('second', { kind: 'take-over' });
    const at = bench.clock.now();
    await press(bench, 5);
    await bench.run(1);
    expect(moving(bench, at + 0.012)).toEqual([]);
    expect([bench.hello('driver').role, bench.hello('second').role]).toEqual(['watcher', 'driver']);
    await bench.close();
  });

  test('comes back disarmed after the cable was pulled, even under a held control', async () => {
    const bench = await startBench();
    for (let seq = 0; seq < 10; seq++) {
      await press(bench, seq);
      await bench.run(0.05);
    }
    bench.rig.fault('unplug');
    await bench.run(0.2);
    bench.rig.fault('none');
    const at = bench.clock.now();
    for (let seq = 10; seq < 80; seq++) {
      await press(bench, seq);
      await bench.run(0.05);
    }
    expect(bench.frame().link.state).toBe('open');
    expect(moving(bench, at)).toEqual([]);
    expect(bench.events.some((event) => event.kind === 'link' && event.state === 'lost')).toBe(true);
    expect(bench.events.some((event) => event.kind === 'alarm' && event.id === 'link-lost')).toBe(true);
    await bench.close();
  });

  test('holds still when the retractor loses its grip on the way back', async () => {
    const bench = await startBench();
    await grownTo(bench, 6);
    await engage(bench);
    const pulled = bench.hold(RETRACT, () => false, 4);
    await bench.run(1.5);
    bench.rig.fault('retractor-loss');
    const at = bench.clock.now();
    await pulled;
    expect(moving(bench, 0, at).length).toBeGreaterThan(5);
    expect(moving(bench, at + 0.15)).toEqual([]);
    expect(bench.rig.truth().folded).toBe(0);
    await bench.close();
  });

  test('suspects the fold of a wall weaker than measured, refuses further pulling, and lets a person rule it out', async () => {
    const bench = await startBench();
    await grownTo(bench, 1.4);
    bench.rig.fault('weak-wall');
    await bench.hold(RETRACT, () => false, 3);
    // It folded, since nothing measured said that it would; but by no more than a hand's breadth of tail.
    expect(bench.rig.truth().folded).toBeGreaterThan(0);
    expect(bench.rig.truth().folded).toBeLessThan(0.15);
    expect(bench.frame().foldSuspected?.code).toBe('suspected-fold');
    expect(bench.frame().wayBack.kind).toBe('cannot-judge');
    expect(bench.frame().alarms.map((alarm) => alarm.id)).toContain('fold-suspected');
    const folded = bench.rig.truth().folded;
    await bench.hold(RETRACT, () => false, 3);
    expect(bench.rig.truth().folded).toBe(folded);
    const ask = (confirmed: boolean) => bench.console_.request('driver', { kind: 'clear-fold', confirmed });
    expect(await ask(false)).toMatchObject({ ok: false, code: 'confirm' });
    expect(bench.frame().foldSuspected).not.toBeNull();
    expect(await ask(true)).toMatchObject({ ok: true });
    expect(await ask(true)).toMatchObject({ ok: false, code: 'no-fold' });
    await bench.run(0.2);
    expect(bench.frame().foldSuspected).toBeNull();
    expect(kinds(bench)).toEqual(expect.arrayContaining(['tripped', 'fold-cleared']));
    await bench.close();
  });

  test('suspects the fold of a weak wall also when it is pulled in short taps', async () => {
    const bench = await startBench();
    await grownTo(bench, 1.4);
    bench.rig.fault('weak-wall');
    for (let tap = 0; tap < 12; tap++) await bench.hold({ ...RETRACT, tipSpeed: 0.05 }, () => false, 0.2);
    expect(bench.frame().foldSuspected?.code).toBe('suspected-fold');
    expect(bench.rig.truth().folded).toBeLessThan(0.1);
    await bench.close();
  });

  test.each([
    ['motor-stall', GROW, 'spool-drive'],
    ['motor-stall', RETRACT, 'spool-drive'],
  ] as const)(
    'ends a press under the fault "%s" (%o) and says which drive it is',
    async (fault, wish, code) => {
      const bench = await startBench();
      await grownTo(bench, 1);
      bench.rig.fault(fault);
      const at = bench.clock.now();
      await bench.hold(wish, () => false, 3);
      expect(bench.events.filter((event) => event.kind === 'tripped').map((event) => event.code)).toEqual([
        code,
      ]);
      expect(moving(bench, at + 1.2)).toEqual([]);
      expect(bench.frame().hold.state).toBe('neutral');
      bench.rig.fault('none');
      await bench.hold(wish, () => false, 0.5);
      expect(bench.frame().foldSuspected).toBeNull();
      expect(moving(bench, bench.clock.now() - 1.1).length).toBeGreaterThan(3);
      await bench.close();
    },
  );

  test('ends a pull whose retractor motor stalls, both drives at once, and says which it is', async () => {
    const bench = await startBench();
    await grownTo(bench, 6);
    await engage(bench);
    bench.rig.fault('retractor-stall');
    const at = bench.clock.now();
    await bench.hold(RETRACT, () => false, 4);
    expect(bench.events.find((event) => event.kind === 'tripped')).toMatchObject({ code: 'retractor-drive' });
    expect(moving(bench, at + 1.5)).toEqual([]);
    expect(bench.rig.truth().folded).toBe(0);
    await bench.close();
  });

  test('ends a pull by the retractor at the first setpoint that the rig does not take', async () => {
    const bench = await startBench();
    await grownTo(bench, 6);
    await engage(bench);
    const pulled = bench.hold(RETRACT, () => false, 3);
    await bench.run(1.5);
    bench.rig.fault('dead-unit');
    const at = bench.clock.now();
    await pulled;
    expect(moving(bench, 0, at).length).toBeGreaterThan(5);
    // Reading and writing each wait for an answer once; then nothing but zeros is sent.
    expect(moving(bench, at + 0.2)).toEqual([]);
    expect(bench.rig.truth().folded).toBe(0);
    await bench.close();
  });

  test.each([1, 2, 3, 4, 5])(
    'comes from 14 m to the base by the retractor without a loop and without pulling on the grip (machine %i)',
    async (seed) => {
      const bench = await startBench(seed);
      await grownTo(bench, 14);
      await engage(bench);
      let loose = 0;
      let tension = 0;
      await bench.hold(
        RETRACT,
        () => {
          const { payout, length: body } = bench.rig.truth();
          loose = Math.max(loose, payout - 2 * body);
          const { tail_tension } = bench.frame().readings;
          if (tail_tension?.quality === 'good') tension = Math.max(tension, tail_tension.value);
          return body < 0.1;
        },
        120,
      );
      expect(bench.rig.truth().length).toBeLessThan(0.1);
      expect(loose).toBeLessThan(0.35);
      expect(tension).toBeLessThan(30);
      expect(bench.rig.truth().folded).toBe(0);
      await bench.close();
    },
  );

  test.each(['stuck-pressure', 'dead-unit', 'bit-errors', 'emergency-stop'] as const)(
    'never folds the body nor moves unheld under the fault "%s"',
    async (fault) => {
      const bench = await startBench();
      await grownTo(bench, 2.2);
      bench.rig.fault(fault);
      await bench.hold(RETRACT, () => false, 5);
      const released = bench.clock.now();
      await bench.run(1);
      expect(moving(bench, released - 0.5)).toEqual([]);
      expect(bench.rig.truth().folded).toBe(0);
      await bench.close();
    },
  );

  test('refuses what is no request, with where it is wrong', async () => {
    const bench = await startBench();
    for (const bad of [
      null,
      5,
      {},
      { kind: 'fly' },
      { kind: 'hold', press: 1, seq: 0, wish: { ...STILL, tipSpeed: Number.NaN } },
      { kind: 'stop', really: true },
    ]) {
      const answer = await bench.console_.request('driver', bad);
      expect(answer).toMatchObject({ ok: false, code: 'bad-request' });
    }
    await bench.close();
  });

  test('steers only while held, within the muscles’ limits', async () => {
    const bench = await startBench();
    await bench.hold({ steer: { kind: 'bend', right: 1, down: 0 } }, () => false, 3);
    await bench.run(1);
    expect(bench.frame().estimate?.bend.right).toBeGreaterThan(0.4);
    const { muscle_2_pressure } = bench.frame().readings;
    expect(muscle_2_pressure?.quality === 'good' && muscle_2_pressure.value).toBeLessThan(60_500);
    const bent = bench.frame().estimate?.bend.right ?? 0;
    await bench.run(2);
    expect(bench.frame().estimate?.bend.right).toBeCloseTo(bent, 1);
    await bench.close();
  });

  test('raises body pressure no further than the wall bears, and lowers it from anywhere', async () => {
    // PR·4 at 9.6 kPa and R 80 mm (thin shell; the factor is common practice).
    const strength = 4 * 9600 * 0.08;
    const bench = await startBench(5, {
      change: (rig) => ({ ...rig, body: { ...rig.body, hoopStrength: strength } }),
    });
    const pressure = (): number => {
      const { body_pressure } = bench.frame().readings;
      return body_pressure?.quality === 'good' ? body_pressure.value : Number.NaN;
    };
    await bench.hold({ pressure: 1 }, () => false, 3);
    await bench.run(2);
    expect(pressure()).toBeGreaterThan(9300);
    expect(pressure()).toBeLessThan(9700);
    await bench.hold({ pressure: -1 }, () => false, 1.5);
    await bench.run(2);
    expect(pressure()).toBeLessThan(7500);
    await bench.close();
  });
});
