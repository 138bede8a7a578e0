import type { Limits } from '../body/body.ts';
import type { Readings } from '../contract/reading.ts';
import type { Wish } from '../contract/request.ts';
import type { Reason, WayBack } from './verdict.ts';

/** Everything the interlock looks at for one tick. */
export interface DriveRequest {
  /** Monotonic [s]. */
  readonly now: number;
  readonly wish: Wish;
  /** The hold-to-run lease lives at this moment. */
  readonly leaseAlive: boolean;
  readonly linkOpen: boolean;
  readonly readings: Readings;
  readonly limits: Limits;
  readonly emergencyStopWired: boolean;
  /** Signals that the rig file describes as read; a described signal must be good to move. */
  readonly described: ReadonlySet<string>;
  /** Null when the estimate cannot be relied on; the reasons then are in `estimateReasons`. */
  readonly body: { readonly length: number; readonly tailSlack: number } | null;
  readonly estimateReasons: readonly Reason[];
  /** Verdict on the way to `motion`'s target, and when it was judged. */
  readonly wayBack: WayBack;
  readonly judgedAt: number;
  /** Distance to the backtrack target, or to the base for a plain pull [m]. */
  readonly remaining: number | null;
  /** Speed profile towards the target: the most the tip may do at this distance [m/s]. */
  readonly approachSpeed: number;
  readonly tipRetractorAttached: boolean;
  readonly hasRetractorDrive: boolean;
  readonly grip: boolean | null;
  /** Pressures that the steering wish comes to, or null for no steering. */
  readonly musclePressures: readonly number[] | null;
  /** Setpoint that the pressure wish comes to, or null for no change. */
  readonly bodyPressure: number | null;
}
