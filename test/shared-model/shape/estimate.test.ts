import { describe, expect, test } from 'vitest';
import type { Reading, Readings } from '../../../shared-model/contract/reading.ts';
import { createEstimate, type Estimate, stepEstimate } from '../../../shared-model/shape/estimate.ts';
import { builtInRig } from '../../main/rig/built-in-rig.ts';

const rig = { ...builtInRig(), gravity: [0, 1, 0] as const };
const good = (value: number, at: number): Reading => ({ quality: 'good', value, at });
const readings = (payout: number, at: number, over: Readings = {}): Readings => ({
  tail_payout: good(payout, at),
  muscle_1_pressure: good(0, at),
  muscle_2_pressure: good(0, at),
  muscle_3_pressure: good(0, at),
  ...over,
});
const step = (
  before: Estimate,
  payout: number,
  now: number,
  over: Readings = {},
  gripping = false,
): Estimate => stepEstimate(before, readings(payout, now, over), gripping, rig, now);

describe('the estimate', () => {
  test('takes half the payout for the body length, never the payout itself (common practice)', () => {
    const { frame } = step(createEstimate(), 1, 0);
    expect(frame?.length).toBe(0.5);
    expect(frame?.tailSlack).toBe(0);
    expect(frame?.tip.position[2]).toBeCloseTo(0.5, 9);
  });

  test('follows the retractor’s travel while it grips, and calls the rest loose tail', () => {
    let estimate = step(createEstimate(), 4, 0);
    estimate = step(estimate, 4, 0.05, { tip_retractor_travel: good(7, 0.05) }, true);
    estimate = step(estimate, 3.92, 0.1, { tip_retractor_travel: good(7.2, 0.1) }, true);
    expect(estimate.frame?.length).toBeCloseTo(1.8, 9);
    expect(estimate.frame?.tailSlack).toBeCloseTo(0.32, 9);
  });

  test('never makes the body longer than half the tail that is out, whatever the retractor says', () => {
    let estimate = step(createEstimate(), 4, 0, { tip_retractor_travel: good(0, 0) }, true);
    estimate = step(estimate, 3.92, 0.05, { tip_retractor_travel: good(-3, 0.05) }, true);
    expect(estimate.frame?.length).toBeCloseTo(1.96, 9);
  });

  test.each<[string, Readings]>([
    ['a stale payout', { tail_payout: { quality: 'stale', value: 1, at: 0 } }],
    ['a bad payout', { tail_payout: { quality: 'bad', why: 'w', at: 0 } }],
    ['a payout that is not a number', { tail_payout: good(Number.NaN, 0) }],
    ['a payout below zero', { tail_payout: good(-0.4, 0) }],
    ['an old payout', { tail_payout: good(1, -1) }],
    ['a muscle that cannot be read', { muscle_2_pressure: { quality: 'bad', why: 'w', at: 0 } }],
    ['a muscle that reads no number', { muscle_3_pressure: good(Number.POSITIVE_INFINITY, 0) }],
  ])('is none for %s, and says what to do', (_, over) => {
    const { frame, reasons } = stepEstimate(createEstimate(), readings(1, 0, over), false, rig, 0);
    expect(frame).toBeNull();
    expect(reasons[0]?.remedy).toMatch(/Check/);
  });

  test('is none after a jump of the payout that no spool can make, and stays none', () => {
    let estimate = step(createEstimate(), 1, 0);
    for (const now of [0.05, 0.1, 0.15]) {
      estimate = step(estimate, 3, now);
      expect(estimate.frame).toBeNull();
      expect(estimate.reasons[0]?.text).toMatch(/jumped by 2\.00 m/);
    }
  });

  test('keeps where the body lay while readings are missing', () => {
    const before = step(createEstimate(), 2, 0);
    const lost = stepEstimate(before, {}, false, rig, 0.05);
    expect(lost.path.length).toBe(1);
    expect(lost.changedFrom).toBe(lost.path.count);
  });

  test('knows no roll that the rig does not measure', () => {
    expect(step(createEstimate(), 1, 0).frame?.roll).toBeNull();
    expect(step(createEstimate(), 1, 0, { tip_roll: good(0.2, 0) }).frame?.roll).toBe(0.2);
  });
});
