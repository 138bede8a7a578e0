import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { boundsOf, toScene } from '../../renderer/scene/to-scene.ts';
import { createTube, layTube, SIDES } from '../../renderer/scene/tube.ts';

describe('the drawn tube', () => {
  test('has every corner at its radius from the line, with normals pointing away from it', () => {
    const points = Array.from({ length: 40 }, (_, i) => [Math.sin(i / 10), 0.3 * Math.cos(i / 7), i / 10]);
    const tube = createTube(64);
    expect(layTube(tube, points.flat(), 0.08)).toBe(6 * SIDES * 39);
    for (let ring = 0; ring < 40; ring++)
      for (let side = 0; side < SIDES; side++) {
        const at = 3 * (ring * SIDES + side);
        const away = [0, 1, 2].map((axis) => tube.position[at + axis]! - points[ring]![axis]!);
        expect(Math.hypot(...away)).toBeCloseTo(0.08, 6);
        expect(away.reduce((sum, value, axis) => sum + value * tube.normal[at + axis]!, 0)).toBeCloseTo(
          0.08,
          6,
        );
      }
  });

  test('draws nothing of a body of no length', () => {
    expect(layTube(createTube(8), [0, 0, 0], 0.1)).toBe(0);
    expect(layTube(createTube(8), [], 0.1)).toBe(0);
  });

  test('is made of numbers whatever the points: repeated, folded back, more than there is room for', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: -2, max: 2 }), { minLength: 6, maxLength: 90 }), (flat) => {
        const tube = createTube(20);
        layTube(tube, flat, 0.05);
        expect([...tube.position, ...tube.normal].every(Number.isFinite)).toBe(true);
      }),
    );
  });
});

test('the scene has up where the base frame has minus down, and keeps its handedness', () => {
  expect(toScene([1, 2, 3])).toEqual([1, -2, -3]);
  expect(boundsOf(toScene([0, 0, 0, 0, 0, 9])).centre[2]).toBe(-4.5);
});
