import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { solveCase } from '../../../shared-model/retraction/solve-case.ts';

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });

const bodies = fc.record({
  body: fc.record({
    radius: between(0.02, 0.15),
    wall: between(3e-5, 2e-4),
    E: between(5e7, 5e8),
    G: between(0, 2e8),
  }),
  pressure: between(2e3, 3e4),
  inversion: fc.record({
    yield: between(0, 3e3),
    rateCoefficient: between(1e-5, 1e-3),
    rateExponent: between(0.3, 1.5),
  }),
  tipSpeed: between(0, 0.3),
  friction: between(0, 0.6),
  tailWeight: between(0, 2),
  margin: between(1, 1.99),
  collapseFraction: between(0.3, 1),
  eccentricityFloor: between(0, 0.5),
  guideSetback: between(0, 0.3),
});
const bentSegments = fc.array(
  fc.record({ length: between(0.02, 0.8), curvature: between(-2, 2), plane: between(-4, 4) }),
  { minLength: 1, maxLength: 4 },
);
const gravity = fc.record({ weight: between(0, 3), payload: between(0, 5) });

const solved = (json: object) => {
  const result = solveCase(json);
  if (result.verdict === 'refuse') throw new Error(result.reason);
  return { ...result, ratio: result.ratio ?? Infinity, worstRatio: result.worst.ratio ?? Infinity };
};
const notAbove = (value: number, limit: number) => expect(value).toBeLessThanOrEqual(limit * (1 + 1e-9));

describe('the ratio of a straight body', () => {
  const straight = (length: number) => [{ length, curvature: 0, plane: 0 }];

  it('never rises with its length', () => {
    fc.assert(
      fc.property(bodies, between(0.01, 5), between(0, 2), (body, length, more) => {
        const short = solved({ ...body, segments: straight(length) });
        notAbove(solved({ ...body, segments: straight(length + more) }).ratio, short.ratio);
      }),
    );
  });

  it('never rises with arm, friction, tail weight, guide set-back, yield, speed or slack', () => {
    fc.assert(
      fc.property(bodies, between(0.01, 5), between(0, 1), (body, length, more) => {
        const segments = straight(length);
        const before = solved({ ...body, segments }).ratio;
        const raised = (change: object) => notAbove(solved({ ...body, segments, ...change }).ratio, before);
        raised({ eccentricityFloor: body.eccentricityFloor + more });
        raised({ friction: body.friction + more });
        raised({ tailWeight: body.tailWeight + more });
        raised({ guideSetback: body.guideSetback + more });
        raised({ inversion: { ...body.inversion, yield: body.inversion.yield + 1e3 * more } });
        raised({ tipSpeed: body.tipSpeed + more });
        raised({ payout: 2 * length + more });
      }),
    );
  });
});

describe('the verdict', () => {
  it('stays when the body is mirrored or rolled, or its bends are written the other way round', () => {
    fc.assert(
      fc.property(bodies, bentSegments, between(-4, 4), (body, segments, roll) => {
        const before = solved({ ...body, segments });
        const same = (turn: (one: (typeof segments)[number]) => (typeof segments)[number]) => {
          const after = solved({ ...body, segments: segments.map(turn) });
          expect(after.ratio).toBeCloseTo(before.ratio, 9);
          expect(after.worstRatio).toBeCloseTo(before.worstRatio, 6);
        };
        same((one) => ({ ...one, plane: one.plane + roll }));
        same((one) => ({ ...one, plane: -one.plane }));
        same((one) => ({ ...one, curvature: -one.curvature, plane: one.plane + Math.PI }));
      }),
      { numRuns: 40 },
    );
  });

  it('stays when body and gravity are rolled together', () => {
    fc.assert(
      fc.property(bodies, bentSegments, gravity, between(-4, 4), (body, segments, hanging, roll) => {
        const before = solved({ ...body, segments, gravity: { ...hanging, direction: [0, 1, 0] } });
        const after = solved({
          ...body,
          segments: segments.map((one) => ({ ...one, plane: one.plane + roll })),
          gravity: { ...hanging, direction: [-Math.sin(roll), Math.cos(roll), 0] },
        });
        expect(after.ratio).toBeCloseTo(before.ratio, 9);
      }),
      { numRuns: 40 },
    );
  });

  it('is never turned from a refusal into a permit by a larger margin', () => {
    fc.assert(
      fc.property(bodies, bentSegments, between(0, 0.9), (body, segments, more) => {
        const margin = Math.min(1.99, body.margin + more);
        const before = solved({ ...body, segments });
        const after = solved({ ...body, segments, margin });
        expect(before.verdict === 'buckle' && after.verdict === 'invert').toBe(false);
      }),
      { numRuns: 60 },
    );
  });

  it('never improves as more tail lies loose, nor as more hangs on the body', () => {
    fc.assert(
      fc.property(bodies, bentSegments, gravity, between(0, 3), (body, segments, hanging, more) => {
        const length = segments.reduce((sum, one) => sum + one.length, 0);
        const before = solved({ ...body, segments });
        const slack = solved({ ...body, segments, payout: 2 * length + more });
        notAbove(slack.ratio, before.ratio);
        const hung = solved({ ...body, segments, gravity: hanging });
        notAbove(hung.ratio, before.ratio);
      }),
      { numRuns: 40 },
    );
  });

  it('rests on a worst length that no length on the way undercuts', () => {
    fc.assert(
      fc.property(bodies, bentSegments, between(0, 1), between(0, 1), (body, segments, at, from) => {
        const whole = solved({ ...body, segments });
        const target = from * whole.length;
        const way = solved({ ...body, segments, retractTo: target });
        const cut = target + at * (whole.length - target);
        let left = cut;
        const kept = segments.flatMap((one) => {
          const length = Math.min(one.length, left);
          left -= length;
          return length > 0 ? [{ ...one, length }] : [];
        });
        expect(way.worst.length).toBeGreaterThanOrEqual(target);
        expect(way.worstRatio).toBeGreaterThanOrEqual(whole.worstRatio * (1 - 1e-6));
        expect(solved({ ...body, segments: kept }).ratio).toBeGreaterThanOrEqual(way.worstRatio * (1 - 1e-5));
      }),
      { numRuns: 80 },
    );
  });
});
