import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  expireLease,
  LEASE_LIFE,
  type Lease,
  NEUTRAL_LEASE,
  releaseLease,
  renewLease,
  revokeLease,
  wishOf,
} from '../../../main/console/lease.ts';
import { STILL, type Wish } from '../../../shared-model/contract/request.ts';

const GROW: Wish = { ...STILL, motion: { kind: 'grow' }, tipSpeed: 0.1 };
const renewal = (press: number, seq: number, client = 'a') => ({ client, press, seq, wish: GROW });
const moves = (lease: Lease, now: number): boolean => wishOf(lease, now).motion.kind === 'grow';

describe('the hold-to-run lease', () => {
  test('moves while renewals keep coming and stops within its life after the last', () => {
    let lease = renewLease(NEUTRAL_LEASE, renewal(1, 0), 10);
    lease = renewLease(lease, renewal(1, 1), 10.2);
    expect(moves(lease, 10.2 + LEASE_LIFE - 0.001)).toBe(true);
    expect(moves(lease, 10.2 + LEASE_LIFE)).toBe(false);
  });

  test('is never extended by a renewal that comes after it lapsed, however many follow', () => {
    let lease = renewLease(NEUTRAL_LEASE, renewal(1, 0), 0);
    for (let seq = 1; seq < 50; seq++) lease = renewLease(lease, renewal(1, seq), 1 + seq / 100);
    expect(lease.state).toBe('burnt');
    expect(moves(lease, 1.02)).toBe(false);
  });

  test('is never extended by an old or a doubled renewal', () => {
    let lease = renewLease(NEUTRAL_LEASE, renewal(1, 0), 0);
    lease = renewLease(lease, renewal(1, 7), 0.1);
    for (const seq of [7, 6, 0]) lease = renewLease(lease, renewal(1, seq), 0.2);
    expect(moves(lease, 0.1 + LEASE_LIFE)).toBe(false);
  });

  test('needs a neutral hand and a fresh press once it is burnt', () => {
    const burnt = revokeLease(renewLease(NEUTRAL_LEASE, renewal(3, 0), 0), 'Stop was pressed.');
    expect(renewLease(burnt, renewal(4, 0), 0.01)).toBe(burnt);
    const neutral = releaseLease(burnt, 'a', 3);
    expect(renewLease(neutral, renewal(3, 0), 0.02).state).toBe('neutral');
    expect(renewLease(neutral, renewal(3, 9), 0.02).state).toBe('neutral');
    expect(renewLease(neutral, renewal(4, 0), 0.02).state).toBe('held');
  });

  test('does not begin in the middle of a press', () => {
    expect(renewLease(NEUTRAL_LEASE, renewal(1, 5), 0).state).toBe('neutral');
  });

  test('burns when a second press begins before the first was released', () => {
    const lease = renewLease(renewLease(NEUTRAL_LEASE, renewal(1, 0), 0), renewal(2, 0), 0.05);
    expect(lease.state).toBe('burnt');
  });

  test('is neither renewed nor released by another client', () => {
    const lease = renewLease(NEUTRAL_LEASE, renewal(1, 0), 0);
    expect(renewLease(lease, renewal(1, 1, 'b'), 0.2)).toBe(lease);
    expect(releaseLease(lease, 'b', 9)).toBe(lease);
  });

  test('outlives the late release of an earlier press', () => {
    const second = renewLease(
      releaseLease(renewLease(NEUTRAL_LEASE, renewal(1, 0), 0), 'a', 1),
      renewal(2, 0),
      0.05,
    );
    expect(releaseLease(second, 'a', 1)).toBe(second);
  });

  test('permits nothing at a time that is not a number', () => {
    const lease = renewLease(NEUTRAL_LEASE, renewal(1, 0), 0);
    expect(moves(lease, Number.NaN)).toBe(false);
    expect(expireLease(lease, Number.NaN).state).toBe('burnt');
  });

  test('whatever arrives in whatever order, motion never outlasts the newest accepted renewal', () => {
    const step = fc.record({
      gap: fc.double({ min: 0, max: 0.4, noNaN: true }),
      press: fc.integer({ min: 1, max: 4 }),
      seq: fc.integer({ min: 0, max: 6 }),
      release: fc.boolean(),
      client: fc.constantFrom('a', 'b'),
    });
    fc.assert(
      fc.property(fc.array(step, { maxLength: 40 }), (steps) => {
        let lease: Lease = NEUTRAL_LEASE;
        let now = 0;
        let accepted = Number.NEGATIVE_INFINITY;
        for (const { gap, press, seq, release, client } of steps) {
          now += gap;
          const before = lease;
          lease = release
            ? releaseLease(lease, client, press)
            : renewLease(lease, renewal(press, seq, client), now);
          if (lease.state === 'held' && lease !== before) accepted = now;
          if (before.state === 'burnt') expect(lease.state).not.toBe('held');
          expect(moves(lease, accepted + LEASE_LIFE)).toBe(false);
        }
      }),
    );
  });
});
