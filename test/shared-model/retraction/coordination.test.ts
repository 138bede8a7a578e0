import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { coordinate, easeOff } from '../../../shared-model/retraction/coordination.ts';

const calm = { speed: 0.1, tipSpeed: 0.1, slack: 0.05, held: 1, heldMax: 30, slackMax: 0.3 };

describe('a pull by the tip retractor', () => {
  // The tail moves twice as fast as the tip (common practice).
  it('takes up tail twice as fast as the tip comes back while as much lies loose as is meant to', () => {
    expect(coordinate(calm)).toEqual({ tip: 0.1, spool: -0.2 });
    expect(coordinate({ ...calm, tipSpeed: 0.04 }).spool).toBeCloseTo(-0.08, 12);
    expect(coordinate({ ...calm, tipSpeed: 0 })).toEqual({ tip: 0.1, spool: expect.closeTo(0, 12) });
  });
  it('takes up faster while more lies loose, and lets the tip wait where a loop could form', () => {
    expect(coordinate({ ...calm, slack: 0.15 }).spool).toBeLessThan(-0.2);
    expect(coordinate({ ...calm, slack: 0.31 })).toEqual({ tip: 0, spool: expect.closeTo(-0.3, 12) });
  });
  it('slows the spool as it comes to hold more than half of what the body bears, and stops it at all of it', () => {
    expect(coordinate({ ...calm, held: 15 }).spool).toBeCloseTo(-0.2, 12);
    expect(coordinate({ ...calm, held: 22.5 }).spool).toBeCloseTo(-0.1, 12);
    expect(coordinate({ ...calm, held: 30 }).spool).toBeCloseTo(0, 12);
  });
  it('never drives the spool out, nor anything on what is not finite', () => {
    const any = fc.double();
    fc.assert(
      fc.property(any, any, any, any, any, any, (speed, tipSpeed, slack, held, heldMax, slackMax) => {
        const { tip, spool } = coordinate({ speed, tipSpeed, slack, held, heldMax, slackMax });
        expect(spool).toBeLessThanOrEqual(0);
        expect(tip).toBeGreaterThanOrEqual(0);
        if (!Number.isFinite(slack) || [held, heldMax, speed, tipSpeed].some(Number.isNaN))
          expect([tip, spool]).toEqual([0, expect.closeTo(0, 12)]);
        if (!(slack <= slackMax)) expect(tip).toBe(0);
      }),
    );
  });

  /** Tail and tip moved on by what was permitted, with encoders that are off by these shares. */
  const play = (tipShare: number, spoolShare: number, stiffness: number) => {
    let [length, payout] = [14, 28];
    let [most, least, tension, tipSpeed] = [0, 0, 0, 0];
    for (let i = 0; i < 20_000 && length > 0.05; i++) {
      const slack = payout * (1 + spoolShare) - 2 * (14 - (14 - length) * (1 + tipShare));
      tension = Math.max(0, stiffness * (2 * length - payout));
      const { tip, spool } = coordinate({ ...calm, tipSpeed, slack, held: tension });
      // What is measured of the tip lags by a filter of a quarter of a second.
      tipSpeed += 0.2 * (tip - tipSpeed);
      length -= tip * 0.05;
      payout += spool * 0.05;
      most = Math.max(most, payout - 2 * length);
      least = Math.min(least, payout - 2 * length);
    }
    return { most, tension: -least * stiffness, length };
  };
  it('comes all the way without a loop and without pulling on the grip, with encoders that disagree by 0.5 %', () => {
    for (const [a, b] of [
      [0, 0],
      [0.005, 0],
      [-0.005, 0],
      [0, 0.005],
      [0, -0.005],
      [0.0025, -0.0025],
    ] as const) {
      const { most, tension, length } = play(a, b, 400);
      expect(length).toBeLessThan(0.06);
      expect(most).toBeLessThan(0.3 + 0.15);
      expect(tension).toBeLessThanOrEqual(30);
    }
  });
});

describe('easing a spool off', () => {
  it('lets out slowly while it holds more than a quarter of what the body bears and little lies loose', () => {
    expect(easeOff({ ...calm, held: 20 })).toBe(0.05);
    expect(easeOff({ ...calm, held: 7 })).toBe(0);
    expect(easeOff({ ...calm, held: 20, slack: 0.16 })).toBe(0);
    for (const bad of [Number.NaN, undefined]) expect(easeOff({ ...calm, held: bad })).toBe(0);
    expect(easeOff({ ...calm, held: 20, slack: Number.NaN })).toBe(0);
    expect(easeOff({ ...calm, held: 20, heldMax: Number.NaN })).toBe(0);
  });
});
