import { describe, expect, it } from 'vitest';
import { type GrowthConditions, growthReserve } from '../../../shared-model/mechanics/growth-reserve.ts';
import { sampleSegments } from '../../../shared-model/shape/segments.ts';
import { BODY_B } from '../../reference/body-b.ts';

const A = Math.PI * 0.04 ** 2;
const conditions: GrowthConditions = {
  body: {
    ...BODY_B,
    growth: { yield: 1000, rateCoefficient: 4e-4, rateExponent: 1 },
    friction: 0.3,
    tailWeight: 0.5,
  },
  supply: 10e3,
  tipSpeed: 0.2,
  holdBack: 2,
};
const bent = sampleSegments(
  [
    { length: 2, curvature: 0, plane: 0 },
    { length: 1, curvature: 1.2, plane: 0 },
    { length: 1, curvature: -0.7, plane: 1 },
  ],
  0.01,
);

describe('the growth reserve', () => {
  it('of a straight body is the supply less yield, rate and the tension carried to the tip', () => {
    const { needed, reserve } = growthReserve(
      sampleSegments([{ length: 4, curvature: 0, plane: 0 }], 1),
      conditions,
    );
    const tension = 2 + 0.3 * 0.5 * 4;
    expect(needed).toBeCloseTo(1000 + 0.2 / 4e-4 + (2 * tension) / A, 8);
    expect(reserve).toBeCloseTo(10e3 - needed, 8);
  });

  it('amplifies what is picked up near the base by all bends on the way to the tip', () => {
    const { needed } = growthReserve(bent, conditions);
    // Tension carried outwards in small steps: dT = μT|κ|ds + μw·ds.
    let tension = 2;
    const steps = 400_000;
    for (let i = 0; i < steps; i++) {
      const s = (i * 4) / steps;
      const curvature = s < 2 ? 0 : s < 3 ? 1.2 : 0.7;
      tension += 0.3 * (tension * curvature + 0.5) * (4 / steps);
    }
    expect(needed).toBeCloseTo(1500 + (2 * tension) / A, 1);
  });

  it('says the length straight ahead at which growth stalls', () => {
    const { stallLength } = growthReserve(bent, conditions);
    const reaching = sampleSegments(
      [
        { length: 2, curvature: 0, plane: 0 },
        { length: 1, curvature: 1.2, plane: 0 },
        { length: 1, curvature: -0.7, plane: 1 },
        { length: stallLength - 4, curvature: 0, plane: 0 },
      ],
      0.05,
    );
    expect(growthReserve(reaching, conditions).reserve).toBeCloseTo(0, 6);
  });

  it('says where on this shape growth stalls when the supply is too low', () => {
    const weak = growthReserve(bent, { ...conditions, supply: 2700 });
    expect(weak.reserve).toBeLessThan(0);
    expect(weak.stallLength).toBeGreaterThan(2);
    expect(weak.stallLength).toBeLessThan(3);
    expect(growthReserve(bent, { ...conditions, supply: 1200 }).stallLength).toBe(0);
  });

  it('never runs out ahead of a tail that weighs nothing', () => {
    const light = { ...conditions, body: { ...conditions.body, tailWeight: 0 } };
    expect(growthReserve(bent, light).stallLength).toBe(Number.POSITIVE_INFINITY);
  });

  it('is not a number where one of its values is not', () => {
    expect(growthReserve(bent, { ...conditions, holdBack: Number.NaN }).reserve).toBeNaN();
    expect(growthReserve(bent, { ...conditions, supply: Number.NaN }).reserve).toBeNaN();
  });
});
