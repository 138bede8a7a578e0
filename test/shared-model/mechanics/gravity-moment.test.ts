import { describe, expect, it } from 'vitest';
import { type GravityLoad, gravityMoment } from '../../../shared-model/mechanics/gravity-moment.ts';
import { sampleSegments } from '../../../shared-model/shape/segments.ts';
import type { Segment, Vec3 } from '../../../shared-model/shape/vector.ts';

const DOWN: Vec3 = [0, 1, 0];
const w = 1.6;
const W = 3;
const L = 2;

const largest = (segments: readonly Segment[], load: Partial<GravityLoad>, spacing = 0.01): number => {
  const shape = sampleSegments(segments, spacing);
  return gravityMoment(shape, shape.count - 1, {
    weight: w,
    payload: W,
    direction: DOWN,
    supported: 0,
    ...load,
  });
};
const level: Segment[] = [{ length: L, curvature: 0, plane: 0 }];

describe('the bending moment of gravity', () => {
  // Cantilever: wL²/2 + WL (any handbook of strength of materials).
  it('of a level body is that of a cantilever', () => {
    expect(largest(level, {})).toBeCloseTo((w * L ** 2) / 2 + W * L, 10);
  });

  it('counts only beyond where ground carries the body, also between two stations', () => {
    for (const supported of [0.5, 0.5037, 1.999])
      expect(largest(level, { supported })).toBeCloseTo(
        (w * (L - supported) ** 2) / 2 + W * (L - supported),
        10,
      );
    expect(largest(level, { supported: L })).toBe(0);
    expect(largest(level, { supported: Number.POSITIVE_INFINITY })).toBe(0);
  });

  // Bow girder, a level quarter circle held at one end: bending wρ²(1 − cos θ) + Wρ·sin θ, θ from the tip (from memory).
  it('of a level quarter circle leaves the torsion out', () => {
    const rho = 1.2;
    const quarter = [{ length: (rho * Math.PI) / 2, curvature: 1 / rho, plane: 0 }];
    const bending = (angle: number) => w * rho ** 2 * (1 - Math.cos(angle)) + W * rho * Math.sin(angle);
    const angles = Array.from({ length: 2001 }, (_, i) => (i / 2000) * (Math.PI / 2));
    expect(largest(quarter, {}, 0.005)).toBeCloseTo(Math.max(...angles.map(bending)), 5);
  });

  it('is that of the lever arms alone where the body bends upwards in one plane', () => {
    const rho = 1.2;
    const upwards = [{ length: (rho * Math.PI) / 2, curvature: 1 / rho, plane: -Math.PI / 2 }];
    // By hand: ∫w·(ρ sin θ)·ρdθ over the quarter is wρ², and the payload hangs ρ out.
    expect(largest(upwards, {})).toBeCloseTo(w * rho ** 2 + W * rho, 8);
  });

  it('is nothing for a body that hangs straight down, and for one on which nothing hangs', () => {
    expect(largest(level, { direction: [0, 0, 1] })).toBeCloseTo(0, 10);
    expect(largest(level, { weight: 0, payload: 0 })).toBe(0);
  });

  it('is not a number where the shape or the load is not', () => {
    expect(largest(level, { weight: Number.NaN })).toBeNaN();
    expect(largest(level, { direction: [0, Number.NaN, 0] })).toBeNaN();
    expect(largest([{ length: 1, curvature: Number.NaN, plane: 0 }, ...level], {})).toBeNaN();
  });
});
