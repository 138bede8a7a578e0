import type { Clock } from '../../../main/clock.ts';

export interface HandClock extends Clock {
  /** Lets time pass, calling back what falls due on the way, in order. */
  pass(seconds: number): void;
}

/** A clock that stands still until it is told that time passes. */
export const createHandClock = (wall = Date.UTC(2026, 3, 1, 9, 30)): HandClock => {
  let now = 100;
  let waiting: { at: number; run: () => void }[] = [];
  return {
    now: () => now,
    wall: () => new Date(wall + (now - 100) * 1000),
    after: (seconds, run) => {
      const entry = { at: now + seconds, run };
      waiting.push(entry);
      return () => {
        waiting = waiting.filter((one) => one !== entry);
      };
    },
    pass: (seconds) => {
      const until = now + seconds;
      for (;;) {
        const next = waiting.filter((one) => one.at <= until).sort((a, b) => a.at - b.at)[0];
        if (next === undefined) break;
        waiting = waiting.filter((one) => one !== next);
        now = Math.max(now, next.at);
        next.run();
      }
      now = until;
    },
  };
};
