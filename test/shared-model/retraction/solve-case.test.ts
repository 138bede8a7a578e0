import { describe, expect, it } from 'vitest';
import { type CaseResult, solveCase } from '../../../shared-model/retraction/solve-case.ts';
import { BODY_B } from '../../reference/body-b.ts';

const solved = (json: object): Exclude<CaseResult, { verdict: 'refuse' }> => {
  const result = solveCase({ body: BODY_B, pressure: 10e3, inversion: { yield: 1500 }, ...json });
  if (result.verdict === 'refuse') throw new Error(result.reason);
  return result;
};
const straight = (length: number) => [{ length, curvature: 0, plane: 0 }];
const quarter = [{ length: 1, curvature: Math.PI / 2, plane: 0 }];

describe('a solved case', () => {
  it('gives every number by hand for a straight body', () => {
    const result = solved({ id: 1, segments: straight(0.5), friction: 0.3, tailWeight: 0.4 });
    expect(result).toMatchObject({ id: 1, length: 0.5, verdict: 'invert' });
    expect(result.tipTension).toBeCloseTo(28.9027, 4);
    expect(result.baseTension).toBeCloseTo(28.9027 + 0.3 * 0.4 * 0.5, 4);
    expect(result.columnLoad).toBeCloseTo(68.3121, 4);
    expect(result.arm).toBeCloseTo(0, 10);
    // F·0.1R/(1 − F/F_c) = 0.8(PA − F)R, solved by hand for F: 0.8F² − (0.8PA + 0.9F_c)F + 0.8·PA·F_c = 0.
    const b = 0.8 * 50.26548 + 0.9 * 68.3121;
    const F = (b - Math.sqrt(b * b - 4 * 0.8 * 0.8 * 50.26548 * 68.3121)) / 1.6;
    expect(result.capacity).toBeCloseTo(F, 3);
    expect(result.ratio).toBeCloseTo(F / result.baseTension, 4);
    expect(result.tip).toEqual({ position: [0, 0, 0.5], quaternion: [1, 0, 0, 0] });
  });

  it('gives arm and tip of a quarter circle', () => {
    const result = solved({ segments: quarter });
    expect(result.arm).toBeCloseTo(2 / Math.PI, 9);
    expect(result.tip.position[0]).toBeCloseTo(2 / Math.PI, 12);
    expect(result.tip.quaternion[0]).toBeCloseTo(Math.SQRT1_2, 12);
    expect(result.verdict).toBe('buckle');
  });

  it('counts the guide set-back in the column load', () => {
    const u = 2.86277; // tan u = −0.1u; Timoshenko & Gere, from memory
    const E = 1e3;
    const soft = solved({ body: { ...BODY_B, E, G: 1e15 }, segments: straight(1), guideSetback: 0.1 });
    expect(soft.columnLoad / (u ** 2 * E * Math.PI * 0.04 ** 3 * 50e-6)).toBeCloseTo(1, 5);
  });

  it('has no ratio for a body of no length', () => {
    const result = solved({ segments: [] });
    expect(result).toMatchObject({
      length: 0,
      ratio: null,
      verdict: 'invert',
      worst: { length: 0, ratio: null },
    });
    expect(result.reason).toBe('nothing pulls on a body that could fold');
  });

  it('takes a body of no length with tail out for as long as its tail says', () => {
    expect(solved({ segments: [], payout: 2 }).verdict).toBe('buckle');
  });

  it('looks no further than to where it retracts', () => {
    const dogleg = [
      { length: 0.6, curvature: 0, plane: 0 },
      { length: 0.05 * Math.PI, curvature: 10, plane: 0 },
      { length: 0.05 * Math.PI, curvature: 10, plane: Math.PI },
      { length: 0.3, curvature: 0, plane: 0 },
    ];
    const stiff = {
      body: { radius: 0.4, wall: 1, E: 1e12, G: 1e12 },
      segments: dogleg,
      margin: 1.1,
      collapseFraction: 1,
    };
    const toBase = solved(stiff);
    expect(toBase.verdict).toBe('buckle');
    expect(toBase.ratio).toBeGreaterThan(1.1);
    expect(toBase.worst.length).toBeCloseTo(0.6 + 0.05 * Math.PI, 3);
    expect(solved({ ...stiff, retractTo: 1 }).verdict).toBe('invert');
  });

  it('finds a worst length that lies between stations to a millionth', () => {
    const wave = [1, -1, -1, 1, 1].map((side, i) => ({ length: 0.21, curvature: 2.7 * side, plane: i }));
    const coarse = solved({ segments: wave });
    let least = Number.POSITIVE_INFINITY;
    for (let length = 0.0005; length <= 1.05; length += 0.0005) {
      let left = length;
      const segments = wave.flatMap((one) => {
        const part = Math.max(0, Math.min(one.length, left));
        left -= one.length;
        return part > 0 ? [{ ...one, length: part }] : [];
      });
      least = Math.min(least, solved({ segments, retractTo: length }).ratio ?? Number.POSITIVE_INFINITY);
    }
    expect(coarse.worst.ratio).toBeLessThanOrEqual(least * (1 + 1e-6));
    expect(coarse.worst.ratio).toBeGreaterThan(least * (1 - 1e-3));
  });

  it('with a tip retractor loads the body with what the spool holds', () => {
    const pulled = { segments: straight(1.4), tipRetractor: true };
    expect(solved({ segments: straight(1.4) }).verdict).toBe('buckle');
    expect(solved(pulled)).toMatchObject({ verdict: 'invert', baseTension: 0, ratio: null });
    expect(solved({ ...pulled, heldTension: 2 })).toMatchObject({ verdict: 'invert', baseTension: 2 });
    expect(solved({ ...pulled, heldTension: 20 }).verdict).toBe('buckle');
    // PA ≥ m·T_tip is P ≥ m·Y_r/(2 − m) = 2.5 kPa.
    expect(solved({ ...pulled, pressure: 2510 }).verdict).toBe('invert');
    const crushed = solved({ ...pulled, pressure: 2490 });
    expect(crushed.verdict).toBe('buckle');
    expect(crushed.reason).toMatch(/^the tip would crush/);
  });

  it('lets gravity bend only what ground does not carry', () => {
    const hanging = (support: number | string) =>
      solved({ segments: straight(0.5), gravity: { weight: 8, payload: 1, support } });
    const free = solved({ segments: straight(0.5) }).capacity;
    expect(hanging('ground').capacity).toBe(free);
    expect(hanging(0.5).capacity).toBe(free);
    expect(hanging('none')).toEqual(hanging(0));
    expect(hanging(0.2).capacity).toBeLessThan(free);
    expect(hanging('none').capacity).toBeLessThan(hanging(0.2).capacity);
    const folded = solved({ segments: straight(1), gravity: { weight: 8 } });
    expect(folded).toMatchObject({ capacity: 0, ratio: 0, verdict: 'buckle' });
    expect(folded.reason).toBe('gravity alone folds the body at 1.000 m');
  });

  it('takes a direction of gravity of any length', () => {
    const hanging = (direction: number[]) =>
      solved({ segments: straight(0.5), gravity: { weight: 8, direction } }).capacity;
    expect(hanging([0, 9.81, 0])).toBeCloseTo(hanging([0, 1, 0]), 12);
  });

  it('follows a body that is coiled up many times', () => {
    const coil = solved({ segments: [{ length: 60, curvature: 20, plane: 1 }] });
    // A circle of 5 cm: the farthest section from a tangent is a diameter away.
    expect(coil.arm).toBeCloseTo(0.1, 4);
    expect(coil.verdict).toBe('buckle');
  });
});
