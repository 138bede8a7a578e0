import type { ReadingsSample } from './recorder.ts';
import { restoreSample, type SampleMessage } from './sample-coding.ts';

/** The readings of a mission's log, put together only where they are looked at: eight hours are half a million. */
export interface LoggedReadings extends Iterable<ReadingsSample> {
  readonly count: number;
  /** The sample at an index, 0 ≤ i < count; anything else throws a `RangeError`. */
  sample(i: number): ReadingsSample;
  /** Index of the last sample at or before a monotonic time [s]; −1 before the first. */
  indexAt(at: number): number;
}

/** `messages` in the order of the log, rising in time. */
export const loggedReadings = (messages: readonly SampleMessage[]): LoggedReadings => {
  const sample = (i: number): ReadingsSample => {
    if (!(Number.isInteger(i) && i >= 0 && i < messages.length))
      throw new RangeError(`There is no reading ${i}; there are ${messages.length}.`);
    let first = i;
    while (first > 0 && messages[first]?.full !== true) first--;
    let restored: ReadingsSample | null = null;
    for (let k = first; k <= i; k++) restored = restoreSample(restored, messages[k] as SampleMessage);
    return restored as ReadingsSample;
  };
  return {
    count: messages.length,
    sample,
    indexAt: (at) => {
      let [low, high] = [0, messages.length];
      while (low < high) {
        const middle = (low + high) >> 1;
        if ((messages[middle] as SampleMessage).at <= at) low = middle + 1;
        else high = middle;
      }
      return low - 1;
    },
    *[Symbol.iterator]() {
      let restored: ReadingsSample | null = null;
      for (const message of messages) {
        restored = restoreSample(restored, message);
        yield restored;
      }
    },
  };
};
