import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Readings } from '../../../shared-model/contract/reading.ts';
import { STILL } from '../../../shared-model/contract/request.ts';
import type { DriveRequest } from '../../../shared-model/retraction/drive-request.ts';
import { PermittedDrive } from '../../../shared-model/retraction/interlock.ts';
import type { WayBack } from '../../../shared-model/retraction/verdict.ts';
import { BUCKLE, CLEAR, good, HELD, HERE, NOW, READINGS, request, TRIP, wish } from './a-drive-request.ts';

const speeds = (over: Partial<DriveRequest> = {}) => {
  const { spoolSpeed, retractorSpeed } = PermittedDrive.judge(request(over)).drive.setpoints;
  return { spoolSpeed, retractorSpeed };
};
const refused = (over: Partial<DriveRequest>): string[] => {
  const { drive, refusal, tipSpeed } = PermittedDrive.judge(request(over));
  expect(drive.setpoints).toMatchObject({ spoolSpeed: 0, retractorSpeed: 0 });
  expect(tipSpeed).toBe(0);
  for (const reason of refusal?.reasons ?? []) expect(reason.remedy).not.toBe('');
  return (refusal?.reasons ?? []).map((reason) => reason.code);
};

describe('the interlock permits', () => {
  test('a pull that is judged clear, with the tail twice as fast as the tip (common practice)', () => {
    expect(speeds()).toEqual({ spoolSpeed: -0.2, retractorSpeed: 0 });
  });
  test('growth, at no more than the machine’s speed', () => {
    expect(speeds({ wish: wish('grow', { tipSpeed: 3 }) })).toEqual({ spoolSpeed: 0.5, retractorSpeed: 0 });
  });
  test('a pull by the tip retractor, with the spool only taking up', () => {
    const over = {
      wayBack: HELD,
      tipRetractorAttached: true,
      readings: { ...READINGS, tail_tension: good(0.3) },
    };
    expect(speeds(over).retractorSpeed).toBe(0.1);
    const coming = { ...over, body: { length: 1, tailSlack: 0.05, tipSpeed: -0.1 } };
    expect(speeds(coming).spoolSpeed).toBeCloseTo(-0.2, 12);
    // The spool follows the tip that is measured, not the one that is wanted.
    expect(speeds(over).spoolSpeed).toBeCloseTo(0, 12);
  });
  test('the slower of what is asked and what the distance to the target allows', () => {
    expect(speeds({ approachSpeed: 0.03 }).spoolSpeed).toBeCloseTo(-0.06, 12);
  });
});

