import { goodValue, type Readings } from '../../shared-model/contract/reading.ts';
import { area } from '../../shared-model/mechanics/section.ts';
import type { Judgement, PermittedDrive } from '../../shared-model/retraction/interlock.ts';
import {
  clearFold,
  type PullWatch,
  rearmWatch,
  stepWatch,
  type Trip,
  WATCHING,
  type WatchedTick,
} from '../../shared-model/retraction/pull-watch.ts';
import type { Estimate } from '../../shared-model/shape/estimate.ts';
import type { WriteOutcome } from '../rig/rig-link.ts';
import type { RigDescription } from '../rig/signal.ts';

/** The watch over what is under way, and what ends a press. */
export interface PullGuard {
  watch(): PullWatch;
  /** To be called once a tick, before judging. */
  step(readings: Readings, estimate: Estimate, gripped: boolean, now: number): GuardStep;
  /** Why a refusal ends the press of a motion under way; null where it does not. */
  endsPress(judged: Judgement): string | null;
  /** What was written and what became of it (null: no line); why the press is over, if it is. */
  wrote(drive: PermittedDrive, outcome: WriteOutcome | null): string | null;
  /** A fresh press begins. */
  rearm(): void;
  /** The readings begin anew; a suspected fold stays. */
  restart(): void;
  /** A person rules a suspected fold out; whether there was one. */
  clearFold(): boolean;
}
export interface GuardStep {
  /** What tripped in this tick. */
  readonly trip: Trip | null;
  /** Why the press under way is over, if it is. */
  readonly ends: string | null;
}

/** Reasons that end the press of a motion under way: it must not go on by itself once the cause is gone for a moment. */
const TRIPS: ReadonlySet<string> = new Set([
  'tension-trip',
  'tension-high',
  'held-tension',
  'retractor-loose',
  'retractor-unread',
  'shape-old',
  'loose-tail',
]);

export const createPullGuard = (rig: RigDescription): PullGuard => {
  let watch = WATCHING;
  let driven: PermittedDrive | null = null;
  let missed = 0;
  let grippedBefore = false;
  return {
    watch: () => watch,
    step: (readings, estimate, gripped, now) => {
      const before = watch;
      watch = stepWatch(watch, watchedTick(rig, readings, estimate, gripped, driven, now));
      const trip = watch.trip === before.trip ? null : watch.trip;
      const changed = gripped !== grippedBefore;
      grippedBefore = gripped;
      if (trip !== null) return { trip, ends: trip.text };
      if (!changed) return { trip, ends: null };
      return {
        trip,
        ends: gripped ? 'The tip retractor took hold.' : 'The tip retractor let go, or its signal is gone.',
      };
    },
    endsPress: ({ refusal }) => {
      if (driven === null || !isMoving(driven)) return null;
      return refusal?.reasons.find((reason) => TRIPS.has(reason.code))?.text ?? null;
    },
    wrote: (drive, outcome) => {
      driven = outcome?.outcome === 'confirmed' ? drive : null;
      missed = outcome?.outcome === 'failed' && isMoving(drive) ? missed + 1 : 0;
      // One drive may have taken its setpoint and the other not; together they may not miss one.
      const most = (drive.setpoints.retractorSpeed ?? 0) === 0 ? MISSED_MAX : 0;
      return outcome?.outcome === 'failed' && missed > most
        ? `The rig did not take the setpoints (${outcome.text}).`
        : null;
    },
    rearm: () => {
      watch = rearmWatch(watch);
    },
    restart: () => {
      watch = { ...WATCHING, foldSuspected: watch.foldSuspected };
    },
    clearFold: () => {
      const was = watch.foldSuspected !== null;
      watch = clearFold(watch);
      return was;
    },
  };
};

const isMoving = ({ setpoints }: PermittedDrive): boolean =>
  setpoints.spoolSpeed !== 0 || (setpoints.retractorSpeed ?? 0) !== 0;

/** Setpoints in a row that the spool alone may miss: the base's own watchdog is longer. */
const MISSED_MAX = 2;

/** Bodies shorter than this, or than they are wide, do not fold [m]. */
const SHORT = 0.15;

const watchedTick = (
  rig: RigDescription,
  readings: Readings,
  estimate: Estimate,
  gripped: boolean,
  driven: PermittedDrive | null,
  now: number,
): WatchedTick => {
  const value = (name: 'tail_payout' | 'tip_retractor_travel' | 'tail_tension' | 'body_pressure') =>
    goodValue(readings[name], now, rig.limits.readingAge);
  const pressure = Math.max(0, (value('body_pressure') ?? 0) - rig.limits.pressureAccuracy);
  return {
    now,
    spoolSpeed: driven?.setpoints.spoolSpeed ?? 0,
    retractorSpeed: driven?.setpoints.retractorSpeed ?? 0,
    payout: value('tail_payout'),
    travel: value('tip_retractor_travel'),
    tension: value('tail_tension'),
    gripped,
    losslessTension: (area(rig.body) / 2) * pressure,
    length: estimate.frame?.length ?? 0,
    shortLength: Math.max(SHORT, 2 * rig.body.radius),
    slackMax: rig.limits.tailSlackMax,
  };
};
