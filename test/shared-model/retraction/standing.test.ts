import { describe, expect, it } from 'vitest';
import {
  bentHoopStrength,
  judgeStanding,
  type StandingInput,
} from '../../../shared-model/retraction/standing.ts';
import type { Segment } from '../../../shared-model/shape/vector.ts';
import { bodyB, straight, wayBackInput } from './way-back-input.ts';

const standing = (segments: readonly Segment[], over: Partial<StandingInput> = {}) => {
  const { shape, arms } = wayBackInput(segments);
  return judgeStanding({
    shape: shape!,
    arms,
    body: bodyB,
    pressure: 10_000,
    pressureBand: 0,
    pressureMin: 500,
    pressureMax: 15_000,
    tipSpeed: 0,
    margin: 1.25,
    tension: undefined,
    ...over,
  });
};

describe('a body between pulls', () => {
  // Body B: PA = 50.27 N, so (A/2)(P − Y) = 25.133 − 3.770 = 21.363 N (design values; work balance).
  it('is loaded by what its tail holds back, and by what is measured where it is', () => {
    const { hold } = standing(straight(0.4));
    expect(hold.tension).toBeCloseTo(21.363, 3);
    expect(hold.measured).toBe(false);
    expect(hold.ratio).toBeCloseTo(hold.capacity / 21.363, 3);
    const measured = standing(straight(0.4), { tension: 3 }).hold;
    expect(measured).toMatchObject({ tension: 3, measured: true });
    expect(standing(straight(0.4), { tension: -0.2 }).hold.ratio).toBe(Number.POSITIVE_INFINITY);
  });

  it('names the pressure at which a long body bears what its tail holds back, and there it does', () => {
    const long = straight(1.6);
    const { hold } = standing(long);
    expect(hold.ratio).toBeLessThan(1.25);
    const eased = hold.easedPressure ?? Number.NaN;
    const then = standing(long, { pressure: eased }).hold;
    expect(then.ratio).toBeGreaterThanOrEqual(1.25);
    expect(standing(long, { pressure: eased + 100 }).hold.ratio).toBeLessThan(1.25);
    expect(standing(straight(0.2)).hold.easedPressure).toBe(10_000);
    expect(standing(straight(60), { pressureMin: 2500 }).hold.easedPressure).toBeNull();
  });

  // 10 kPa on R = 40 mm is 400 N/m; a bend of ρ = 5R adds an eighth at its inside (thin shell; torus).
  it('has a wall that is loaded straight and at the inside of its tightest bend', () => {
    const body = { ...bodyB, hoopStrength: 2000 };
    expect(standing(straight(1), { body }).hoop).toBeCloseTo(5, 9);
    const bent = [{ length: 0.5, curvature: 5, plane: 0 }];
    expect(standing([...straight(1), ...bent], { body }).hoop).toBeCloseTo(5 / 1.125, 6);
    expect(standing([{ length: 0.02, curvature: 26, plane: 0 }], { body }).hoop).toBe(0);
    expect(standing(straight(1)).hoop).toBeNull();
    const { shape } = wayBackInput([...straight(1), ...bent]);
    expect(bentHoopStrength(shape!, body)).toBeCloseTo(2000 / 1.125, 3);
    expect(bentHoopStrength(shape!, bodyB)).toBeNull();
  });

  it('can grow while the supply gives more than growth takes there', () => {
    // Straight, without speed: Y + 2μwL/A (work balance; drag of the tail's own weight).
    const { growth } = standing(straight(2));
    const area = Math.PI * 0.04 ** 2;
    expect(growth.needed).toBeCloseTo(1500 + (2 * 0.3 * 0.3 * 2) / area, 6);
    expect(growth.stallLength).toBeCloseTo(((15_000 - 1500) * area) / (2 * 0.3 * 0.3), 4);
  });
});
