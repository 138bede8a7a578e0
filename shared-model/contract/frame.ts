import type { Limits } from '../body/body.ts';
import type { MissionEvent } from '../mission/event.ts';
import type { Trip } from '../retraction/pull-watch.ts';
import type { Standing } from '../retraction/standing.ts';
import type { Refusal, WayBack } from '../retraction/verdict.ts';
import type { Pose, Vec3 } from '../shape/vector.ts';
import type { TrialStanding } from '../trials/apply-trials.ts';
import type { TrialMachine } from '../trials/trial.ts';
import type { Readings } from './reading.ts';
import type { Wish } from './request.ts';

/** The state of the line to the rig. `text` and `remedy` speak to a person. */
export type LinkStatus =
  | { readonly state: 'opening'; readonly port: string }
  | {
      readonly state: 'open';
      readonly port: string;
      readonly cycleRate: number;
      readonly errors: number;
      /** When it was opened, monotonic [s]; another time is another connection. */
      readonly since: number;
    }
  | {
      readonly state: 'lost';
      readonly port: string;
      readonly code: LinkLoss;
      readonly text: string;
      readonly remedy: string;
    }
  | { readonly state: 'closed'; readonly port: string };
export type LinkLoss = 'missing' | 'busy' | 'denied' | 'unplugged' | 'silent' | 'fault';

export type RecordingStatus =
  | { readonly state: 'recording'; readonly folder: string; readonly since: number; readonly bytes: number }
  | { readonly state: 'failed'; readonly folder: string; readonly text: string }
  | { readonly state: 'off'; readonly text: string };

/** Where the console believes the body lies. SI; base frame. */
export interface EstimateFrame {
  readonly length: number;
  /** Half-width of what the length may be off by [m]. */
  readonly lengthBand: number;
  /** Tail that lies loose: payout − 2 × length [m]. */
  readonly tailSlack: number;
  /** Tip speed, growing positive [m/s]. */
  readonly tipSpeed: number;
  readonly tip: Pose;
  /** Present bend of the free end [1/m], to the right and downwards. */
  readonly bend: { readonly right: number; readonly down: number };
  /** Roll of the camera about the body axis [rad], or null when the rig does not measure it. */
  readonly roll: number | null;
}

/** The body as drawn: points from base to tip, flat x, y, z [m]; the first `laid` points do not move with the muscles. */
export interface BodyLine {
  readonly points: readonly number[];
  readonly laid: number;
}

/** The way back for the chart: one entry a body length from the base [m] to the tip; forces in N. */
export interface OutlookLine {
  readonly length: readonly number[];
  /** Base tension that inverts the tip. */
  readonly invert: readonly number[];
  /** Base tension that buckles the body. */
  readonly buckle: readonly number[];
  readonly margin: number;
}

/** Hold-to-run as the console sees it. */
export type HoldStatus =
  | { readonly state: 'neutral' }
  | { readonly state: 'held'; readonly press: number; readonly wish: Wish }
  /** The lease lapsed; release everything and press afresh. */
  | { readonly state: 'burnt'; readonly press: number; readonly text: string };

export type AlarmPriority = 'high' | 'medium' | 'low';
/** IEC 62682 states, as far as an operator tells them apart. */
export type AlarmState = 'unacknowledged' | 'acknowledged' | 'returned';
export interface Alarm {
  readonly id: string;
  readonly priority: AlarmPriority;
  readonly state: AlarmState;
  readonly cause: string;
  readonly consequence: string;
  readonly action: string;
  /** When it came, monotonic [s]. */
  readonly at: number;
}

/** A setpoint on its three stations: asked by the hand, permitted by the interlock, confirmed by the rig. */
export interface DriveTrace {
  /** Tip speed asked for, + grows [m/s]. */
  readonly asked: number;
  /** Tip speed permitted [m/s]. */
  readonly permitted: number;
  /** Whether the rig acknowledged the last frame of setpoints. */
  readonly confirmed: boolean;
  readonly bodyPressureSetpoint: number | null;
  readonly musclePressureSetpoints: readonly number[];
}

