import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { capacity } from '../../../shared-model/mechanics/capacity.ts';

/** The smallest load that the column-magnified arm and gravity no longer leave the wall fit to bear, by halving. */
const foldingLoad = (F_c: number, PA: number, R: number, e: number, M_g: number, eta: number): number => {
  let [low, high] = [0, Math.min(F_c, PA)];
  for (let i = 0; i < 200; i++) {
    const F = (low + high) / 2;
    if ((F * e) / (1 - F / F_c) + M_g < eta * (PA - F) * R) low = F;
    else high = F;
  }
  return low;
};

describe('column and bending together', () => {
  const force = fc.double({ min: 0.1, max: 1e4, noNaN: true });
  const radius = fc.double({ min: 0.01, max: 0.2, noNaN: true });
  const arm = fc.double({ min: 0, max: 5, noNaN: true });
  const share = fc.double({ min: 0.01, max: 1, noNaN: true });

  it('fold where the balance of moments first fails', () => {
    fc.assert(
      fc.property(force, force, radius, arm, share, share, (F_c, PA, R, e, gravity, eta) => {
        const M_g = gravity * gravity * eta * PA * R;
        const expected = foldingLoad(F_c, PA, R, e, M_g, eta);
        expect(Math.abs(capacity(F_c, PA, R, e, M_g, eta) - expected)).toBeLessThan(1e-9 * PA);
      }),
    );
  });

  it('bear no more than the column, and no more than the wall', () => {
    fc.assert(
      fc.property(force, force, radius, arm, share, (F_c, PA, R, e, eta) => {
        expect(capacity(F_c, PA, R, e, 0, eta)).toBeLessThanOrEqual(Math.min(F_c, PA));
      }),
    );
  });

  it('bear less than either alone where the two come together', () => {
    const both = capacity(50, 50, 0.04, 0.02, 0, 1);
    const bendingAlone = capacity(Number.POSITIVE_INFINITY, 50, 0.04, 0.02, 0, 1);
    expect(Math.min(50, bendingAlone) / both).toBeGreaterThan(1.3);
  });

  it('bear nothing where gravity alone folds the body', () => {
    expect(capacity(50, 50, 0.04, 0.01, 50 * 0.04, 1)).toBe(0);
    expect(capacity(50, 50, 0.04, 0.01, 80, 1)).toBe(0);
  });

  it('are not a number where one of their values is not', () => {
    const sound = [50, 50, 0.04, 0.01, 0.1, 0.8];
    sound.forEach((_, i) => {
      const [F_c, PA, R, e, M_g, eta] = sound.with(i, Number.NaN) as [
        number,
        number,
        number,
        number,
        number,
        number,
      ];
      expect(capacity(F_c, PA, R, e, M_g, eta)).toBeNaN();
    });
  });
});
