import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { ReadingsSample } from '../../../main/record/recorder.ts';
import {
  restoreSample,
  sampleMessageSchema,
  type Told,
  thinSample,
} from '../../../main/record/sample-coding.ts';
import { sampleAt } from './a-mission.ts';

/** Through the coding and back, by way of JSON and the schema, as a log does. */
const throughLog = (samples: readonly ReadingsSample[]) => {
  let told: Told | null = null;
  let last: ReadingsSample | null = null;
  return samples.map((sample) => {
    const thinned = thinSample(told, sample);
    told = thinned.told;
    const message = sampleMessageSchema.parse(JSON.parse(JSON.stringify(thinned.message)));
    last = restoreSample(last, message);
    return { message, restored: last };
  });
};

const signal = (limit: number) =>
  fc.oneof(
    { weight: 9, arbitrary: fc.double({ min: -limit, max: limit, noNaN: true }) },
    fc.constantFrom(Number.NaN, Number.POSITIVE_INFINITY),
  );
const anySample = fc.record({
  values: fc.record(
    { body_pressure: signal(20_000), tail_payout: signal(90), tail_tension: signal(300) },
    { requiredKeys: [] },
  ),
  bad: fc.subarray(['tip_roll', 'camera_x']),
  length: fc.option(fc.double({ min: 0, max: 40, noNaN: true })),
  ratio: fc.option(fc.double({ min: 0, max: 50, noNaN: true })),
  asked: fc.double({ min: -1, max: 1, noNaN: true }),
  permitted: fc.double({ min: -1, max: 1, noNaN: true }),
});
const anySamples = fc
  .array(fc.tuple(anySample, fc.integer({ min: 40, max: 4000 })), { minLength: 1, maxLength: 40 })
  .map((rows) => {
    let at = 0;
    return rows.map(([sample, step]) => {
      at += step;
      return { ...sample, at: at / 1000 };
    });
  });

/** What half a sensor's noise or the record's use cannot tell apart [Pa, m, N]; common practice for such sensors. */
const BLUR: Record<string, number> = { body_pressure: 51, tail_payout: 0.021, tail_tension: 0.21 };

describe('readings in the log', () => {
  it('come back as they were, to within what the sensors can tell', () => {
    fc.assert(
      fc.property(anySamples, (samples) => {
        throughLog(samples).forEach(({ restored }, i) => {
          const given = samples[i]!;
          const finite = Object.entries(given.values).filter(([, value]) => Number.isFinite(value));
          expect(Object.keys(restored.values).sort()).toEqual(finite.map(([name]) => name).sort());
          for (const [name, value] of finite)
            expect(Math.abs(restored.values[name]! - value)).toBeLessThanOrEqual(BLUR[name]!);
          expect(restored.length === null).toBe(given.length === null);
          expect(Math.abs((restored.length ?? 0) - (given.length ?? 0))).toBeLessThanOrEqual(0.011);
          expect(restored.ratio === null).toBe(given.ratio === null);
          expect(Math.abs((restored.ratio ?? 0) - (given.ratio ?? 0))).toBeLessThanOrEqual(
            0.001 + 0.011 * (given.ratio ?? 0),
          );
          expect(Math.abs(restored.asked - given.asked)).toBeLessThanOrEqual(0.002);
        });
      }),
    );
  });

  it('never give a value for a signal that is bad or not a number', () => {
    fc.assert(
      fc.property(anySamples, (samples) => {
        throughLog(samples).forEach(({ restored }, i) => {
          const unknown = Object.entries(samples[i]!.values).filter(([, value]) => !Number.isFinite(value));
          expect(restored.bad).toEqual([...samples[i]!.bad, ...unknown.map(([name]) => name)]);
        });
      }),
    );
  });

  it('say nothing again of what has not moved', () => {
    const [first, second] = throughLog([
      sampleAt(1, { tail_tension: 27 }),
      sampleAt(1.05, { tail_tension: 27.1 }),
    ]);
    expect(first?.message.full).toBe(true);
    expect(second?.message).toEqual({ at: 1.05 });
  });

  it('do not lose a drift of many small steps', () => {
    const steps = Array.from({ length: 100 }, (_, i) => sampleAt(1 + i / 20, { tail_payout: 2 + i * 0.001 }));
    const told = throughLog(steps).at(-1)?.restored.values.tail_payout ?? 0;
    expect(Math.abs(told - 2.099)).toBeLessThan(0.021);
  });

  it('tell everything every ten seconds, so that a reader can begin anywhere', () => {
    const rows = throughLog(Array.from({ length: 700 }, (_, i) => sampleAt(i / 20)));
    expect(rows.filter(({ message }) => message.full).map(({ message }) => message.at)).toEqual([
      0, 10, 20, 30,
    ]);
  });
});
