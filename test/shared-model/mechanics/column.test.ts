import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { columnLoad } from '../../../shared-model/mechanics/column.ts';

/**
 * Sideways place of the tip, in units of the place that the line of pull was drawn to, of a clamped beam of unit length
 * under the load F through a guide a distance `a` behind the clamp: θ' = m/EI, y' = θ − m'/S with the moment
 * m = F·((x + a)/(1 + a) − y), by the classical Runge–Kutta method. It is 1 at the buckling load.
 */
const tipPlace = (F: number, EI: number, S: number, a: number): number => {
  const steps = 200;
  const h = 1 / steps;
  const slope = (theta: number): number => (theta - F / S / (1 + a)) / (1 - F / S);
  const bend = (x: number, y: number): number => (F * ((x + a) / (1 + a) - y)) / EI;
  let [y, theta] = [0, 0];
  for (let i = 0; i < steps; i++) {
    const x = i * h;
    const [y1, t1] = [slope(theta), bend(x, y)];
    const [y2, t2] = [slope(theta + (h / 2) * t1), bend(x + h / 2, y + (h / 2) * y1)];
    const [y3, t3] = [slope(theta + (h / 2) * t2), bend(x + h / 2, y + (h / 2) * y2)];
    const [y4, t4] = [slope(theta + h * t3), bend(x + h, y + h * y3)];
    y += (h / 6) * (y1 + 2 * y2 + 2 * y3 + y4);
    theta += (h / 6) * (t1 + 2 * t2 + 2 * t3 + t4);
  }
  return y;
};

/** The smallest load at which the pulled-over beam stays where the pull has it. */
const integratedLoad = (EI: number, S: number, a: number): number => {
  const most = (Math.PI ** 2 * EI * S) / (Math.PI ** 2 * EI + S);
  let high = most / 200;
  while (high < most && tipPlace(high, EI, S, a) < 1) high += most / 200;
  let low = high - most / 200;
  for (let i = 0; i < 50; i++) {
    const middle = (low + high) / 2;
    if (tipPlace(middle, EI, S, a) < 1) low = middle;
    else high = middle;
  }
  return low;
};

describe('the column', () => {
  it.each([
    [1, 1e9, 0],
    [1, 1e9, 0.1],
    [1, 1e9, 2],
    [1, 20, 0.1],
    [1, 5, 0.5],
    [2, 3, 0.02],
  ])(
    'of EI %s and S %s with the guide %s lengths back buckles where the integrated beam does',
    (EI, S, a) => {
      expect(columnLoad(EI, S, 1, a) / integratedLoad(EI, S, a)).toBeCloseTo(1, 6);
    },
  );

  const stiffness = fc.double({ min: 1e-3, max: 1e6, noNaN: true });
  const metres = fc.double({ min: 0, max: 100, noNaN: true });

  it('never bears more when it is longer or its guide further back', () => {
    fc.assert(
      fc.property(stiffness, stiffness, metres, metres, metres, metres, (EI, S, L, more, a, back) => {
        const load = columnLoad(EI, S, L, a);
        expect(columnLoad(EI, S, L + more, a)).toBeLessThanOrEqual(load * (1 + 1e-12));
        expect(columnLoad(EI, S, L, a + back)).toBeLessThanOrEqual(load * (1 + 1e-12));
      }),
    );
  });

  it('has no load where one of its values is not a number', () => {
    const sound = [1, 1, 1, 0.1];
    sound.forEach((_, i) => {
      const [EI, S, L, a] = sound.with(i, Number.NaN) as [number, number, number, number];
      expect(columnLoad(EI, S, L, a)).toBeNaN();
    });
  });
});
