import { expect, test } from 'vitest';
import type { Muscles } from '../../shared-model/body/body.ts';
import { maximumContraction, mckibbenForce } from '../../shared-model/steering/mckibben.ts';
import { bendOfContractions } from '../../shared-model/steering/muscle-bend.ts';

const three = (offset: number): Muscles => ({
  muscles: [0, 1, 2].map((i) => ({ angle: offset + (2 * Math.PI * i) / 3 })),
  radius: 0.05,
  contraction: [
    [0, 0],
    [1, 0.3],
  ],
  bendGain: 1,
});

test('three muscles of lengths 0.9, 1 and 1 bend as in the closed form (Webster & Jones, IJRR 2010; their first actuator lies at +90°)', () => {
  const bend = bendOfContractions(three(Math.PI / 2), [0.1, 0, 0]);
  expect(Math.hypot(bend.right, bend.down)).toBeCloseTo(1.37931, 5);
  expect(Math.atan2(bend.down, bend.right)).toBeCloseTo(Math.PI / 2, 9);
  expect(bend.centreline).toBeCloseTo(0.96667, 5);
});

test.each([
  [20, 0.385597],
  [25, 0.362964],
  [30, 1 / 3],
])('a braid of %d° contracts by at most %f (Tondu & Lopez 2000, from memory)', (degrees, most) => {
  expect(maximumContraction((degrees * Math.PI) / 180)).toBeCloseTo(most, 5);
});

test('a braid of 54.7356° pulls at no contraction (Tondu & Lopez 2000, from memory)', () => {
  const muscle = { radius: 0.01, braidAngle: (54.7356 * Math.PI) / 180 };
  expect(Math.abs(mckibbenForce(muscle, 100_000, 0))).toBeLessThan(1e-4);
});