export interface TipRetractorStatus {
  /** How the console knows: the rig senses it, or a person declared it. */
  readonly source: 'sensed' | 'declared';
  readonly state: 'absent' | 'engaging' | 'attached' | 'releasing' | 'unknown';
  /** When it was last asked for or declared, monotonic [s]; null: never. */
  readonly since: number | null;
  /** What of attaching or releasing is done, and what comes next; empty while it is neither attached nor asked for. */
  readonly steps: readonly ProcedureStep[];
}

/** One step of a procedure that a person follows. */
export interface ProcedureStep {
  readonly text: string;
  readonly state: 'done' | 'now' | 'open' | 'failed';
}

/** All that changes, published once a tick. Parts that are large are sent only when they changed. */
export interface ConsoleFrame {
  readonly kind: 'frame';
  readonly seq: number;
  /** Monotonic [s]. */
  readonly at: number;
  readonly link: LinkStatus;
  readonly readings: Readings;
  readonly estimate: EstimateFrame | null;
  readonly wayBack: WayBack;
  readonly hold: HoldStatus;
  readonly drive: DriveTrace;
  /** Why what is asked for is not done; null while nothing is refused. */
  readonly refusal: Refusal | null;
  readonly tipRetractor: TipRetractorStatus;
  /** A fold of the body is suspected; pulling is refused until a person has looked. */
  readonly foldSuspected: Trip | null;
  /** Set while backtracking: distance still to go back [m]. */
  readonly backtrack: {
    readonly target: string;
    readonly remaining: number;
    readonly arrived: boolean;
  } | null;
  readonly alarms: readonly Alarm[];
  readonly recording: RecordingStatus;
  readonly body?: BodyLine;
  readonly outlook?: OutlookLine;
  /** How the body is loaded while it is held or grown; null while that cannot be judged. */
  readonly standing?: Standing | null;
}

/** A stretch of passage, for drawing what the built-in rig's camera sees. */
export interface Passage {
  readonly name: string;
  /** Points along the middle of the floor [m], base frame. */
  readonly centreline: readonly Vec3[];
  /** Clear width and height at each point [m]. */
  readonly width: readonly number[];
  readonly height: readonly number[];
}

export type CameraSource =
  | { readonly kind: 'drawn'; readonly passages: readonly Passage[] }
  | { readonly kind: 'video'; readonly label: string | null }
  | { readonly kind: 'none' };

/** What a screen is told once, on joining and whenever it changes. */
export interface ConsoleHello {
  readonly kind: 'hello';
  /** Who may drive this console from where the message arrives. */
  readonly role: 'driver' | 'watcher';
  readonly rig: RigSummary;
  readonly events: readonly MissionEvent[];
}

export interface RigSummary {
  readonly name: string;
  readonly simulated: boolean;
  readonly file: string;
  readonly place: string;
  readonly gravity: Vec3;
  readonly bodyRadius: number;
  readonly muscleAngles: readonly number[];
  readonly limits: Limits;
  readonly margin: number;
  /** Body values that are catalogue values, not measured on this machine. */
  readonly catalogue: readonly string[];
  /** What the bench's fits take from the machine, how its trials stand, and the file that keeps them. */
  readonly machine: TrialMachine;
  readonly payout: { readonly scale: number; readonly offset: number };
  readonly trials: readonly TrialStanding[];
  readonly companion: string;
  /** Why the companion is left out; null where it is not. */
  readonly companionTrouble: string | null;
  readonly camera: CameraSource;
  readonly tipRetractor: 'sensed' | 'declared' | 'none';
  /** One line a signal for the Rig tab: where it is read and how. */
  readonly signals: readonly SignalLine[];
}
export interface SignalLine {
  readonly name: string;
  readonly unit: string;
  readonly slave: number;
  readonly table: string;
  readonly address: number;
  readonly type: string;
}

/** A mission event as it is acknowledged. */
export interface ConsoleEvent {
  readonly kind: 'event';
  readonly event: MissionEvent;
}

export type ConsoleMessage = ConsoleFrame | ConsoleHello | ConsoleEvent;