describe('the interlock refuses', () => {
  test.each<[string, Partial<DriveRequest>, string]>([
    ['a pull predicted to buckle', { wayBack: BUCKLE }, 'would-buckle'],
    [
      'what it cannot judge',
      { wayBack: { kind: 'cannot-judge', reasons: [{ code: 'x', text: 't', remedy: 'r' }], text: '' } },
      'x',
    ],
    ['a verdict of an earlier tick', { judgedAt: NOW - 0.05 }, 'old-verdict'],
    ['a control that is not held', { leaseAlive: false }, 'not-held'],
    ['anything while the link is down', { linkOpen: false }, 'link'],
    ['a body of unknown length', { body: null }, 'estimate'],
    [
      'a pressure reading that is 400 ms old',
      { readings: { ...READINGS, body_pressure: { quality: 'good', value: 9000, at: NOW - 0.4 } } },
      'reading:body_pressure',
    ],
    [
      'a stale payout',
      { readings: { ...READINGS, tail_payout: { quality: 'stale', value: 2, at: NOW } } },
      'reading:tail_payout',
    ],
    [
      'a bad tension where the machine has a load cell',
      { readings: { ...READINGS, tail_tension: { quality: 'bad', why: 'w', at: NOW } } },
      'reading:tail_tension',
    ],
    [
      'motion while the emergency stop is pressed',
      { readings: { ...READINGS, emergency_stop: good(1) } },
      'emergency-stop',
    ],
    [
      'motion while a wired emergency stop cannot be read',
      { readings: { ...READINGS, emergency_stop: undefined } as unknown as Readings },
      'emergency-stop',
    ],
    [
      'a pull whose measured tension is above what the body bears with margin',
      { readings: { ...READINGS, tail_tension: good(121) } },
      'tension-trip',
    ],
    [
      'a tension above the machine’s limit',
      { readings: { ...READINGS, tail_tension: good(251) } },
      'tension-high',
    ],
    ['a pull from the base while the retractor grips', { tipRetractorAttached: true }, 'gripped'],
    ['a pull by a retractor that is not confirmed', { wayBack: HELD }, 'retractor-absent'],
    [
      'a pull by a retractor that has no drive',
      { wayBack: HELD, tipRetractorAttached: true, hasRetractorDrive: false },
      'retractor-drive',
    ],
    [
      'a pull while the spool holds more than the body bears',
      { wayBack: { ...HELD, held: 3.1 }, tipRetractorAttached: true },
      'held-tension',
    ],
    ['a target that is reached', { remaining: 0 }, 'no-way'],
    [
      'a target whose distance is not a number',
      { remaining: Number.NaN, approachSpeed: Number.NaN },
      'no-way',
    ],
    [
      'growth beyond the body’s length',
      { wish: wish('grow'), body: { length: 40, tailSlack: 0, tipSpeed: 0 } },
      'length-max',
    ],
    ['growth while the retractor grips', { wish: wish('grow'), tipRetractorAttached: true }, 'gripped'],
    [
      'growth above the pressure limit',
      { wish: wish('grow'), readings: { ...READINGS, body_pressure: good(15_500) } },
      'pressure-high',
    ],
    [
      'to go on after a drive that did not follow',
      { watch: { trip: TRIP, foldSuspected: null, loose: 0 } },
      'spool-drive',
    ],
    [
      'a pull while a fold is suspected',
      { watch: { trip: null, foldSuspected: { ...TRIP, code: 'suspected-fold' }, loose: 0 } },
      'suspected-fold',
    ],
    [
      'to let out more tail while some lies loose already',
      { wish: wish('grow'), watch: { trip: null, foldSuspected: null, loose: 0.31 } },
      'loose-tail',
    ],
    [
      'growth when nobody knows how much tail lies loose',
      { wish: wish('grow'), watch: { trip: null, foldSuspected: null, loose: Number.NaN } },
      'loose-tail',
    ],
    ['a shape estimated 400 ms ago', { shapeAt: NOW - 0.4 }, 'shape-old'],
    ['a shape of the future', { shapeAt: NOW + 0.1 }, 'shape-old'],
    ['a shape that was never estimated', { shapeAt: Number.NaN }, 'shape-old'],
    [
      'a pull by a retractor that lost its grip',
      { wayBack: HELD, grip: true, tipRetractorState: 'engaging' },
      'retractor-loose',
    ],
    [
      'a pull by a retractor whose flag cannot be read, also where the base alone could pull',
      { wayBack: CLEAR, grip: true, tipRetractorState: 'unknown' },
      'retractor-unread',
    ],
    ['growth that the pressure cannot drive', { wish: wish('grow'), growthPressure: 9100 }, 'growth-stalls'],
    [
      'growth of which nobody knows what it takes',
      { wish: wish('grow'), growthPressure: Number.NaN },
      'growth',
    ],
  ])('%s', (_, over, code) => {
    if ('hasRetractorDrive' in over) {
      expect(PermittedDrive.judge(request(over)).refusal?.reasons.map((reason) => reason.code)).toContain(
        code,
      );
      return;
    }
    expect(refused(over)).toContain(code);
  });

  test('a verdict called clear whose numbers are not', () => {
    for (const ratio of [1.2, Number.NaN]) {
      const wayBack: WayBack = {
        kind: 'clear',
        here: HERE,
        worst: { ...HERE, ratio },
        margin: 1.25,
        text: '',
      };
      expect(refused({ wayBack })).toContain('would-buckle');
    }
  });

  test('every number in turn that is missing, infinite or not a number', () => {
    for (const poison of [Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY]) {
      for (const signal of Object.keys(READINGS).filter((one) => !one.startsWith('muscle')))
        expect(
          refused({ readings: { ...READINGS, [signal]: { quality: 'good', value: poison, at: NOW } } })
            .length,
        ).toBeGreaterThan(0);
      for (const signal of ['body_pressure', 'tail_payout', 'tail_tension', 'emergency_stop'])
        expect(
          refused({
            readings: {
              ...READINGS,
              [signal]: {
                quality: 'good',
                value: 1,
                at: poison === Number.POSITIVE_INFINITY ? Number.NaN : poison,
              },
            },
          }).length,
        ).toBeGreaterThan(0);
    }
    for (const bad of [Number.NaN, Number.NEGATIVE_INFINITY]) {
      expect(refused({ approachSpeed: bad }).length).toBeGreaterThan(0);
      expect(refused({ wish: wish('retract', { tipSpeed: bad }) }).length).toBeGreaterThan(0);
      expect(refused({ body: { length: bad, tailSlack: 0, tipSpeed: 0 } }).length).toBeGreaterThan(0);
      expect(refused({ judgedAt: bad }).length).toBeGreaterThan(0);
      expect(refused({ now: bad }).length).toBeGreaterThan(0);
    }
  });

  test('steering beyond the muscles’ pressure, but not the growth that goes with it', () => {
    const judged = PermittedDrive.judge(
      request({ wish: wish('grow', { steer: { kind: 'straighten' } }), musclePressures: [Number.NaN] }),
    );
    expect(judged.drive.setpoints.musclePressures).toBeNull();
    expect(judged.refusal?.motion).toBe('steer');
  });

  test('a body pressure outside the limits', () => {
    for (const bodyPressure of [1999, 14_001, Number.NaN]) {
      const judged = PermittedDrive.judge(request({ wish: { ...STILL, pressure: 1 }, bodyPressure }));
      expect(judged.drive.setpoints.bodyPressure).toBeNull();
      expect(judged.refusal?.reasons[0]?.code).toBe('pressure-range');
    }
  });

  const pressureWish = (over: Partial<DriveRequest>) => {
    const judged = PermittedDrive.judge(request({ wish: { ...STILL, pressure: 1 }, ...over }));
    const codes = judged.refusal?.reasons.map((reason) => reason.code) ?? [];
    expect(judged.drive.setpoints.bodyPressure === null).toBe(codes.length > 0);
    return codes;
  };
  test('a body pressure that leaps instead of rising at the rate of the rig file', () => {
    expect(pressureWish({ bodyPressure: 9100, bodyPressureBefore: 9000 })).toEqual([]);
    expect(pressureWish({ bodyPressure: 9300, bodyPressureBefore: 9000 })).toEqual(['pressure-ramp']);
    expect(pressureWish({ bodyPressure: 8700, bodyPressureBefore: 9000 })).toEqual(['pressure-ramp']);
    expect(pressureWish({ bodyPressure: 9100, bodyPressureBefore: null })).toEqual(['pressure-ramp']);
  });
  test('never to lower the pressure, however far above limit and wall it is', () => {
    expect(pressureWish({ bodyPressure: 14_000, bodyPressureBefore: 15_500 })).toEqual([]);
    expect(pressureWish({ bodyPressure: 8900, bodyPressureBefore: 9000, hoopStrength: 100 })).toEqual([]);
    expect(pressureWish({ bodyPressure: 13_000, bodyPressureBefore: 15_500 })).toEqual(['pressure-ramp']);
  });
  // PR·4 ≤ strength: 9,000 Pa × 0.08 m × 4 = 2,880 N/m (thin shell; the factor is common practice).
  test('a body pressure that loads wall or seam beyond a fourth of its strength', () => {
    const over = { bodyPressure: 9000, bodyPressureBefore: 8900 };
    expect(pressureWish({ ...over, hoopStrength: 2880 })).toEqual([]);
    expect(pressureWish({ ...over, hoopStrength: 2879 })).toEqual(['hoop']);
    expect(pressureWish({ ...over, hoopStrength: Number.NaN })).toEqual(['hoop']);
    expect(pressureWish({ ...over, hoopStrength: null })).toEqual([]);
  });
  test('to ease a spool off that holds nothing, or that nobody sees grip', () => {
    const heldHigh: WayBack = {
      kind: 'cannot-judge',
      reasons: [{ code: 'held-tension', text: 't', remedy: 'r' }],
      text: '',
    };
    const over = { wish: wish('grow'), wayBack: heldHigh, tipRetractorAttached: true };
    expect(speeds(over)).toEqual({ spoolSpeed: 0.05, retractorSpeed: 0 });
    expect(speeds({ ...over, tipRetractorAttached: false, grip: true }).spoolSpeed).toBe(0);
    expect(speeds({ ...over, body: { length: 1, tailSlack: 0.2, tipSpeed: 0 } }).spoolSpeed).toBe(0);
    expect(speeds({ ...over, body: { length: 1, tailSlack: Number.NaN, tipSpeed: 0 } }).spoolSpeed).toBe(0);
    expect(speeds({ ...over, readings: { ...READINGS, tail_tension: good(0) } }).spoolSpeed).toBe(0);
    expect(speeds({ ...over, leaseAlive: false }).spoolSpeed).toBe(0);
    const also = { ...heldHigh, reasons: [...heldHigh.reasons, { code: 'x', text: 't', remedy: 'r' }] };
    expect(speeds({ ...over, wayBack: also }).spoolSpeed).toBe(0);
  });

  test('with all its reasons, not only the first', () => {
    expect(refused({ leaseAlive: false, linkOpen: false, wayBack: BUCKLE })).toEqual([
      'not-held',
      'link',
      'would-buckle',
    ]);
  });
});

