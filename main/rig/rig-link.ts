import type { LinkStatus } from '../../shared-model/contract/frame.ts';
import type { Readings } from '../../shared-model/contract/reading.ts';
import type { PermittedDrive } from '../../shared-model/retraction/interlock.ts';

/** What one write of setpoints came to. */
export type WriteOutcome =
  | { readonly outcome: 'confirmed' }
  /** Not sent, or not acknowledged; nothing is repeated later. */
  | { readonly outcome: 'failed'; readonly text: string };

/** The console's side of the rig: everything it may ask of the line. Never throws for what a rig or a wire can do. */
export interface RigLink {
  status(): LinkStatus;
  /** Reads every signal once. Signals that could not be read are stale (last good value) or bad. `now`: monotonic [s]. */
  read(now: number): Promise<Readings>;
  /** Writes the setpoints of one permitted drive and the heartbeats. Refuses look-alikes and permits older than one tick. */
  write(drive: PermittedDrive, now: number): Promise<WriteOutcome>;
  /** Zero speeds to every motor, ahead of everything that waits. Resolves when the last byte is handed to the port. */
  stop(drive: PermittedDrive): Promise<void>;
  /** Opens the line again now. */
  reconnect(): void;
  close(): Promise<void>;
}
