import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Muscles } from '../../../shared-model/body/body.ts';
import { mckibbenCurve, mckibbenForce } from '../../../shared-model/steering/mckibben.ts';
import { curveAt, inverseAt } from '../../../shared-model/steering/monotone-curve.ts';
import {
  bendOfContractions,
  bendOfPressures,
  pressuresForBend,
} from '../../../shared-model/steering/muscle-bend.ts';

const CURVE = [
  [0, 0],
  [10_000, 0.02],
  [30_000, 0.09],
  [60_000, 0.152],
] as const;
const muscles = (count: number, offset = 0): Muscles => ({
  muscles: Array.from({ length: count }, (_, i) => ({ angle: offset + (2 * Math.PI * i) / count })),
  radius: 0.09,
  contraction: CURVE,
  bendGain: 0.7,
});

describe('the bench curve', () => {
  test('goes through its points, rises everywhere between them, and is held beyond its ends', () => {
    for (const [x, y] of CURVE) expect(curveAt(CURVE, x)).toBeCloseTo(y, 12);
    const values = Array.from({ length: 600 }, (_, i) => curveAt(CURVE, i * 100));
    values.slice(1).forEach((value, i) => expect(value).toBeGreaterThanOrEqual(values[i]!));
    expect([curveAt(CURVE, -5), curveAt(CURVE, 1e6)]).toEqual([0, 0.152]);
  });
  test('is undone by its inverse', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 60_000, noNaN: true }), (pressure) => {
        expect(curveAt(CURVE, inverseAt(CURVE, curveAt(CURVE, pressure)))).toBeCloseTo(
          curveAt(CURVE, pressure),
          9,
        );
      }),
    );
  });
  test('of a braided muscle balances its pull against the wall at every point', () => {
    const muscle = { radius: 0.01, braidAngle: 0.4 };
    for (const [pressure, contraction] of mckibbenCurve(muscle, 400, 100_000))
      expect(mckibbenForce(muscle, pressure, contraction)).toBeCloseTo(400 * contraction, 6);
  });
});

describe('muscles', () => {
  test('come to the bend that was wanted, and back, for two to six of them', () => {
    const angle = fc.double({ min: -Math.PI, max: Math.PI, noNaN: true });
    fc.assert(
      fc.property(
        fc.integer({ min: 3, max: 6 }),
        angle,
        angle,
        fc.double({ min: 0, max: 0.5, noNaN: true }),
        (count, offset, plane, size) => {
          const wanted = { right: size * Math.cos(plane), down: size * Math.sin(plane) };
          const { pressures, reached } = pressuresForBend(muscles(count, offset), wanted, 60_000);
          const bend = bendOfPressures(muscles(count, offset), pressures);
          expect(bend.right).toBeCloseTo(reached.right, 6);
          expect(bend.down).toBeCloseTo(reached.down, 6);
          expect(reached.right).toBeCloseTo(wanted.right, 9);
          expect(Math.min(...pressures)).toBeLessThan(1);
        },
      ),
    );
  });

  test('never get more than their limit, and bend as far as they reach in the wanted direction', () => {
    const { pressures, reached } = pressuresForBend(muscles(3), { right: -9, down: 3 }, 60_000);
    expect(Math.max(...pressures)).toBeLessThanOrEqual(60_000);
    expect(reached.down / reached.right).toBeCloseTo(-1 / 3, 9);
    expect(Math.hypot(reached.right, reached.down)).toBeGreaterThan(0.4);
  });

  test('all at one pressure bend nothing; two opposed ones bend in their plane alone', () => {
    const even = bendOfPressures(muscles(5), [3e4, 3e4, 3e4, 3e4, 3e4]);
    expect(Math.hypot(even.right, even.down)).toBeLessThan(1e-9);
    const two = bendOfContractions(muscles(2), [0.1, 0]);
    expect(two.right).toBeGreaterThan(0.3);
    expect(Math.abs(two.down)).toBeLessThan(1e-9);
  });

  test('that contradict each other show a residual where there are more than three', () => {
    expect(bendOfContractions(muscles(4), [0.1, 0, 0.1, 0]).residual).toBeGreaterThan(0.04);
    expect(bendOfContractions(muscles(4), [0.1, 0.05, 0, 0.05]).residual).toBeLessThan(1e-9);
  });

  test('with a reading that is not a number give no bend that is one', () => {
    expect(bendOfPressures(muscles(3), [Number.NaN, 0, 0]).right).toBeNaN();
  });
});
