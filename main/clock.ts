/** Time as an argument. Everything in main that needs a clock or a timer is given one of these. */
export interface Clock {
  /** Monotonic [s]. */
  now(): number;
  /** Wall clock, for people and files only; it may step. */
  wall(): Date;
  /** Calls back once after `seconds`; returns how to cancel. */
  after(seconds: number, run: () => void): () => void;
}

export const systemClock: Clock = {
  now: () => performance.now() / 1000,
  wall: () => new Date(),
  after: (seconds, run) => {
    const timer = setTimeout(run, Math.max(0, seconds * 1000));
    return () => clearTimeout(timer);
  },
};
