import { describe, expect, it } from 'vitest';
import { capstan, inversionTension } from '../../shared-model/mechanics/inversion.ts';
import { area } from '../../shared-model/mechanics/section.ts';
import { BODY_B, PRESSURE_B, YIELD_B } from './body-b.ts';

const TURN = 2 * Math.PI;

describe('a tail around bends', () => {
  // Euler–Eytelwein, T₂/T₁ = e^{μΘ}.
  it.each([
    [0.3, 0.5, 2.5663],
    [0.3, 1, 6.5861],
    [0.3, 2, 43.376],
    [0.2, 0.5, 1.8745],
    [0.2, 1, 3.5136],
    [0.2, 2, 12.345],
  ])('with friction %s gains over %s turns the factor %s', (friction, turns, factor) => {
    expect(capstan(friction, turns * TURN) / factor).toBeCloseTo(1, 4);
  });
});

describe('inversion at the tip', () => {
  const A = area(BODY_B);

  // Work balance: the tail moves at twice the tip's speed, T·2v = P·A·v.
  it('takes half the pressure force where nothing is lost', () => {
    const lossless = { yield: 0, rateCoefficient: Number.POSITIVE_INFINITY, rateExponent: 1 };
    expect(inversionTension(A, PRESSURE_B, lossless, 0)).toBeCloseTo(25.133, 3);
  });

  // Design note, body B: T_tip = 28.90 N with Y_r = 1.5 kPa.
  it('takes the yield on top', () => {
    const loss = { yield: YIELD_B, rateCoefficient: Number.POSITIVE_INFINITY, rateExponent: 1 };
    expect(inversionTension(A, PRESSURE_B, loss, 0)).toBeCloseTo(28.9, 2);
    expect(inversionTension(A, PRESSURE_B, loss, 0.2)).toBeCloseTo(28.9, 2);
  });

  // v = φ·ΔP^n turned round: the pressure that this rate term asks for must give back the speed.
  it('takes more the faster the tip comes back', () => {
    const loss = { yield: 0, rateCoefficient: 2e-4, rateExponent: 0.7 };
    const extra = (2 * inversionTension(A, 0, loss, 0.15)) / A;
    expect(loss.rateCoefficient * extra ** loss.rateExponent).toBeCloseTo(0.15, 10);
  });
});
