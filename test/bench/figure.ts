/** One figure: a time as an indication, and the ratio that counts. */
export interface Figure {
  readonly name: string;
  readonly milliseconds: number;
  readonly ratio: number;
  /** What the ratio is of. */
  readonly of: string;
}

/** Median time of `runs` calls [ms]. */
export const median = (runs: number, call: () => void): number => {
  const times = Array.from({ length: runs }, () => {
    const from = performance.now();
    call();
    return performance.now() - from;
  }).sort((a, b) => a - b);
  return times[Math.floor(runs / 2)]!;
};
