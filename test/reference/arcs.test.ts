import { describe, expect, it } from 'vitest';
import { judgeWayBack } from '../../shared-model/retraction/judge.ts';
import { tipPose } from '../../shared-model/shape/segments.ts';
import { wayBackInput } from '../shared-model/retraction/way-back-input.ts';

describe('a body bent to an arc', () => {
  // Geometry: a quarter circle of arc length 1 has radius 2/π.
  it('of a quarter circle ends at (2/π, 0, 2/π), looking right', () => {
    const { position, quaternion } = tipPose([{ length: 1, curvature: Math.PI / 2, plane: 0 }]);
    expect(position[0]).toBeCloseTo(2 / Math.PI, 14);
    expect(position[1]).toBeCloseTo(0, 14);
    expect(position[2]).toBeCloseTo(2 / Math.PI, 14);
    // A turn of 90° about y: (cos 45°, 0, sin 45°, 0).
    expect(quaternion[0]).toBeCloseTo(Math.SQRT1_2, 14);
    expect(quaternion[2]).toBeCloseTo(Math.SQRT1_2, 14);
  });

  it('of a full turn closes', () => {
    for (const plane of [0, 1, 4]) {
      const { position } = tipPose([{ length: 1, curvature: 2 * Math.PI, plane }]);
      expect(Math.hypot(...position)).toBeLessThan(1e-15);
    }
  });
});

describe('the tail of a body', () => {
  // Common practice: the tail runs through the body and back over its wall, so 1 m of it makes half a metre of body.
  it('of one metre belongs to half a metre of body', () => {
    const taut = judgeWayBack(wayBackInput([{ length: 0.5, curvature: 0, plane: 0 }], { payout: 1 }));
    const less = judgeWayBack(wayBackInput([{ length: 0.5, curvature: 0, plane: 0 }], { payout: 0.9 }));
    const more = judgeWayBack(wayBackInput([{ length: 0.5, curvature: 0, plane: 0 }], { payout: 1.1 }));
    expect(taut).toEqual(less);
    expect(taut.kind === 'clear' && more.kind === 'clear' && more.here.ratio < taut.here.ratio).toBe(true);
  });
});
