import type { Limits } from '../body/body.ts';
import type { EstimateFrame, TipRetractorStatus } from '../contract/frame.ts';
import type { Readings } from '../contract/reading.ts';
import type { Wish } from '../contract/request.ts';
import type { PullWatch } from './pull-watch.ts';
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
  readonly body: Pick<EstimateFrame, 'length' | 'tailSlack' | 'tipSpeed'> | null;
  readonly estimateReasons: readonly Reason[];
  /** When the shape was last estimated, monotonic [s]. */
  readonly shapeAt: number;
  /** Verdict on the way to `motion`'s target, and when it was judged. */
  readonly wayBack: WayBack;
  readonly judgedAt: number;
  /** Distance to the backtrack target, or to the base for a plain pull [m]. */
  readonly remaining: number | null;
  /** Speed profile towards the target: the most the tip may do at this distance [m/s]. */
  readonly approachSpeed: number;
  /** What has gone wrong under way: of this press, and a fold that nobody has ruled out yet. */
  readonly watch: Pick<PullWatch, 'trip' | 'foldSuspected' | 'loose'>;
  readonly tipRetractorAttached: boolean;
  readonly tipRetractorState: TipRetractorStatus['state'];
  readonly hasRetractorDrive: boolean;
  readonly grip: boolean | null;
  /** Pressures that the steering wish comes to, or null for no steering. */
  readonly musclePressures: readonly number[] | null;
  /** Setpoint that the pressure wish comes to, or null for no change. */
  readonly bodyPressure: number | null;
  /** The setpoint or, before any, the pressure that this wish starts from [Pa]. */
  readonly bodyPressureBefore: number | null;
  /** Pressure that growth takes here at rest [Pa]; null where the wish is not to grow. */
  readonly growthPressure: number | null;
  /** Hoop force that wall or seam bear on a straight body that is loaded as this one is in its tightest bend [N/m]; null: not known. */
  readonly hoopStrength: number | null;
  readonly bodyRadius: number;
}
