import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { WEIGHTLESS } from '../../../shared-model/mechanics/gravity-moment.ts';
import { chordArm, createArms, tangentArm, updateArms } from '../../../shared-model/retraction/arms.ts';
import { sampleSegments, tipPose } from '../../../shared-model/shape/segments.ts';
import {
  cross,
  length,
  rotate,
  type Segment,
  scale,
  subtract,
  type Vec3,
} from '../../../shared-model/shape/vector.ts';
import { WINDINGS } from '../shape/windings.ts';

const R = 0.04;
const arcs = fc.array(
  fc.record({
    length: fc.double({ min: 0.05, max: 1, noNaN: true }),
    curvature: fc.double({ min: -3, max: 3, noNaN: true }),
    plane: fc.double({ min: -4, max: 4, noNaN: true }),
  }),
  { minLength: 1, maxLength: 4 },
);

/** Largest distance of 4,000 points of each arc from the line through the tip, by the plain cross product. */
const farthest = (segments: readonly Segment[], direction: Vec3): number => {
  const tip = tipPose(segments).position;
  let most = 0;
  segments.forEach((segment, i) => {
    for (let k = 0; k <= 4000; k++) {
      const part = { ...segment, length: (segment.length * k) / 4000 };
      const point = tipPose([...segments.slice(0, i), part]).position;
      most = Math.max(most, length(cross(subtract(point, tip), direction)));
    }
  });
  return most;
};

