import fc from 'fast-check';
import { expect, test } from 'vitest';
import { ARRIVED, approachSpeed } from '../../../main/console/approach.ts';

test('a tip that obeys late and brakes at its limit stops within 2 cm of the target', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0.05, max: 5, noNaN: true }),
      fc.double({ min: 0.02, max: 0.4, noNaN: true }),
      (far, top) => {
        let remaining = far;
        let speed = 0;
        const asked: number[] = [];
        for (let tick = 0; tick < 20_000 && !(asked.at(-1) === 0 && speed === 0); tick++) {
          asked.push(Math.min(top, approachSpeed(remaining)));
          // Two ticks late, then the drive's ramp.
          const wanted = asked[asked.length - 3] ?? 0;
          speed += Math.max(-0.8 * 0.05, Math.min(0.8 * 0.05, wanted - speed));
          remaining -= speed * 0.05;
        }
        expect(Math.abs(remaining)).toBeLessThan(0.02);
      },
    ),
    { numRuns: 200 },
  );
});

test('the tip does not move at or beyond its target, and an unknown distance is not a speed', () => {
  for (const remaining of [ARRIVED, 0, -1]) expect(approachSpeed(remaining)).toBe(0);
  expect(approachSpeed(Number.NaN)).toBeNaN();
});
