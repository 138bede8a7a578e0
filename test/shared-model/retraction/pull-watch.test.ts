import { describe, expect, it } from 'vitest';
import {
  clearFold,
  type PullWatch,
  rearmWatch,
  stepWatch,
  WATCHING,
  type WatchedTick,
} from '../../../shared-model/retraction/pull-watch.ts';

const TICK = 0.05;
const calm: Omit<WatchedTick, 'now' | 'payout' | 'travel'> = {
  spoolSpeed: 0,
  retractorSpeed: 0,
  tension: 80,
  gripped: false,
  losslessTension: 90,
  length: 4,
  shortLength: 0.2,
  slackMax: 0.3,
};

/** Ticks in a row; tail and tip move as fast as `moves` says of what they are told. */
const play = (
  from: PullWatch,
  ticks: number,
  over: Partial<WatchedTick>,
  moves: { readonly spool?: number; readonly tip?: number } = {},
): PullWatch => {
  let watch = from;
  for (let i = 0; i < ticks && watch.trip === null; i++) {
    const now = (Number.isNaN(watch.at) ? 0 : watch.at) + TICK;
    const tick = { ...calm, ...over, now };
    const payout = (watch.payout ?? 8) + tick.spoolSpeed * TICK * (moves.spool ?? 1);
    const travel = (watch.travel ?? 0) + tick.retractorSpeed * TICK * (moves.tip ?? 1);
    watch = stepWatch(watch, { payout, travel, ...tick });
  }
  return watch;
};
const resting = play(WATCHING, 4, {});
const pulling = { spoolSpeed: -0.2, tension: 110 };
const gripping = { spoolSpeed: -0.2, retractorSpeed: 0.1, tension: 1, gripped: true };

describe('the watch over a pull', () => {
  it('is quiet while tail and tip do as they are told, for a minute and at any speed', () => {
    for (const share of [1, 0.97, 1.03]) {
      for (const spoolSpeed of [-0.5, -0.2, -0.02, 0.02, 0.5])
        expect(play(resting, 1200, { ...pulling, spoolSpeed }, { spool: share }).trip).toBeNull();
      expect(play(resting, 1200, gripping, { spool: share, tip: share }).trip).toBeNull();
    }
  });

  it.each([
    ['let out', { spoolSpeed: 0.5 }],
    ['taken in', pulling],
    ['taken in slowly', { ...pulling, spoolSpeed: -0.004 }],
  ])('trips within about a second when tail that is %s does not follow the spool', (_, over) => {
    const watch = play(resting, 60, over, { spool: 0 });
    expect(watch.trip?.code).toBe('spool-drive');
    expect(watch.at - resting.at).toBeLessThan(1.3);
    expect(watch.foldSuspected).toBeNull();
  });

  it('trips when the retractor does not move as it is told, and says that it is the retractor', () => {
    const watch = play(resting, 60, gripping, { tip: 0 });
    expect(watch.trip?.code).toBe('retractor-drive');
  });

  it('suspects a fold once a taut tail comes in at less than a tip can turn with', () => {
    const turning = play(resting, 40, pulling);
    const fallen = play(turning, 40, { ...pulling, tension: 30 });
    expect(fallen.trip?.code).toBe('suspected-fold');
    expect(fallen.foldSuspected).toBe(fallen.trip);
    // 3 cm of tail at 0.2 m/s and a tick.
    expect(fallen.at - turning.at).toBeLessThan(0.25);
    const atOnce = play(resting, 40, { ...pulling, tension: 30 });
    expect(atOnce.trip?.code).toBe('suspected-fold');
  });

  it('lets a tail that lay loose come in before it suspects a fold, but no more than may lie loose', () => {
    const loose = play(WATCHING, 4, { tension: 0.2 });
    const taken = play(loose, 30, { ...pulling, tension: 0.2 });
    expect(taken.trip).toBeNull();
    expect(play(taken, 4, pulling).trip).toBeNull();
    expect(play(taken, 30, { ...pulling, tension: 0.2 }).trip?.code).toBe('suspected-fold');
  });

  it('suspects no fold of a body too short to fold, of a gripped tail, or without a load cell', () => {
    const low = { ...pulling, tension: 1 };
    expect(play(resting, 40, { ...low, length: 0.15 }).trip).toBeNull();
    expect(play(resting, 40, { ...gripping, tension: 0 }).trip).toBeNull();
    expect(play(resting, 40, { ...low, tension: undefined }).trip).toBeNull();
  });

  it('forgets a trip at the next press, but a suspected fold only when a person rules it out', () => {
    const stalled = play(resting, 60, pulling, { spool: 0 });
    expect(play(rearmWatch(stalled), 20, pulling).trip).toBeNull();
    const folded = play(resting, 40, { ...pulling, tension: 30 });
    const rearmed = rearmWatch(folded);
    expect(rearmed.trip).toBeNull();
    expect(rearmed.foldSuspected).not.toBeNull();
    expect(play(rearmed, 20, pulling).foldSuspected).not.toBeNull();
    expect(clearFold(folded).foldSuspected).toBeNull();
  });

  it('takes a reading that is missing or not a number for no movement seen, and trips on nothing by it', () => {
    for (const bad of [undefined, Number.NaN])
      expect(play(resting, 100, { ...pulling, payout: bad, travel: bad }).trip).toBeNull();
  });

  it('counts tail that is let out without tension, until the tail is taut again or taken in', () => {
    const out = { spoolSpeed: 0.2, tension: 0.1 };
    expect(play(resting, 20, { spoolSpeed: 0.2, tension: 60 }).loose).toBe(0);
    const blocked = play(play(resting, 4, { ...out, spoolSpeed: 0 }), 30, out);
    expect(blocked.loose).toBeCloseTo(0.3, 6);
    expect(play(blocked, 1, { tension: 30 }).loose).toBe(0);
    expect(play(blocked, 1, { tension: undefined }).loose).toBe(0);
    const taken = play(blocked, 20, { spoolSpeed: -0.2, tension: 0.1 });
    expect(taken.loose).toBeCloseTo(0.1, 6);
    // What is known to lie loose may come in before a fold is suspected.
    const more = play(blocked, 45, out);
    expect(more.loose).toBeCloseTo(0.75, 6);
    expect(play(more, 70, { spoolSpeed: -0.2, tension: 0.1 }).trip).toBeNull();
  });

  it('suspects a fold of many short pulls too, and forgets what came in only by turning the tip or letting tail out', () => {
    const tap = (watch: PullWatch): PullWatch =>
      play(play(rearmWatch(watch), 2, { ...pulling, tension: 30 }), 10, { tension: 60 });
    let watch = resting;
    for (let taps = 0; taps < 3 && watch.foldSuspected === null; taps++) watch = tap(watch);
    expect(watch.foldSuspected?.code).toBe('suspected-fold');
    expect(play(tap(resting), 2, pulling).takenLoose).toBe(0);
    expect(play(tap(resting), 4, { spoolSpeed: 0.2, tension: 60 }).takenLoose).toBe(0);
  });
});
