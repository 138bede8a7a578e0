import type { RecordingStatus } from '../../shared-model/contract/frame.ts';
import type { MissionEvent } from '../../shared-model/mission/event.ts';

/** One line of the readings channel: SI values of good signals, names of bad or stale ones, and what was driven. */
export interface ReadingsSample {
  /** Monotonic [s]. */
  readonly at: number;
  readonly values: Readonly<Record<string, number>>;
  readonly bad: readonly string[];
  readonly length: number | null;
  readonly ratio: number | null;
  readonly asked: number;
  readonly permitted: number;
}

/** Writes one mission folder. Nothing here ever throws into the console's tick. */
export interface Recorder {
  readonly folder: string;
  status(): RecordingStatus;
  /** Resolves `true` once the event is on disk (fsync), `false` when it could not be written (kept and retried). */
  append(event: MissionEvent): Promise<boolean>;
  /** Queued; on disk within a second. */
  sample(sample: ReadingsSample): void;
  /** Writes a picture, fsynced, before its event is appended. Rejects with a plain sentence when it cannot. */
  still(name: string, jpeg: Uint8Array): Promise<void>;
  /** Ends the log properly and writes the manifest. */
  close(): Promise<void>;
}
