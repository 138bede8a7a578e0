import { describe, expect, it } from 'vitest';
import { createArms, updateArms } from '../../../shared-model/retraction/arms.ts';
import { judgeWayBack } from '../../../shared-model/retraction/judge.ts';
import { bodyB, straight, wayBackInput } from './way-back-input.ts';

const STANDARD_ATMOSPHERE = 101_325; // Pa, ISO 2533

/** Each way in which a console could permit a pull that buckles: the body buckles, the slip alone would hide it. */
describe('a pull that buckles is not permitted by', () => {
  it('a payout that says more body than the shape, taken for the shape alone', () => {
    expect(judgeWayBack(wayBackInput(straight(0.4))).kind).toBe('clear');
    expect(judgeWayBack(wayBackInput(straight(0.4), { payout: 2 * 0.9 })).kind).toBe('would-buckle');
  });

  it('a payout halved once too often, or a reel counted with too small a wrap', () => {
    // The body is 0.9 m by its tail; whatever shorter length the count is taken for would be clear.
    const whole = wayBackInput(straight(0.9));
    expect(judgeWayBack(whole).kind).toBe('would-buckle');
    expect(judgeWayBack({ ...whole, payout: 0.9 }).kind).toBe('would-buckle');
  });

  it('an absolute pressure taken for a gauge pressure', () => {
    const body = { ...bodyB, E: 1e12, G: 1e12, inversion: { ...bodyB.inversion, yield: 6000 } };
    const gauge = wayBackInput(straight(0.4), { body, pressure: 6000 });
    expect(judgeWayBack({ ...gauge, pressure: 6000 + STANDARD_ATMOSPHERE }).kind).toBe('clear');
    expect(judgeWayBack(gauge).kind).toBe('would-buckle');
  });

  it('a stale pressure or payout, which comes as null', () => {
    const input = wayBackInput(straight(0.2));
    expect(judgeWayBack({ ...input, pressure: null }).kind).toBe('cannot-judge');
    expect(judgeWayBack({ ...input, payout: null }).kind).toBe('cannot-judge');
  });

  it.each(['position', 'tangent', 'bend', 's'] as const)('a station whose %s is not a number', (part) => {
    const sound = wayBackInput(straight(0.3));
    const { shape, arms } = sound;
    if (shape === null) throw new Error('no shape');
    const width = part === 'position' || part === 'tangent' ? 3 : 1;
    for (const station of [0, 15, shape.count - 1]) {
      const values = shape[part].slice().fill(Number.NaN, width * station, width * (station + 1));
      const broken = { ...shape, [part]: values };
      const brokenArms = createArms(shape.count, arms.holding);
      updateArms(brokenArms, broken, 0);
      const verdict = judgeWayBack({ ...sound, shape: broken, arms: brokenArms });
      expect(verdict.kind, `station ${station}`).toBe('cannot-judge');
    }
  });

  it('the smallest of no lengths at all, with a target beyond the tip', () => {
    const buckling = { target: 99 };
    expect(judgeWayBack(wayBackInput(straight(1.4), buckling)).kind).toBe('would-buckle');
    const held = { ...buckling, retractor: { heldTension: 40 } };
    expect(judgeWayBack(wayBackInput(straight(1.4), held)).kind).toBe('cannot-judge');
  });

  it('opposite bends cancelling each other', () => {
    const bends = (second: number) => [
      { length: 0.5, curvature: 4, plane: 0 },
      { length: 0.5, curvature: second, plane: 0 },
    ];
    const tension = (second: number): number => {
      const verdict = judgeWayBack(wayBackInput(bends(second)));
      if (verdict.kind !== 'would-buckle') throw new Error(verdict.text);
      return verdict.here.baseTension;
    };
    expect(tension(-4)).toBeCloseTo(tension(4), 10);
    // Euler–Eytelwein, 4 rad at μ = 0.3: in radians, not in degrees.
    expect(tension(-4) / 28.9027).toBeGreaterThan(Math.exp(0.3 * 4));
    expect(tension(-4) / 28.9027).toBeLessThan(1.02 * Math.exp(0.3 * 4));
  });

  it('arms sampled at the ends alone', () => {
    // A bow to the side that comes back onto its own line: base and tip lie on one line and look along it.
    const bow = [1, -1, -1, 1].map((side) => ({ length: 0.1, curvature: 2.5 * side, plane: 0 }));
    const body = { ...bodyB, friction: 0 };
    const { shape, arms } = wayBackInput(bow, { body });
    if (shape === null) throw new Error('no shape');
    const tip = shape.count - 1;
    expect(Math.abs(shape.position[3 * tip] as number)).toBeLessThan(1e-12);
    // Two versines in the middle, 2(1 − cos 0.25)/2.5 (geometry).
    expect(arms.tangent[tip]).toBeCloseTo((2 * (1 - Math.cos(0.25))) / 2.5, 8);
    expect(judgeWayBack(wayBackInput(straight(0.4), { body })).kind).toBe('clear');
    expect(judgeWayBack(wayBackInput(bow, { body })).kind).toBe('would-buckle');
  });

  it('a retractor flag that is stuck on while the spool carries the whole pull', () => {
    const body = straight(1.4);
    const pulled = judgeWayBack(wayBackInput(body));
    if (pulled.kind !== 'would-buckle') throw new Error(pulled.text);
    const retractor = { heldTension: pulled.here.baseTension };
    expect(judgeWayBack(wayBackInput(body, { retractor })).kind).toBe('cannot-judge');
  });

  it('a shape judged only where it is now', () => {
    const dogleg = [
      { length: 0.6, curvature: 0, plane: 0 },
      { length: 0.05 * Math.PI, curvature: 10, plane: 0 },
      { length: 0.05 * Math.PI, curvature: 10, plane: Math.PI },
      { length: 0.3, curvature: 0, plane: 0 },
    ];
    const body = { ...bodyB, E: 1e15, G: 1e15, friction: 0, radius: 0.4, collapseFraction: 1 };
    const verdict = judgeWayBack(wayBackInput(dogleg, { body, margin: 1.1 }));
    expect(verdict.kind === 'would-buckle' && verdict.here.ratio > 1.1).toBe(true);
  });

  it('arms that belong to an earlier shape', () => {
    const before = wayBackInput(straight(0.3));
    const { shape } = wayBackInput(straight(0.6));
    expect(judgeWayBack({ ...before, shape, payout: 1.2 }).kind).toBe('cannot-judge');
  });

  it('the tension at the tip taken for the one at the base', () => {
    const body = { ...bodyB, radius: 0.3, collapseFraction: 1, friction: 0.6, E: 1e12, G: 1e12 };
    const verdict = judgeWayBack(
      wayBackInput([{ length: 0.5, curvature: 1, plane: 0 }], { body, margin: 1.1 }),
    );
    if (verdict.kind !== 'would-buckle') throw new Error(verdict.text);
    expect(verdict.here.capacity / verdict.here.tipTension).toBeGreaterThan(1.1);
  });

  it('a margin on the wrong side', () => {
    const near = wayBackInput(straight(0.6), { margin: 1 });
    const verdict = judgeWayBack(near);
    if (verdict.kind !== 'clear') throw new Error(verdict.text);
    const { ratio } = verdict.worst;
    expect(judgeWayBack({ ...near, margin: ratio * 0.999 }).kind).toBe('clear');
    expect(judgeWayBack({ ...near, margin: ratio * 1.001 }).kind).toBe('would-buckle');
  });
});
