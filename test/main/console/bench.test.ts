import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { createBench } from '../../../main/console/bench.ts';
import { decodeSignal } from '../../../main/rig/codec.ts';
import { appendTrial } from '../../../main/rig/companion.ts';
import { withTrials } from '../../../main/rig/trials.ts';
import type { EstimateFrame } from '../../../shared-model/contract/frame.ts';
import type { Readings, ReadSignal } from '../../../shared-model/contract/reading.ts';
import { type BenchReading, STILL } from '../../../shared-model/contract/request.ts';
import { type TrialRecord, VALUE_RANGES } from '../../../shared-model/trials/trial.ts';
import { builtInRig } from '../rig/built-in-rig.ts';
import { type Bench, startBench } from './a-console.ts';

const GROW = { motion: { kind: 'grow' } } as const;
const RETRACT = { motion: { kind: 'retract' }, tipSpeed: 0.05 } as const;
const length = (bench: Bench): number => bench.frame().estimate?.length ?? Number.NaN;
const folder = (): string => mkdtempSync(join(tmpdir(), 'foldback-bench-'));
const take = async (bench: Bench, trial: string) =>
  bench.console_.request('driver', { kind: 'bench-take', trial });
const reading = (answer: Awaited<ReturnType<typeof take>>): BenchReading => {
  if (!answer.ok) throw new Error(answer.text);
  return answer.value as BenchReading;
};

