import { z } from 'zod';
import { TRIAL_KINDS, trialPointsSchema } from '../trials/trial.ts';

/** Short text a person typed. */
const text = z.string().max(2000);
const id = z.string().min(1).max(64);
const unit = z.number().min(-1).max(1);

/** What the hand on the controls asks for, all of it only while held. */
export const wishSchema = z.strictObject({
  motion: z.discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('still') }),
    z.strictObject({ kind: z.literal('grow') }),
    z.strictObject({ kind: z.literal('retract') }),
    z.strictObject({ kind: z.literal('backtrack'), target: id }),
  ]),
  /** Wanted tip speed [m/s]. */
  tipSpeed: z.number().min(0).max(5),
  /** Bend rate as fractions of the limit, to the right and downwards as the camera sees it, or towards straight. */
  steer: z
    .discriminatedUnion('kind', [
      z.strictObject({ kind: z.literal('bend'), right: unit, down: unit }),
      z.strictObject({ kind: z.literal('straighten') }),
    ])
    .nullable(),
  /** Body pressure setpoint rate as a fraction of the limit. */
  pressure: unit,
});
export type Wish = z.infer<typeof wishSchema>;

export const STILL: Wish = { motion: { kind: 'still' }, tipSpeed: 0, steer: null, pressure: 0 };

/** Everything a screen may ask of the console. Driving kinds are accepted from the one driver only. */
export const requestSchema = z.discriminatedUnion('kind', [
  /** Starts or renews the hold-to-run lease. `press` rises with every fresh press, `seq` with every renewal. */
  z.strictObject({
    kind: z.literal('hold'),
    press: z.int().min(1),
    seq: z.int().min(0),
    wish: wishSchema,
  }),
  /** The hand is neutral. Ends the lease at once and, after a burnt lease, allows the next press. */
  z.strictObject({ kind: z.literal('release'), press: z.int().min(0) }),
  /** From any window, at any time. */
  z.strictObject({ kind: z.literal('stop') }),
  z.strictObject({
    kind: z.literal('mark-branch-point'),
    label: text,
    /** The arms seen here, in the order the screen shows them; the first is taken next. */
    arms: z.array(text.min(1).max(60)).min(2).max(6),
  }),
  /** At a branch point: the arm that growing will enter. */
  z.strictObject({ kind: z.literal('choose-arm'), branchPoint: id, arm: z.string().max(60) }),
  z.strictObject({
    kind: z.literal('log-waypoint'),
    note: text,
    /** JPEG, base64; null when no picture was to be had, with the reason in the note. */
    picture: z.string().max(12_000_000).nullable(),
  }),
  /** Engage or release the tip retractor where the rig can, otherwise declare it; `confirmed` is the second step. */
  z.strictObject({ kind: z.literal('set-tip-retractor'), attached: z.boolean(), confirmed: z.boolean() }),
  /** What one of the remedies on offer would make of the outlook; answers with an `OutlookLine`. */
  z.strictObject({
    kind: z.literal('preview-remedy'),
    remedy: z.enum(['tip-retractor', 'body-pressure', 'straighten', 'shorter']),
  }),
  /** After a suspected fold: a person looked and says that the body lies as before; `confirmed` is the second step. */
  z.strictObject({ kind: z.literal('clear-fold'), confirmed: z.boolean() }),
  z.strictObject({ kind: z.literal('acknowledge-alarm'), alarm: id }),
  /** Ask for the wheel when another window drives. Disarms. */
  z.strictObject({ kind: z.literal('take-over') }),
  /** Open the line again now instead of waiting. */
  z.strictObject({ kind: z.literal('reconnect') }),
  /** Built-in rig only. */
  z.strictObject({
    kind: z.literal('simulate-fault'),
    fault: z.enum([
      'unplug',
      'dead-unit',
      'bit-errors',
      'stuck-pressure',
      'leak',
      'motor-stall',
      'retractor-loss',
      'retractor-stall',
      'weak-wall',
      'none',
    ]),
  }),
  z.strictObject({ kind: z.literal('list-missions') }),
  /** A steady reading for a trial of the bench; answers with a `BenchReading`. */
  z.strictObject({ kind: z.literal('bench-take'), trial: z.enum(TRIAL_KINDS) }),
  /** Keeps a trial: fitted anew by the console from its points, and added to the rig file's companion. */
  z.strictObject({
    kind: z.literal('bench-save'),
    trial: trialPointsSchema,
    initials: z.string().trim().min(1).max(12),
    expires: z.iso.datetime(),
  }),
  /** All trials of this machine, oldest first; answers with `TrialRecord`s. */
  z.strictObject({ kind: z.literal('bench-list') }),
]);
export type ConsoleRequest = z.infer<typeof requestSchema>;
export type RequestKind = ConsoleRequest['kind'];

/** Kinds that any client may send; all others need the driver. */
export const WATCHER_REQUESTS: readonly RequestKind[] = [
  'stop',
  'take-over',
  'list-missions',
  'preview-remedy',
  'bench-list',
];

/** The answer to one request. `text` speaks to a person. */
export type Answer =
  | { readonly ok: true; readonly value?: unknown }
  | { readonly ok: false; readonly code: string; readonly text: string };

/** Means over a second for a trial; SI. Null: not measured on this rig, or not good. */
export interface BenchReading {
  /** As the encoder gives it, before any correction by an earlier trial. */
  readonly payout: number;
  readonly length: number;
  /** Total bend of the body as estimated [rad]. */
  readonly turn: number;
  readonly pressure: number | null;
  readonly tension: number | null;
  /** Pressure of the muscle that works hardest. */
  readonly muscle: number | null;
  readonly count: number;
  /** Standard deviations. */
  readonly spread: Readonly<Record<'payout' | 'pressure' | 'tension' | 'muscle', number | null>>;
}

/** One mission folder as it lies on disk. Times are RFC 3339 UTC; lengths in metres. */
export interface MissionOnDisk {
  readonly id: string;
  readonly folder: string;
  readonly place: string;
  readonly simulated: boolean;
  readonly started: string;
  readonly ended: string | null;
  readonly length: number;
  readonly longest: number;
  readonly branchPoints: number;
  readonly waypoints: number;
  readonly alarms: number;
  readonly bytes: number;
  /** Set when the folder could not be read in full. */
  readonly trouble: string | null;
}
