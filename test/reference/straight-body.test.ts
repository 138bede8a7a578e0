import { describe, expect, it } from 'vitest';
import { solveCase } from '../../shared-model/retraction/solve-case.ts';
import { BODY_B, PRESSURE_B, YIELD_B } from './body-b.ts';

/** A straight body without any eccentricity, relied on up to full collapse. */
const inverts = (length: number, changes: object = {}): boolean => {
  const result = solveCase({
    body: BODY_B,
    pressure: PRESSURE_B,
    inversion: { yield: YIELD_B },
    segments: [{ length, curvature: 0, plane: 0 }],
    margin: 1,
    collapseFraction: 1,
    eccentricityFloor: 0,
    ...changes,
  });
  if (result.verdict === 'refuse') throw new Error(result.reason);
  return result.verdict === 'invert';
};

const longest = (changes: object): number => {
  let [low, high] = [0, 20];
  for (let i = 0; i < 40; i++) {
    const middle = (low + high) / 2;
    if (inverts(middle, changes)) low = middle;
    else high = middle;
  }
  return low;
};

describe('a straight body', () => {
  // Computed independently of this code: body B, e = 0, m = 1.
  it('of body B turns from inverting to buckling at 0.80380 m', () => {
    expect(longest({})).toBeCloseTo(0.8038, 5);
  });

  // Derived: PA ≥ T needs P ≥ Y_r, and then F_E ≥ A·Y_r: L ≤ π√(EtR/Y_r). A bound for every pressure.
  it('of body B buckles beyond 1.6223 m at any pressure', () => {
    for (let pressure = 100; pressure < 1e7; pressure *= 1.1)
      expect(inverts(1.6223, { pressure })).toBe(false);
  });

  // Derived: with G = 0, S = PA and F_c ≥ T gives F_E ≥ A·P(P + Y)/(P − Y), least at P = (1 + √2)Y.
  it('without shear stiffness of its wall may be longest at 1 + √2 times the yield pressure', () => {
    const best = (1 + Math.SQRT2) * YIELD_B;
    const reach = (pressure: number) => longest({ pressure, body: { ...BODY_B, G: 0 } });
    expect(reach(best)).toBeGreaterThan(reach(0.97 * best));
    expect(reach(best)).toBeGreaterThan(reach(1.03 * best));
  });

  // Common practice: at a given pressure there is one transition length.
  it('once too long stays too long', () => {
    const lengths = Array.from({ length: 60 }, (_, i) => 0.05 * (i + 1));
    const verdicts = lengths.map((length) => inverts(length));
    expect(verdicts.lastIndexOf(true)).toBe(verdicts.indexOf(false) - 1);
  });

  // Common practice: a body of zero length does not buckle.
  it('of no length inverts at any pressure', () => {
    for (const pressure of [1, 1e3, 1e6]) expect(inverts(0, { pressure })).toBe(true);
  });
});
