import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { judgeWayBack } from '../../shared-model/retraction/judge.ts';
import { solveCase } from '../../shared-model/retraction/solve-case.ts';
import { bodyB, wayBackInput } from '../shared-model/retraction/way-back-input.ts';

const arc = fc.record({
  length: fc.double({ min: 0.25, max: 0.8, noNaN: true }),
  curvature: fc.double({ min: -1, max: 1, noNaN: true }),
  plane: fc.double({ min: -3, max: 3, noNaN: true }),
});

describe('foldback outlook and the console', () => {
  it('say the same of the same body: forces, worst place on the way back, verdict', () => {
    fc.assert(
      fc.property(
        fc.array(arc, { minLength: 1, maxLength: 4 }),
        fc.double({ min: 3000, max: 15_000, noNaN: true }),
        fc.double({ min: 0, max: 0.1, noNaN: true }),
        fc.double({ min: 1, max: 1.9, noNaN: true }),
        (segments, pressure, guideSetback, margin) => {
          const body = { ...bodyB, guideSetback };
          const verdict = judgeWayBack(wayBackInput(segments, { body, pressure, margin }));
          const { radius, wall, E, G, inversion, friction, tailWeight, collapseFraction, eccentricityFloor } =
            body;
          const solved = solveCase({
            id: 1,
            body: { radius, wall, E, G },
            pressure,
            inversion: { yield: inversion.yield },
            friction,
            tailWeight,
            collapseFraction,
            eccentricityFloor,
            guideSetback,
            margin,
            segments,
          });
          if (solved.verdict === 'refuse') throw new Error(solved.reason);
          if (verdict.kind !== 'clear' && verdict.kind !== 'would-buckle') throw new Error(verdict.text);
          expect(verdict.here.baseTension / solved.baseTension).toBeCloseTo(1, 6);
          expect(verdict.here.columnLoad / solved.columnLoad).toBeCloseTo(1, 6);
          expect(verdict.here.capacity / solved.capacity).toBeCloseTo(1, 4);
          // The console judges whole centimetres, and bodies below five radii as if of five: never bolder by more than that.
          const worst = solved.worst.ratio as number;
          expect(verdict.worst.ratio / worst).toBeLessThan(1.002);
          expect(verdict.worst.ratio / worst).toBeGreaterThan(0.9);
          if (Math.abs(worst / margin - 1) > 0.1)
            expect(verdict.kind).toBe(solved.verdict === 'invert' ? 'clear' : 'would-buckle');
        },
      ),
      { numRuns: 60 },
    );
  });
});
