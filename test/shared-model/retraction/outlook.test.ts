import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { WEIGHTLESS } from '../../../shared-model/mechanics/gravity-moment.ts';
import { createArms, updateArms } from '../../../shared-model/retraction/arms.ts';
import {
  computeOutlook,
  createOutlook,
  type Outlook,
  type PullConditions,
} from '../../../shared-model/retraction/outlook.ts';
import { sampleSegments } from '../../../shared-model/shape/segments.ts';
import { bodyB } from './way-back-input.ts';

const PARTS = ['baseTension', 'columnLoad', 'capacity', 'ratio'] as const;
// A hair above a centimetre, so that rounding adds no station.
const SPACING = 0.010001;
const holding = { setback: 0.05, gravity: WEIGHTLESS };
const bodyOf = (laid: number, bent: number) =>
  sampleSegments(
    [
      { length: laid / 100, curvature: 0.5, plane: 0.4 },
      { length: 0.3, curvature: bent, plane: 1 },
    ],
    SPACING,
  );

const expectSame = (kept: Outlook, fresh: Outlook): void => {
  expect(kept.count).toBe(fresh.count);
  expect(kept.tipTension).toBe(fresh.tipTension);
  for (const part of PARTS)
    for (let j = 0; j < fresh.count; j++)
      if (kept[part][j] !== fresh[part][j]) expect(kept[part][j]! / fresh[part][j]!).toBeCloseTo(1, 9);
};

describe('the outlook', () => {
  it('kept from tick to tick is the one worked out afresh, whatever changed in between', () => {
    const tick = fc.record({
      laid: fc.integer({ min: 0, max: 120 }),
      bent: fc.double({ min: -2, max: 2, noNaN: true }),
      pressure: fc.constantFrom(8000, 9000),
      excess: fc.constantFrom(0, 0.01),
      tipSpeed: fc.constantFrom(0, 0.1),
      shortest: fc.constantFrom(0, 0.2),
      friction: fc.constantFrom(0.2, 0.4),
      // A tick whose verdict nobody asked for leaves the outlook a revision behind.
      asked: fc.boolean(),
      again: fc.boolean(),
    });
    const bodies = new Map([0.2, 0.4].map((friction) => [friction, { ...bodyB, friction }]));
    fc.assert(
      fc.property(fc.array(tick, { minLength: 2, maxLength: 12 }), (ticks) => {
        const arms = createArms(4, holding);
        const kept = createOutlook(4);
        let before = 0;
        for (const { laid, bent, friction, asked, again, ...conditions } of ticks) {
          const shape = bodyOf(laid, bent);
          updateArms(arms, shape, Math.min(before, laid) + 1);
          before = laid;
          if (!asked) continue;
          const pull: PullConditions = { body: bodies.get(friction)!, ...conditions };
          computeOutlook(shape, arms, pull, kept);
          if (again) computeOutlook(shape, arms, pull, kept);
          const anew = createArms(shape.count, holding);
          updateArms(anew, shape, 0);
          expectSame(kept, computeOutlook(shape, anew, pull, createOutlook(shape.count)));
        }
      }),
      { numRuns: 60 },
    );
  });

  it('is at no pressure between two below the smaller of their ratios', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 500, max: 30_000, noNaN: true }),
        fc.double({ min: 0, max: 10_000, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: -3, max: 3, noNaN: true }),
        fc.integer({ min: 1, max: 400 }),
        fc.double({ min: 0, max: 0.5, noNaN: true }),
        fc.boolean(),
        (low, width, share, bent, laid, setback, fabric) => {
          const shape = bodyOf(laid, bent);
          const arms = createArms(shape.count, { ...holding, setback });
          updateArms(arms, shape, 0);
          const body = fabric ? { ...bodyB, wall: 1, E: 30_000, G: 0 } : bodyB;
          const ratioAt = (pressure: number) =>
            computeOutlook(
              shape,
              arms,
              { body, pressure, tipSpeed: 0, excess: 0, shortest: 0 },
              createOutlook(shape.count),
            ).ratio[shape.count - 1]!;
          const between = ratioAt(low + share * width);
          expect(between).toBeGreaterThanOrEqual(Math.min(ratioAt(low), ratioAt(low + width)) * (1 - 1e-9));
        },
      ),
      { numRuns: 300 },
    );
  });
});