describe('the bench of the console', () => {
  test('gives the mean of a second at rest, and nothing while something moves or is not read', async () => {
    const bench = await startBench();
    await bench.hold(GROW, () => length(bench) >= 1);
    await bench.run(2);
    const rest = reading(await take(bench, 'tail-length'));
    expect(rest.payout).toBeCloseTo(bench.rig.truth().payout, 1);
    expect(rest.count).toBeGreaterThan(10);
    expect(rest.spread.pressure).toBeGreaterThan(0);
    await bench.hold(GROW, () => false, 1);
    expect(await take(bench, 'tail-length')).toMatchObject({ ok: false, code: 'not-steady' });
    const wish = { ...STILL, ...GROW, tipSpeed: 0.1 };
    await bench.console_.request('driver', { kind: 'hold', press: 50, seq: 0, wish });
    expect(await take(bench, 'tail-length')).toMatchObject({ ok: false, code: 'moving' });
    await bench.console_.request('driver', { kind: 'release', press: 50 });
    bench.rig.fault('dead-unit');
    await bench.run(3);
    expect(await take(bench, 'tail-length')).toMatchObject({ ok: false, code: 'not-steady' });
    await bench.close();
  });

  test('gives the tension of the last steady pull, not that at rest', async () => {
    const bench = await startBench();
    await bench.hold(GROW, () => length(bench) >= 1);
    expect(await take(bench, 'inversion')).toMatchObject({ ok: false, code: 'not-steady' });
    await bench.hold(RETRACT, () => false, 3.5);
    const rest = bench.frame().readings.tail_tension;
    const pull = reading(await take(bench, 'inversion'));
    // (A/2)(P + Y_r + rate): between the lossless 90 N and 20 % more at 9 kPa (work balance).
    expect(pull.tension).toBeGreaterThan(91);
    expect(pull.tension).toBeLessThan(112);
    expect(rest?.quality === 'good' && rest.value).toBeLessThan(pull.tension ?? 0);
    await bench.close();
  });

  /** A bench at rest for a second, with some of its signals not read. */
  const atRest = (without: readonly ReadSignal[], rig = builtInRig()) => {
    const still = createBench(withTrials(rig, '/nowhere', '2026-01-01T00:00:00Z'));
    for (let i = 0; i <= 20; i++) {
      const at = i / 20;
      const good = (value: number) => ({ quality: 'good', value, at }) as const;
      const readings: Readings = {
        tail_payout: good(2),
        body_pressure: good(9000),
        tail_tension: good(40),
        muscle_1_pressure: good(30_000),
        muscle_2_pressure: good(0),
        muscle_3_pressure: good(0),
        ...Object.fromEntries(without.map((name) => [name, { quality: 'bad', why: 'no answer', at }])),
      };
      still.note(readings, { length: 1, tipSpeed: 0 } as EstimateFrame, 0, 0, at);
    }
    return still;
  };

  test('gives no reading that lacks what the trial needs, and says what it lacks', () => {
    expect(atRest([]).take('muscle-bend', 1)).toMatchObject({ ok: true, value: { muscle: 30_000 } });
    // The muscle that works is not read: the others' zero is not its pressure.
    for (const [signal, kind, words] of [
      ['muscle_1_pressure', 'muscle-bend', /muscle pressures/],
      ['body_pressure', 'transition', /body pressure/],
      ['tail_payout', 'tail-length', /no good readings/],
    ] as const) {
      const answer = atRest([signal]).take(kind, 1);
      expect(answer).toMatchObject({ ok: false });
      expect(answer.ok ? '' : answer.text).toMatch(words);
    }
    expect(atRest(['muscle_2_pressure']).take('transition', 1)).toMatchObject({ ok: true });
  });

  test('leaves to the person what the rig has no sensor for', () => {
    const rig = builtInRig();
    const { tail_tension, ...reads } = rig.reads;
    expect(tail_tension).toBeDefined();
    const pulled = createBench(withTrials({ ...rig, reads }, '/nowhere', '2026-01-01T00:00:00Z'));
    for (let i = 0; i <= 60; i++) {
      const good = (value: number) => ({ quality: 'good', value, at: i / 20 }) as const;
      const readings: Readings = { tail_payout: good(2), body_pressure: good(9000) };
      pulled.note(readings, { length: 1, tipSpeed: 0 } as EstimateFrame, 0, -0.05, i / 20);
    }
    expect(pulled.take('inversion', 3)).toMatchObject({ ok: true, value: { pressure: 9000, tension: null } });
  });

  const trial = {
    kind: 'tail-length',
    points: [1, 2, 3, 4, 5].map((tape) => ({ tape, payout: (2 * tape) / 1.01 })),
  };
  const save = (bench: Bench, over = {}) =>
    bench.console_.request('driver', {
      kind: 'bench-save',
      trial,
      initials: 'ab',
      expires: '2027-01-01T00:00:00Z',
      ...over,
    });

  test('keeps a trial that it fitted itself, tells the record, and puts it in force at the next start', async () => {
    const dir = folder();
    const bench = await startBench(5, { companionFolder: dir });
    expect(await save(bench)).toMatchObject({ ok: true });
    expect(bench.events.find((event) => event.kind === 'trial-saved')).toMatchObject({ initials: 'ab' });
    const list = await bench.console_.request('driver', { kind: 'bench-list' });
    const [record] = list.ok ? (list.value as TrialRecord[]) : [];
    expect(record?.values[0]?.value).toBeCloseTo(1.01, 6);
    expect(record?.before[0]?.value).toBe(1);
    const tried = withTrials(builtInRig(), dir, '2026-06-01T00:00:00Z');
    expect(tried.rig.reads.tail_payout?.scale).toBeCloseTo(1.01, 6);
    expect(tried.standings.find((one) => one.kind === 'tail-length')?.state).toBe('measured');
    await bench.close();
  });

  test('keeps both of two trials that are saved in the same moment', async () => {
    const bench = await startBench(5, { companionFolder: folder() });
    const answers = await Promise.all([save(bench), save(bench, { initials: 'cd' })]);
    expect(answers).toMatchObject([{ ok: true }, { ok: true }]);
    const list = await bench.console_.request('driver', { kind: 'bench-list' });
    expect((list.ok ? (list.value as TrialRecord[]) : []).map((one) => one.initials)).toEqual(['ab', 'cd']);
    await bench.close();
  });

  test('reads the same counts as good whatever zero a trial gave', async () => {
    const dir = folder();
    await appendTrial(join(dir, 'built-in.bench.yaml'), {
      trial: { kind: 'tail-length', points: [] },
      values: [
        { name: 'payoutScale', value: 1.1, halfWidth: 0 },
        { name: 'payoutOffset', value: -0.04, halfWidth: 0 },
      ],
      before: [],
      date: '2026-05-01T00:00:00Z',
      initials: 'ab',
      expires: '2026-11-01T00:00:00Z',
    });
    const { rig } = withTrials(builtInRig(), dir, '2026-06-01T00:00:00Z');
    const float = (value: number): number[] => {
      const view = new DataView(new ArrayBuffer(4));
      view.setFloat32(0, value);
      return [view.getUint16(0), view.getUint16(2)];
    };
    // The rig file allows −0.2 to 90 m as the encoder gives it.
    for (const [raw, good] of [
      [-0.3, false],
      [-0.1, true],
      [0, true],
      [89, true],
      [91, false],
    ] as const)
      expect(decodeSignal(rig.reads.tail_payout!, float(raw)).ok).toBe(good);
    expect(decodeSignal(rig.reads.tail_payout!, float(0))).toMatchObject({ ok: true, value: -0.04 });
  });

  test('keeps none that has too few points, no initials, or would have expired', async () => {
    const dir = folder();
    const bench = await startBench(5, { companionFolder: dir });
    for (const [over, code] of [
      [{ trial: { ...trial, points: trial.points.slice(0, 2) } }, 'no-fit'],
      [{ initials: '   ' }, 'bad-request'],
      [{ expires: '2025-01-01T00:00:00Z' }, 'expired'],
      [{ trial: { kind: 'tail-length', points: [{ tape: Number.NaN, payout: 1 }] } }, 'bad-request'],
    ] as const)
      expect(await save(bench, over)).toMatchObject({ ok: false, code });
    expect(() => readFileSync(join(dir, 'built-in.bench.yaml'))).toThrow();
    await bench.close();
  });

  test('leaves out a companion that cannot be read, and then nothing counts as measured', async () => {
    const { rig, trouble } = withTrials(
      { ...builtInRig(), file: join(import.meta.dirname, 'nothing.yaml') },
      import.meta.dirname,
      '2026-06-01T00:00:00Z',
    );
    expect([trouble, rig.body.measured.length]).toEqual([null, 4]);
    const dir = folder();
    writeFileSync(join(dir, 'built-in.bench.yaml'), 'not: [a list');
    const broken = withTrials(builtInRig(), dir, '2026-06-01T00:00:00Z');
    expect(broken.trouble).toContain('built-in.bench.yaml');
    expect(broken.rig.body.measured).toEqual([]);
  });

  test('gives no reading of a body that still moves though nothing is asked of it', () => {
    const rolling = createBench(withTrials(builtInRig(), '/nowhere', '2026-01-01T00:00:00Z'));
    for (const tipSpeed of [0.02, Number.NaN]) {
      for (let i = 0; i <= 20; i++) {
        const readings: Readings = { tail_payout: { quality: 'good', value: 2, at: i / 20 } };
        rolling.note(readings, { length: 1, tipSpeed } as EstimateFrame, 0, 0, i / 20);
      }
      expect(rolling.take('tail-length', 1)).toMatchObject({ ok: false, code: 'not-steady' });
    }
  });

  test('lets the body grow from its base whatever zero a trial may give', async () => {
    for (const offset of VALUE_RANGES.payoutOffset) {
      const dir = folder();
      await appendTrial(join(dir, 'built-in.bench.yaml'), {
        trial: { kind: 'tail-length', points: [] },
        values: [
          { name: 'payoutScale', value: 1, halfWidth: 0 },
          { name: 'payoutOffset', value: offset, halfWidth: 0 },
        ],
        before: [],
        date: '2025-12-01T00:00:00Z',
        initials: 'ab',
        expires: '2027-01-01T00:00:00Z',
      });
      const bench = await startBench(5, { companionFolder: dir });
      expect(bench.frame().wayBack.kind).toBe('clear');
      await bench.hold(GROW, () => false, 3);
      expect(bench.rig.truth().length).toBeGreaterThan(0.4);
      await bench.close();
    }
  });

  test('judges no way back while the trials of the machine cannot be read', async () => {
    const dir = folder();
    writeFileSync(join(dir, 'built-in.bench.yaml'), 'not: [a list');
    const bench = await startBench(5, { companionFolder: dir });
    await bench.hold(GROW, () => length(bench) >= 0.5);
    expect(bench.frame().wayBack).toMatchObject({
      kind: 'cannot-judge',
      reasons: [{ code: 'trials-unread' }],
    });
    const before = bench.rig.truth().length;
    await bench.hold(RETRACT, () => false, 2);
    expect(bench.rig.truth().length).toBeCloseTo(before, 3);
    await bench.close();
  });
});
