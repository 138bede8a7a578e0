import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cutSegments, cutShape, sampleSegments, tipPose } from '../../../shared-model/shape/segments.ts';
import { rotate, type Segment, type Vec3 } from '../../../shared-model/shape/vector.ts';

const arcs = fc.array(
  fc.record({
    length: fc.double({ min: 0.01, max: 2, noNaN: true }),
    curvature: fc.double({ min: -4, max: 4, noNaN: true }),
    plane: fc.double({ min: -4, max: 4, noNaN: true }),
  }),
  { minLength: 1, maxLength: 5 },
);

/** The same body by many short straight steps of its frame, turned about the local axis that the plane says. */
const stepped = (segments: readonly Segment[], steps: number): Vec3 => {
  let p: Vec3 = [0, 0, 0];
  let [x, y, z]: Vec3[] = [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ];
  const mix = (a: Vec3, ca: number, b: Vec3, cb: number): Vec3 => [
    ca * a[0] + cb * b[0],
    ca * a[1] + cb * b[1],
    ca * a[2] + cb * b[2],
  ];
  for (const { length, curvature, plane } of segments)
    for (let i = 0; i < steps; i++) {
      const h = length / steps;
      const towards = mix(x as Vec3, Math.cos(plane), y as Vec3, Math.sin(plane));
      const across = mix(x as Vec3, -Math.sin(plane), y as Vec3, Math.cos(plane));
      const half = (curvature * h) / 2;
      p = mix(p, 1, mix(z as Vec3, Math.cos(half), towards, Math.sin(half)), h);
      const turned = mix(towards, Math.cos(2 * half), z as Vec3, -Math.sin(2 * half));
      z = mix(z as Vec3, Math.cos(2 * half), towards, Math.sin(2 * half));
      x = mix(turned, Math.cos(plane), across, -Math.sin(plane));
      y = mix(turned, Math.sin(plane), across, Math.cos(plane));
    }
  return p;
};

const distance = (a: Vec3, b: Vec3): number => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

describe('a body of arcs', () => {
  it('ends where short straight steps of its frame lead', () => {
    fc.assert(
      fc.property(arcs, (segments) => {
        expect(distance(tipPose(segments).position, stepped(segments, 4000))).toBeLessThan(1e-5);
      }),
      { numRuns: 30 },
    );
  });

  it('bends to the right for plane 0 and down for plane π/2', () => {
    const right = tipPose([{ length: 1, curvature: 0.5, plane: 0 }]).position;
    const down = tipPose([{ length: 1, curvature: 0.5, plane: Math.PI / 2 }]).position;
    expect(right[0]).toBeGreaterThan(0.2);
    expect(Math.abs(right[1])).toBeLessThan(1e-15);
    expect(down[1]).toBeGreaterThan(0.2);
    expect(Math.abs(down[0])).toBeLessThan(1e-15);
  });

  it('lies the same for (κ, φ) and (−κ, φ + π)', () => {
    fc.assert(
      fc.property(arcs, (segments) => {
        const other = segments.map((one) => ({
          ...one,
          curvature: -one.curvature,
          plane: one.plane + Math.PI,
        }));
        expect(distance(tipPose(segments).position, tipPose(other).position)).toBeLessThan(1e-12);
      }),
    );
  });

  it('goes over into a straight one without a jump as its curvature vanishes', () => {
    for (const curvature of [1e-3, 1e-6, 1e-9, 1e-12, 0]) {
      const { position } = tipPose([{ length: 1, curvature, plane: 0 }]);
      // x = κ/2·(1 − κ²/12), z = 1 − κ²/6: the series of the arc.
      expect(Math.abs(position[0] - (curvature / 2) * (1 - curvature ** 2 / 12))).toBeLessThan(1e-15);
      expect(Math.abs(position[2] - (1 - curvature ** 2 / 6))).toBeLessThan(1e-12);
    }
  });
});

describe('a sampled body', () => {
  it('has its stations on the arcs, its tangents along them, and counts all bends as positive', () => {
    fc.assert(
      fc.property(arcs, (segments) => {
        const shape = sampleSegments(segments, 0.1);
        for (let i = 0; i < shape.count; i += 7) {
          const pose = tipPose(cutSegments(segments, shape.s[i] as number));
          const at = (a: Float64Array): Vec3 => [
            a[3 * i] as number,
            a[3 * i + 1] as number,
            a[3 * i + 2] as number,
          ];
          expect(distance(at(shape.position), pose.position)).toBeLessThan(1e-9);
          expect(distance(at(shape.tangent), rotate(pose.quaternion, [0, 0, 1]))).toBeLessThan(1e-9);
        }
        const turned = segments.reduce((sum, one) => sum + Math.abs(one.curvature) * one.length, 0);
        expect(shape.bend[shape.count - 1]).toBeCloseTo(turned, 10);
      }),
    );
  });

  it('has no two stations further apart than asked, nor arcs further from their chords', () => {
    const shape = sampleSegments([{ length: 1, curvature: 4, plane: 0 }], 0.5, 1e-4);
    for (let i = 1; i < shape.count; i++) {
      const step = (shape.s[i] as number) - (shape.s[i - 1] as number);
      // Sagitta of an arc: ρ(1 − cos(step/2ρ)).
      expect(0.25 * (1 - Math.cos(step * 2))).toBeLessThanOrEqual(1e-4);
    }
    const even = sampleSegments([{ length: 1, curvature: 0, plane: 0 }], 0.3);
    expect(Array.from(even.s)).toEqual([0, 0.25, 0.5, 0.75, 1]);
  });

  it('cut at any length ends at that place of the whole body', () => {
    fc.assert(
      fc.property(arcs, fc.double({ min: 0, max: 1, noNaN: true }), (segments, share) => {
        const whole = sampleSegments(segments, 0.1);
        const length = share * (whole.s[whole.count - 1] as number);
        const cut = cutShape(whole, segments, length);
        const direct = sampleSegments(cutSegments(segments, length), 0.1);
        const [i, j] = [cut.count - 1, direct.count - 1];
        expect(cut.s[i]).toBeCloseTo(length, 12);
        expect(cut.bend[i]).toBeCloseTo(direct.bend[j] as number, 10);
        for (let axis = 0; axis < 3; axis++) {
          expect(cut.position[3 * i + axis]).toBeCloseTo(direct.position[3 * j + axis] as number, 10);
          expect(cut.tangent[3 * i + axis]).toBeCloseTo(direct.tangent[3 * j + axis] as number, 10);
        }
      }),
    );
  });

  it('of no length is the base alone', () => {
    expect(sampleSegments([], 0.1).count).toBe(1);
    expect(sampleSegments([{ length: 0, curvature: 3, plane: 0 }], 0.1).count).toBe(1);
  });

  it('is not a number from where an arc is not one', () => {
    const shape = sampleSegments([{ length: 1, curvature: Number.NaN, plane: 0 }], 0.1);
    expect(shape.position[3 * (shape.count - 1)]).toBeNaN();
    const endless = sampleSegments([{ length: Number.NaN, curvature: 0, plane: 0 }], 0.1);
    expect(endless.s[endless.count - 1]).toBeNaN();
  });
});
