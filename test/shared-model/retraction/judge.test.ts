import { describe, expect, it } from 'vitest';
import { defaultMargin, judgeWayBack } from '../../../shared-model/retraction/judge.ts';
import type { WayBackInput } from '../../../shared-model/retraction/way-back-input.ts';
import { bodyB, straight, wayBackInput } from './way-back-input.ts';

const hook = [
  { length: 0.15, curvature: 0, plane: 0 },
  { length: 0.2, curvature: 3, plane: 0 },
];

describe('the verdict on the way back', () => {
  it('is clear for a short straight body and says the numbers', () => {
    const verdict = judgeWayBack(wayBackInput(straight(0.3)));
    expect(verdict.kind).toBe('clear');
    expect(verdict.text).toMatch(
      /^Pulling takes \d+ N at the base; the body folds at \d+ N \(ratio 1\.\d\d, needs 1\.25\)\.$/,
    );
  });

  it('is that the same body buckles once it is bent, and says the numbers', () => {
    const verdict = judgeWayBack(wayBackInput(hook));
    expect(verdict.kind).toBe('would-buckle');
    expect(verdict.text).toMatch(/^Pulling takes \d+ N at the base, but the body folds at [\d.]+ N/);
  });

  it('is clear for a body of no length, at any pressure', () => {
    for (const pressure of [10, 1e3, 1e5]) {
      const verdict = judgeWayBack(wayBackInput([], { pressure }));
      expect(verdict.kind).toBe('clear');
      expect(verdict.text).toBe('There is no body out that could fold.');
    }
  });

  it('says when it is gravity that folds the body', () => {
    const gravity = { weight: 10, payload: 0, direction: [0, 1, 0], supported: 0 } as const;
    const verdict = judgeWayBack(wayBackInput(straight(3), {}, { gravity }));
    expect(verdict.kind).toBe('would-buckle');
    expect(verdict.text).toBe('Gravity alone folds the body as it lies here.');
  });

  it('rests on both ends of the pressure sensor band', () => {
    const ratioAt = (body: typeof bodyB, pressure: number, pressureBand = 0): number => {
      const verdict = judgeWayBack(wayBackInput(straight(0.7), { body, pressure, pressureBand }));
      if (verdict.kind !== 'clear' && verdict.kind !== 'would-buckle') throw new Error(verdict.text);
      return verdict.worst.ratio;
    };
    // Film as a column: more pressure takes more tension than it gives load.
    const film = { ...bodyB, eccentricityFloor: 0, collapseFraction: 1 };
    expect(ratioAt(film, 12e3)).toBeLessThan(ratioAt(film, 8e3));
    expect(ratioAt(film, 10e3, 2e3)).toBeCloseTo(ratioAt(film, 12e3), 12);
    // A stiff column that folds by bending: less pressure leaves less to fold against.
    const stiff = { ...bodyB, E: 1e15, G: 1e15 };
    expect(ratioAt(stiff, 8e3)).toBeLessThan(ratioAt(stiff, 12e3));
    expect(ratioAt(stiff, 10e3, 2e3)).toBeCloseTo(ratioAt(stiff, 8e3), 12);
  });

  it('covers every length down to the target, and no further', () => {
    // A stiff, smooth body that comes back to its own line: harmless whole, folded once its tip looks sideways.
    const dogleg = [
      { length: 0.6, curvature: 0, plane: 0 },
      { length: 0.05 * Math.PI, curvature: 10, plane: 0 },
      { length: 0.05 * Math.PI, curvature: 10, plane: Math.PI },
      { length: 0.3, curvature: 0, plane: 0 },
    ];
    const stiff = {
      body: { ...bodyB, E: 1e15, G: 1e15, friction: 0, radius: 0.4, collapseFraction: 1 },
      margin: 1.1,
    };
    const toBase = judgeWayBack(wayBackInput(dogleg, stiff));
    const near = judgeWayBack(wayBackInput(dogleg, { ...stiff, target: 1 }));
    expect(near.kind).toBe('clear');
    expect(toBase.kind).toBe('would-buckle');
    if (toBase.kind !== 'would-buckle') return;
    expect(toBase.here.ratio).toBeGreaterThan(1.1);
    expect(toBase.worst.length).toBeCloseTo(0.6 + 0.05 * Math.PI, 1);
    expect(toBase.text).toContain('on the way back');
  });

  it('includes the station just below a target that lies between two', () => {
    const input = wayBackInput(straight(0.3));
    const { shape } = input;
    if (shape === null) throw new Error('no shape');
    input.arms.tangent[20] = 5;
    expect(judgeWayBack({ ...input, target: (shape.s[20] as number) + 0.004 }).kind).toBe('would-buckle');
    expect(judgeWayBack({ ...input, target: (shape.s[21] as number) + 0.004 }).kind).toBe('clear');
  });
});