describe('a permit', () => {
  test('cannot be forged by shape, clone or prototype', () => {
    const permit = PermittedDrive.holdStill(NOW, true);
    expect(PermittedDrive.isPermit(permit)).toBe(true);
    for (const forged of [
      structuredClone(permit),
      { setpoints: permit.setpoints },
      Object.create(PermittedDrive.prototype),
      null,
      5,
    ])
      expect(PermittedDrive.isPermit(forged)).toBe(false);
  });

  test('cannot be changed after it was judged', () => {
    const { setpoints } = PermittedDrive.judge(request()).drive;
    expect(() => {
      (setpoints as { spoolSpeed: number }).spoolSpeed = -1;
    }).toThrow();
  });

  test('whatever the state, the spool never pulls unless the verdict of this very tick allows it', () => {
    const verdicts = fc.constantFrom<WayBack>(CLEAR, BUCKLE, HELD, {
      kind: 'cannot-judge',
      reasons: [],
      text: '',
    });
    fc.assert(
      fc.property(
        verdicts,
        fc.boolean(),
        fc.boolean(),
        fc.boolean(),
        fc.double(),
        fc.double({ min: 0, max: 300 }),
        (wayBack, held, open, attached, judgedAt, tension) => {
          const late = Number.isFinite(judgedAt) && judgedAt > 0 ? NOW : judgedAt;
          const over = {
            wayBack,
            leaseAlive: held,
            linkOpen: open,
            tipRetractorAttached: attached,
            judgedAt: late,
            readings: { ...READINGS, tail_tension: good(tension) },
          };
          const { spoolSpeed } = PermittedDrive.judge(request(over)).drive.setpoints;
          const may =
            held &&
            open &&
            late === NOW &&
            ((wayBack === CLEAR && !attached && tension <= 120) ||
              (wayBack === HELD && attached && tension <= 250));
          if (!may) expect(Math.abs(spoolSpeed)).toBe(0);
        },
      ),
    );
  });
});
