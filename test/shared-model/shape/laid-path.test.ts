import { describe, expect, test } from 'vitest';
import { bodyLine } from '../../../shared-model/shape/body-line.ts';
import { createLaidPath, type LayRule, layTo } from '../../../shared-model/shape/laid-path.ts';
import { tipPose } from '../../../shared-model/shape/segments.ts';

const FREE: LayRule = { freeEnd: Number.POSITIVE_INFINITY, onGround: false, gravity: [0, 1, 0] };
const LAID: LayRule = { ...FREE, freeEnd: 0.5 };
const GROUND: LayRule = { ...LAID, onGround: true };
const bend = (right: number, down = 0) => ({ right, down });

describe('the laid path', () => {
  test('that bends as a whole ends where a quarter circle of length 1 ends: (2/π, 0, 2/π) (geometry)', () => {
    const path = createLaidPath();
    layTo(path, 1, bend(Math.PI / 2), FREE);
    expect(path.tip.position[0]).toBeCloseTo(2 / Math.PI, 9);
    expect(path.tip.position[2]).toBeCloseTo(2 / Math.PI, 9);
    expect(path.s[path.count - 1]).toBe(1);
  });

  test('keeps each part as it was laid, grown in small steps or in one', () => {
    const fine = createLaidPath();
    for (let length = 0.003; length <= 3; length += 0.003)
      layTo(fine, length, bend(length < 1.5 ? 0 : 0.4), LAID);
    layTo(fine, 3, bend(0.4), LAID);
    // Laid straight until the free end, half a metre long, began to bend; then at 0.4 per metre.
    const expected = tipPose([
      { length: 1, curvature: 0, plane: 0 },
      { length: 2, curvature: 0.4, plane: 0 },
    ]);
    // The joint of the free end lies on a whole station, so up to 1 cm of it may be laid later.
    for (const axis of [0, 1, 2])
      expect(Math.abs(fine.tip.position[axis]! - expected.position[axis]!)).toBeLessThan(0.015);
  });

  test('is the same after it was taken back and grown again with the same bend', () => {
    const path = createLaidPath();
    for (let length = 0.01; length < 4; length += 0.01) layTo(path, length, bend(0.3), LAID);
    const before = [...path.position.slice(0, 3 * path.count)];
    for (let length = 4; length > 1.2; length -= 0.01) layTo(path, length, bend(0.3), LAID);
    for (let length = 1.2; length < 4; length += 0.01) layTo(path, length, bend(0.3), LAID);
    layTo(path, 3.99, bend(0.3), LAID);
    before.slice(0, 900).forEach((value, i) => expect(path.position[i]).toBeCloseTo(value, 9));
  });

  test('on the ground keeps no bend up or down, in any direction it lies', () => {
    const path = createLaidPath();
    for (let length = 0.01; length < 3; length += 0.01) layTo(path, length, bend(0.5, -0.8), GROUND);
    for (let i = 0; i < path.laid; i++) expect(Math.abs(path.position[3 * i + 1]!)).toBeLessThan(1e-9);
    expect(path.tip.position[1]).toBeLessThan(-0.05);
  });

  test('says from which station on it changed, and that nothing did', () => {
    const path = createLaidPath();
    layTo(path, 2, bend(0), LAID);
    const before = path.position.slice(0, 3 * path.count);
    const changed = layTo(path, 2.1, bend(0.3), LAID);
    for (let i = 0; i < 3 * changed; i++) expect(path.position[i]).toBe(before[i]);
    expect(changed).toBeGreaterThan(100);
    expect(layTo(path, 2.1, bend(0.3), LAID)).toBe(path.count);
  });

  test('thinned for drawing keeps base, joint and tip', () => {
    const path = createLaidPath();
    layTo(path, 30, bend(0), LAID);
    const line = bodyLine(path, 100);
    expect(line.points.length / 3).toBeLessThanOrEqual(103);
    expect(line.points.slice(0, 3)).toEqual([0, 0, 0]);
    expect(line.points.at(-1)).toBe(30);
    expect(line.points[3 * line.laid - 1]).toBeCloseTo(29.5, 2);
  });
});
