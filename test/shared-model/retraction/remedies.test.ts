import { describe, expect, it } from 'vitest';
import type { Limits } from '../../../shared-model/body/body.ts';
import { judgeWayBack } from '../../../shared-model/retraction/judge.ts';
import { outlookLine } from '../../../shared-model/retraction/outlook-line.ts';
import { findRemedies, remedied } from '../../../shared-model/retraction/remedies.ts';
import type { Remedy } from '../../../shared-model/retraction/verdict.ts';
import type { WayBackInput } from '../../../shared-model/retraction/way-back-input.ts';
import { bodyB, straight, wayBackInput } from './way-back-input.ts';

const limits: Limits = {
  tipSpeed: 0.1,
  bodyPressureMin: 2e3,
  bodyPressureMax: 15e3,
  bodyPressureRate: 1e3,
  musclePressureMax: 5e4,
  bendRate: 1,
  bodyLengthMax: 10,
  tailTensionMax: 200,
  pressureAccuracy: 100,
  readingAge: 0.3,
  tailSlackMax: 0.3,
};
const hooked = [
  { length: 0.2, curvature: 0, plane: 0 },
  { length: 0.15, curvature: 4, plane: 0 },
];
const long = straight(0.85);
const filmAtHighPressure: Partial<WayBackInput> = {
  body: { ...bodyB, eccentricityFloor: 0, collapseFraction: 1 },
  pressure: 15e3,
};

const only = (kind: Remedy['kind'], remedies: readonly Remedy[]): Remedy | undefined =>
  remedies.find((remedy) => remedy.kind === kind);

