import { describe, expect, test } from 'vitest';
import {
  createTipRetractor,
  retractorState,
  retractorStatus,
  type TipRetractor,
} from '../../../main/console/tip-retractor.ts';
import type { Readings } from '../../../shared-model/contract/reading.ts';
import type { WayBack } from '../../../shared-model/retraction/verdict.ts';

const NOW = 100;
const flag = (value: number, at = NOW): Readings => ({
  tip_retractor_attached: { quality: 'good', value, at },
});
const sensed = (over: Partial<TipRetractor>): TipRetractor => ({ ...createTipRetractor(true), ...over });
const state = (retractor: TipRetractor, readings: Readings) => retractorState(retractor, readings, NOW, 0.3);
const HELD: WayBack = {
  kind: 'cannot-judge',
  reasons: [{ code: 'held-tension', text: 't', remedy: 'r' }],
  text: '',
};
const EASED = { kind: 'by-tip-retractor' } as WayBack;
const steps = (retractor: TipRetractor, readings: Readings, wayBack: WayBack = HELD) =>
  retractorStatus(retractor, state(retractor, readings), wayBack, NOW).steps.map((step) => step.state);

describe('the tip retractor', () => {
  test('counts as attached only while a fresh flag says so', () => {
    expect(state(sensed({ commanded: true }), flag(1))).toBe('attached');
    expect(state(sensed({ commanded: true }), flag(0))).toBe('engaging');
    expect(state(sensed({ commanded: true }), flag(1, NOW - 0.4))).toBe('unknown');
    expect(state(sensed({ commanded: true }), {})).toBe('unknown');
    expect(state(sensed({ commanded: false }), flag(1))).toBe('releasing');
    expect(state(sensed({}), flag(Number.NaN))).toBe('unknown');
    expect(state(sensed({}), flag(0.5))).toBe('absent');
  });

  test('relies on a person’s word only where the rig cannot sense it', () => {
    const word = { ...createTipRetractor(false), declared: true, since: 90 };
    expect(state(word, flag(0))).toBe('attached');
    expect(state({ ...word, declared: false }, flag(1))).toBe('absent');
    expect(retractorStatus(word, 'attached', EASED, NOW)).toMatchObject({ source: 'declared', since: 90 });
    expect(state(sensed({ declared: true }), flag(0))).toBe('absent');
  });

  test('is attached step by step: hold still, grip, ease the spool off', () => {
    const asked = sensed({ commanded: true, since: NOW - 1 });
    expect(steps(asked, flag(0))).toEqual(['done', 'now', 'open']);
    expect(steps(asked, flag(1))).toEqual(['done', 'done', 'now']);
    expect(steps(asked, flag(1), EASED)).toEqual(['done', 'done', 'done']);
  });

  test('says so when it does not grip, is not read, or does not let go in time', () => {
    const late = sensed({ commanded: true, since: NOW - 7 });
    expect(steps(late, flag(0))).toEqual(['done', 'failed', 'open']);
    expect(steps(late, {})).toEqual(['done', 'failed', 'open']);
    const released = { commanded: false, since: NOW - 7 };
    expect(steps(sensed(released), flag(1))).toEqual(['done', 'failed']);
    expect(steps(sensed({ ...released, since: NOW - 1 }), flag(1))).toEqual(['done', 'now']);
    expect(steps(sensed({ commanded: false }), flag(0))).toEqual([]);
  });
});