describe('the verdict with a tip retractor', () => {
  const buckling = straight(1.4);

  it('is by tip retractor where the base pull would buckle', () => {
    expect(judgeWayBack(wayBackInput(buckling)).kind).toBe('would-buckle');
    const verdict = judgeWayBack(wayBackInput(buckling, { retractor: { heldTension: 1 } }));
    expect(verdict.kind).toBe('by-tip-retractor');
    if (verdict.kind !== 'by-tip-retractor') return;
    expect(verdict.heldMax).toBeCloseTo(verdict.here.capacity / 1.25, 10);
  });

  it('cannot be given while the spool holds more than the body bears with margin', () => {
    const allowed = judgeWayBack(wayBackInput(buckling, { retractor: { heldTension: 0 } }));
    if (allowed.kind !== 'by-tip-retractor') throw new Error(allowed.text);
    const at = (heldTension: number | null) =>
      judgeWayBack(wayBackInput(buckling, { retractor: { heldTension } })).kind;
    expect(at(allowed.heldMax)).toBe('by-tip-retractor');
    expect(at(allowed.heldMax * 1.001)).toBe('cannot-judge');
    for (const bad of [null, Number.NaN, -1, Number.POSITIVE_INFINITY]) expect(at(bad)).toBe('cannot-judge');
  });

  // PA ≥ m·(A/2)(P + Y_r) is P ≥ m·Y_r/(2 − m): with m = 1.25 and 1.5 kPa that is 2.5 kPa.
  it('cannot be given where the tip would crush', () => {
    const at = (pressure: number) =>
      judgeWayBack(wayBackInput(straight(0.3), { pressure, retractor: { heldTension: 0 } }));
    expect(at(2510).kind).toBe('by-tip-retractor');
    const crushed = at(2490);
    expect(crushed.kind === 'cannot-judge' && crushed.reasons[0]?.remedy).toBe('Raise body pressure.');
  });
});

describe('the margin', () => {
  it('is 1.25, and 1.5 while one of the deciding values is from a catalogue', () => {
    expect(defaultMargin(bodyB)).toBe(1.25);
    for (const missing of bodyB.measured)
      expect(defaultMargin({ ...bodyB, measured: bodyB.measured.filter((one) => one !== missing) })).toBe(
        1.5,
      );
  });

  it('outside 1 to below 2 lets nothing be judged', () => {
    const kind = (margin: number) => judgeWayBack(wayBackInput(straight(0.1), { margin })).kind;
    expect(kind(1)).toBe('clear');
    for (const margin of [0.999, 2, -1, Number.NaN]) expect(kind(margin)).toBe('cannot-judge');
  });
});

describe('a missing or unsound input', () => {
  const BAD = [Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY, -1, null, undefined];
  const INPUTS = ['pressure', 'pressureBand', 'payout', 'tipSpeed', 'target', 'margin'] as const;
  const BODY = [
    'radius',
    'wall',
    'E',
    'G',
    'friction',
    'tailWeight',
    'eccentricityFloor',
    'collapseFraction',
  ] as const;
  const sound = (): WayBackInput => wayBackInput(straight(0.3));

  it.each(INPUTS)('%s lets nothing be judged and says what to do', (name) => {
    for (const bad of BAD) {
      const verdict = judgeWayBack({ ...sound(), [name]: bad } as WayBackInput);
      expect(verdict.kind, String(bad)).toBe('cannot-judge');
      if (verdict.kind === 'cannot-judge') expect(verdict.reasons[0]?.remedy).not.toBe('');
    }
  });

  it.each(BODY)('of the body, its %s, lets nothing be judged', (name) => {
    for (const bad of BAD) {
      const body = { ...bodyB, [name]: bad } as typeof bodyB;
      expect(judgeWayBack({ ...sound(), body }).kind, String(bad)).toBe('cannot-judge');
    }
  });

  it.each(['yield', 'rateExponent'] as const)('of the inversion, its %s, lets nothing be judged', (name) => {
    for (const bad of BAD) {
      if (name === 'rateExponent' && bad === Number.POSITIVE_INFINITY) continue;
      const body = { ...bodyB, inversion: { ...bodyB.inversion, [name]: bad } } as typeof bodyB;
      expect(judgeWayBack({ ...sound(), body }).kind, String(bad)).toBe('cannot-judge');
    }
  });

  it.each(['weight', 'payload', 'supported'] as const)(
    'of what hangs on it, its %s, lets nothing be judged',
    (name) => {
      for (const bad of BAD) {
        if (name === 'supported' && bad === Number.POSITIVE_INFINITY) continue;
        const gravity = { weight: 1, payload: 1, direction: [0, 1, 0], supported: 0, [name]: bad } as never;
        expect(judgeWayBack(wayBackInput(straight(0.3), {}, { gravity })).kind, String(bad)).toBe(
          'cannot-judge',
        );
      }
    },
  );

  it('of where down is lets nothing be judged that hangs', () => {
    const gravity = { weight: 1, payload: 1, direction: [0, 0, 0], supported: 0 } as const;
    expect(judgeWayBack(wayBackInput(straight(0.3), {}, { gravity })).kind).toBe('cannot-judge');
  });

  it('names everything that is missing, not only the first', () => {
    const verdict = judgeWayBack({ ...sound(), shape: null, pressure: null, payout: null });
    if (verdict.kind !== 'cannot-judge') throw new Error(verdict.kind);
    expect(verdict.reasons.map((reason) => reason.code)).toEqual(['shape', 'pressure', 'payout']);
  });

  it('is a pressure within the error of its sensor', () => {
    expect(judgeWayBack({ ...sound(), pressure: 90, pressureBand: 100 }).kind).toBe('cannot-judge');
  });
});
