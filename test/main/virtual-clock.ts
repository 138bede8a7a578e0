import type { Clock } from '../../main/clock.ts';

/** A clock that stands until it is moved; timers run in order as it passes them. */
export interface VirtualClock extends Clock {
  /** Moves on to `until` [s], running what is due and letting promises settle in between. */
  advanceTo(until: number): Promise<void>;
  /** Stands still as a busy process does: what was due meanwhile runs late, at `until` [s]. */
  stallUntil(until: number): Promise<void>;
}

export const createVirtualClock = (): VirtualClock => {
  const timers: { readonly at: number; readonly run: () => void }[] = [];
  let now = 0;
  const settle = async (): Promise<void> => {
    for (let i = 0; i < 20; i++) await Promise.resolve();
  };
  const advanceTo = async (until: number): Promise<void> => {
    await settle();
    for (;;) {
      const next = timers.reduce<(typeof timers)[number] | null>(
        (best, one) => (one.at <= until && (best === null || one.at < best.at) ? one : best),
        null,
      );
      if (next === null) break;
      timers.splice(timers.indexOf(next), 1);
      now = Math.max(now, next.at);
      next.run();
      await settle();
    }
    now = Math.max(now, until);
  };
  return {
    now: () => now,
    wall: () => new Date(Date.UTC(2026, 0, 1) + now * 1000),
    after: (seconds, run) => {
      const timer = { at: now + Math.max(0, seconds), run };
      timers.push(timer);
      return () => {
        const i = timers.indexOf(timer);
        if (i >= 0) timers.splice(i, 1);
      };
    },
    advanceTo,
    stallUntil: async (until) => {
      now = until;
      await advanceTo(until);
    },
  };
};