describe('the arms of a body', () => {
  it('are the farthest any section lies from the tip tangent and from the line to the guide', () => {
    fc.assert(
      fc.property(arcs, fc.double({ min: 0, max: 0.2, noNaN: true }), (segments, setback) => {
        const shape = sampleSegments(segments, 0.01);
        const tip = tipPose(segments);
        const toGuide = subtract([0, 0, -setback], tip.position);
        fc.pre(length(toGuide) > 0.01);
        expect(tangentArm(shape, shape.count - 1)).toBeCloseTo(
          farthest(segments, rotate(tip.quaternion, [0, 0, 1])),
          5,
        );
        expect(chordArm(shape, shape.count - 1, setback)).toBeCloseTo(
          farthest(segments, scale(toGuide, 1 / length(toGuide))),
          5,
        );
      }),
      { numRuns: 25 },
    );
  });

  it('move by less than a thousandth of the radius when the stations are doubled', () => {
    fc.assert(
      fc.property(arcs, (segments) => {
        const [once, twice] = [sampleSegments(segments, 0.01), sampleSegments(segments, 0.005)];
        const [i, j] = [once.count - 1, twice.count - 1];
        expect(Math.abs(tangentArm(once, i) - tangentArm(twice, j))).toBeLessThan(1e-3 * R);
        expect(Math.abs(chordArm(once, i, 0.05) - chordArm(twice, j, 0.05))).toBeLessThan(1e-3 * R);
      }),
    );
  });

  // An arc of radius ρ and angle θ: base to tip tangent ρ(1 − cos θ); sagitta of the chord ρ(1 − cos θ/2). Geometry.
  it('of one arc are its versine and its sagitta', () => {
    const shape = sampleSegments([{ length: 1.2, curvature: 1, plane: 2 }], 0.01);
    expect(tangentArm(shape, shape.count - 1)).toBeCloseTo(1 - Math.cos(1.2), 9);
    expect(chordArm(shape, shape.count - 1, 0)).toBeCloseTo(1 - Math.cos(0.6), 9);
  });

  it('of a straight body and of one without length are nothing', () => {
    const straight = sampleSegments([{ length: 2, curvature: 0, plane: 0 }], 0.01);
    expect(tangentArm(straight, straight.count - 1)).toBeCloseTo(0, 12);
    expect(chordArm(straight, straight.count - 1, 0.1)).toBeCloseTo(0, 12);
    expect(tangentArm(sampleSegments([], 1), 0)).toBe(0);
    expect(chordArm(sampleSegments([], 1), 0, 0)).toBe(0);
  });

  it('of a closed loop, whose tip lies on the guide, reach across it', () => {
    const shape = sampleSegments([{ length: 2 * Math.PI, curvature: 1, plane: 0 }], 0.01);
    shape.position.fill(0, 3 * (shape.count - 1));
    expect(chordArm(shape, shape.count - 1, 0)).toBeCloseTo(2, 4);
  });

  it('kept from tick to tick are those of the whole body worked out afresh', () => {
    const holding = {
      setback: 0.05,
      gravity: { ...WEIGHTLESS, weight: 2, direction: [0, 1, 0], supported: 0.3 },
    } as const;
    const laid = { length: 1, curvature: 0.8, plane: 0 };
    const kept = createArms(4, holding);
    const ticks = [
      { free: { length: 0.4, curvature: 1, plane: 1 }, from: 0 },
      { free: { length: 0.6, curvature: -1, plane: 2 }, from: 101 },
      { free: { length: 0.1, curvature: 0.3, plane: 0 }, from: 101 },
      { free: { length: 0.5, curvature: 0.3, plane: 0 }, from: 111 },
    ];
    for (const { free, from } of ticks) {
      const shape = sampleSegments([laid, free], 0.01);
      updateArms(kept, shape, from);
      const fresh = createArms(shape.count, holding);
      updateArms(fresh, shape, 0);
      expect(kept.count).toBe(fresh.count);
      for (const part of ['tangent', 'chord', 'moment'] as const)
        expect(kept[part].subarray(0, kept.count)).toEqual(fresh[part].subarray(0, fresh.count));
    }
  });

  it('searched over the hierarchy are those of one pass over all pairs, to 1e-9 of the radius', () => {
    const long = fc.array(
      fc.record({
        length: fc.double({ min: 0.01, max: 12, noNaN: true }),
        curvature: fc.oneof(fc.constant(0), fc.double({ min: -3, max: 3, noNaN: true })),
        plane: fc.double({ min: -4, max: 4, noNaN: true }),
      }),
      { minLength: 1, maxLength: 6 },
    );
    fc.assert(
      fc.property(long, (segments) => {
        const shape = sampleSegments(segments, 0.02);
        const arms = createArms(1, { setback: 0.06, gravity: WEIGHTLESS });
        updateArms(arms, shape, 0);
        for (let j = 0; j < shape.count; j++) {
          expect(Math.abs(arms.tangent[j]! - tangentArm(shape, j))).toBeLessThanOrEqual(1e-9 * R);
          expect(Math.abs(arms.chord[j]! - chordArm(shape, j, 0.06))).toBeLessThanOrEqual(1e-9 * R);
        }
      }),
      { numRuns: 40 },
    );
  });

  it.each(Object.keys(WINDINGS))('of 100 m at 1 cm, %s, are those of one pass over all pairs', (name) => {
    const shape = WINDINGS[name]!(100, 0.01);
    const arms = createArms(1, { setback: 0.06, gravity: WEIGHTLESS });
    updateArms(arms, shape, 0);
    expect(shape.count).toBe(10_001);
    for (let j = 0; j < shape.count; j += 7) {
      expect(Math.abs(arms.tangent[j]! - tangentArm(shape, j))).toBeLessThanOrEqual(1e-9 * R);
      expect(Math.abs(arms.chord[j]! - chordArm(shape, j, 0.06))).toBeLessThanOrEqual(1e-9 * R);
    }
  });

  it('kept while a body grows and comes back many times are those worked out afresh', () => {
    const free = fc.record({
      laid: fc.integer({ min: 0, max: 300 }),
      bent: fc.double({ min: -2, max: 2, noNaN: true }),
    });
    fc.assert(
      fc.property(fc.array(free, { minLength: 2, maxLength: 12 }), (steps) => {
        const kept = createArms(4, { setback: 0.05, gravity: WEIGHTLESS });
        let before = 0;
        for (const { laid, bent } of steps) {
          const shape = sampleSegments(
            [
              { length: laid / 100, curvature: 0.7, plane: 0.4 },
              { length: 0.6, curvature: bent, plane: 1 },
            ],
            // A hair above a centimetre, so that rounding adds no station.
            0.010001,
          );
          updateArms(kept, shape, Math.min(before, laid) + 1);
          before = laid;
          const fresh = createArms(shape.count, kept.holding);
          updateArms(fresh, shape, 0);
          for (const part of ['tangent', 'chord'] as const)
            for (let j = 0; j < shape.count; j++)
              expect(Math.abs(kept[part][j]! - fresh[part][j]!)).toBeLessThanOrEqual(1e-9 * R);
        }
      }),
      { numRuns: 30 },
    );
  });

  it('searched over the hierarchy are not a number where a station is not, wherever it is', () => {
    for (const [station, value] of [
      [0, Number.NaN],
      [1, Number.NaN],
      [16, Number.NaN],
      [40, Number.POSITIVE_INFINITY],
      [99, Number.NaN],
      [100, Number.NaN],
    ] as const) {
      const shape = sampleSegments([{ length: 1, curvature: 1, plane: 0 }], 0.01);
      shape.position[3 * station] = value;
      const arms = createArms(1, { setback: 0.06, gravity: WEIGHTLESS });
      updateArms(arms, shape, 0);
      expect(arms.tangent[100]).toBeNaN();
      expect(arms.chord[100]).toBeNaN();
    }
  });

  it('are not a number where one station is not', () => {
    const shape = sampleSegments([{ length: 1, curvature: 1, plane: 0 }], 0.01);
    shape.position[3 * 40] = Number.NaN;
    expect(tangentArm(shape, shape.count - 1)).toBeNaN();
    expect(chordArm(shape, shape.count - 1, 0)).toBeNaN();
  });
});
