import { describe, expect, it } from 'vitest';
import { computeOutlook, createOutlook } from '../../../shared-model/retraction/outlook.ts';
import { bodyB, wayBackInput } from '../retraction/way-back-input.ts';

const baseTension = (segments: Parameters<typeof wayBackInput>[0], holding = {}, excess = 0): number => {
  const { shape, arms } = wayBackInput(segments, {}, holding);
  if (shape === null) throw new Error('no shape');
  const pull = { body: bodyB, pressure: 10e3, tipSpeed: 0, excess, shortest: 0 };
  return computeOutlook(shape, arms, pull, createOutlook(shape.count)).baseTension[shape.count - 1] as number;
};
const tipTension = 28.9027;

describe('the pull at the base', () => {
  it('is what is left of stepping from the tip to the base, friction picked up far out amplified by the bends nearer', () => {
    const segments = [
      { length: 0.7, curvature: 1.5, plane: 0 },
      { length: 0.5, curvature: 0, plane: 0 },
      { length: 0.9, curvature: -1.1, plane: 2 },
    ];
    let tension = tipTension;
    const steps = 210_000;
    for (let i = 0; i < steps; i++) {
      const s = 2.1 - (i * 2.1) / steps;
      const curvature = s < 0.7 ? 1.5 : s < 1.2 ? 0 : 1.1;
      tension += 0.3 * (tension * curvature + 0.3) * (2.1 / steps);
    }
    expect(baseTension(segments)).toBeCloseTo(tension, 3);
  });

  it('counts tail that lies loose as straight tail at the base', () => {
    const arc = [{ length: 1, curvature: 1, plane: 0 }];
    expect(baseTension(arc, {}, 2) - baseTension(arc)).toBeCloseTo(0.3 * 0.3 * 2, 10);
  });

  it('lifts the tail out of a tip below the base and takes no credit for one above', () => {
    const held = (direction: readonly [number, number, number]) => ({
      gravity: { weight: 0, payload: 0, direction, supported: Number.POSITIVE_INFINITY },
    });
    const ahead = [{ length: 2, curvature: 0, plane: 0 }];
    const level = baseTension(ahead, held([0, 1, 0]));
    expect(baseTension(ahead, held([0, 0, 1])) - level).toBeCloseTo(0.3 * 2, 10);
    expect(baseTension(ahead, held([0, 0, -1]))).toBeCloseTo(level, 10);
    expect(baseTension(ahead)).toBeCloseTo(level, 10);
  });
});