describe('the remedies of a pull that would buckle', () => {
  it('are none where the pull is clear or cannot be judged', () => {
    expect(findRemedies(wayBackInput(straight(0.2)), limits, true)).toEqual([]);
    expect(findRemedies({ ...wayBackInput(long), pressure: null }, limits, true)).toEqual([]);
  });

  it('begin with the tip retractor, on rigs that can have one', () => {
    expect(findRemedies(wayBackInput(hooked), limits, true)[0]?.kind).toBe('tip-retractor');
    expect(only('tip-retractor', findRemedies(wayBackInput(hooked), limits, false))).toBeUndefined();
  });

  it('offer a pressure within limits that clears the pull, with the ratio it gives', () => {
    const input = wayBackInput(long, { ...filmAtHighPressure, margin: 1 });
    const remedy = only('body-pressure', findRemedies(input, limits, false));
    if (!remedy) throw new Error('no pressure offered');
    expect(remedy.text).toMatch(/^Lower body pressure to \d+\.\d\d kPa: ratio 1\.\d\d\.$/);
    const value = remedy.value as number;
    const tried = judgeWayBack({ ...input, pressure: value });
    expect(tried.kind).toBe('clear');
    expect(tried.kind === 'clear' && tried.worst.ratio).toBeCloseTo(remedy.ratio as number, 10);
    // No other pressure within limits does noticeably better.
    for (let pressure = limits.bodyPressureMin; pressure <= limits.bodyPressureMax; pressure += 250) {
      const other = judgeWayBack({ ...input, pressure });
      if (other.kind === 'clear') expect(other.worst.ratio).toBeLessThan(1.002 * (remedy.ratio as number));
    }
  });

  it('say of a pressure that only comes nearer that it is not enough', () => {
    const remedy = only(
      'body-pressure',
      findRemedies(wayBackInput(straight(1.3), filmAtHighPressure), limits, false),
    );
    expect(remedy?.text).toMatch(/^Lower body pressure .* not enough by itself\.$/);
    expect(remedy?.ratio).toBeLessThan(1.25);
  });

  it('offer no pressure where none helps', () => {
    const body = { ...bodyB, E: 1e15, G: 1e15, inversion: { ...bodyB.inversion, yield: 0 } };
    const input = wayBackInput(hooked, { body, pressure: 10e3 });
    expect(only('body-pressure', findRemedies(input, limits, false))).toBeUndefined();
  });

  it('offer to straighten no more of the tip than is needed, and it is enough', () => {
    const input = wayBackInput(hooked);
    const remedy = only('straighten', findRemedies(input, limits, false));
    if (!remedy) throw new Error('no straightening offered');
    const needed = remedy.value as number;
    expect(needed).toBeGreaterThan(0.02);
    expect(needed).toBeLessThan(0.15);
    const straightened = (length: number) =>
      judgeWayBack(
        wayBackInput([
          { length: 0.2, curvature: 0, plane: 0 },
          { length: 0.15 - length, curvature: 4, plane: 0 },
          { length, curvature: 0, plane: 0 },
        ]),
      ).kind;
    expect(straightened(needed)).toBe('clear');
    expect(straightened(needed - 0.02)).toBe('would-buckle');
  });

  it('do not offer to straighten what is laid and can no longer be steered', () => {
    const body = { ...bodyB, freeEnd: 0.03 };
    expect(only('straighten', findRemedies(wayBackInput(hooked, { body }), limits, false))).toBeUndefined();
  });

  it('do not offer to straighten a body that is too long even when straight', () => {
    expect(only('straighten', findRemedies(wayBackInput(straight(2)), limits, false))).toBeUndefined();
  });

  it('say the longest this shape can be pulled from', () => {
    const remedy = only('shorter', findRemedies(wayBackInput(hooked), limits, false));
    const value = remedy?.value as number;
    const upTo = (length: number) =>
      judgeWayBack(wayBackInput([hooked[0]!, { ...hooked[1]!, length: length - 0.2 }])).kind;
    expect(upTo(value)).toBe('clear');
    expect(upTo(value + 0.01)).toBe('would-buckle');
  });

  it('offer no pressure that wall or seam may not bear', () => {
    // A fabric that is pulled too low: without a wall's limit, a higher pressure is offered.
    const weak = { ...bodyB, wall: 1, E: 10_000, G: 0, eccentricityFloor: 0, collapseFraction: 1 };
    const input = (hoopStrength: number | null) =>
      wayBackInput(straight(0.6), { body: { ...weak, hoopStrength }, pressure: 2.2e3, margin: 1.04 });
    const offered = (hoopStrength: number | null) =>
      only('body-pressure', findRemedies(input(hoopStrength), limits, false))?.value ?? 0;
    expect(offered(null)).toBeGreaterThan(2600);
    // PR·4 = 2,600 Pa × 0.04 m × 4 (thin shell; the factor is common practice).
    expect(offered(2600 * 0.04 * 4)).toBeLessThanOrEqual(2600);
    expect(offered(1000 * 0.04 * 4)).toBe(0);
  });

  it('can each be shown as the outlook that they give, which ends in the ratio they promise', () => {
    const pressured = wayBackInput(long, { ...filmAtHighPressure, margin: 1 });
    const bent = wayBackInput(
      [
        { length: 0.2, curvature: 0, plane: 0 },
        { length: 0.15, curvature: 4, plane: 0 },
      ],
      { margin: 1.2 },
    );
    for (const input of [pressured, bent])
      for (const remedy of findRemedies(input, limits, true)) {
        const shown = remedied(input, remedy);
        if (remedy.kind === 'tip-retractor' || remedy.kind === 'shorter') expect(shown).toBeNull();
        else {
          const { low, high } = shown!.space;
          const worst = Math.min(...low.ratio.subarray(0, low.count), ...high.ratio.subarray(0, high.count));
          expect(worst).toBeCloseTo(remedy.ratio as number, 6);
          const line = outlookLine(shown!.shape, shown!.space, input.margin);
          expect(line.length.at(-1)).toBeCloseTo(input.shape!.s[input.shape!.count - 1]!, 3);
        }
      }
  });
});
