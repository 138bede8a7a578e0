import type { EstimateFrame, LinkStatus, TipRetractorStatus } from '../../shared-model/contract/frame.ts';
import type { UnstampedEvent } from '../../shared-model/mission/event.ts';
import type { Judgement } from '../../shared-model/retraction/interlock.ts';
import type { Trip } from '../../shared-model/retraction/pull-watch.ts';
import type { WayBack } from '../../shared-model/retraction/verdict.ts';
import type { AlarmChange } from './alarms.ts';
import type { Lease } from './lease.ts';
import { duePathEvent } from './path-events.ts';

/** Turns what a tick saw into the mission's events: changes and milestones, not ticks. */
export interface MissionNotes {
  /** Whether the link has changed its state, or was opened anew between two ticks. */
  link(status: LinkStatus): boolean;
  /** A state that cannot be read is no news. */
  retractor(state: TipRetractorStatus['state'], source: TipRetractorStatus['source']): void;
  motion(estimate: EstimateFrame | null, tipSpeed: number, now: number): void;
  tripped(trip: Trip, length: number | null): void;
  refusal(judged: Judgement, wayBack: WayBack, lease: Lease, length: number | null): void;
  alarms(changes: readonly AlarmChange[]): void;
}

/** Without a permitted motion for this long the body has come to rest [s]. */
const REST = 0.4;

export const createMissionNotes = (append: (event: UnstampedEvent) => void): MissionNotes => {
  let linkBefore: LinkStatus['state'] = 'opening';
  let openSince = Number.NaN;
  let attachedBefore = false;
  let markedLength = 0;
  let movedAt = Number.NEGATIVE_INFINITY;
  let refusedBefore = '';
  return {
    link: (status) => {
      const anew = status.state === 'open' && status.since !== openSince;
      if (status.state === linkBefore && !anew) return false;
      linkBefore = status.state;
      if (status.state === 'open') openSince = status.since;
      append({ kind: 'link', state: status.state, text: linkText(status) });
      return true;
    },
    retractor: (state, source) => {
      const attached = state === 'attached' || state === 'releasing';
      if (state === 'unknown' || attached === attachedBefore) return;
      attachedBefore = attached;
      append({ kind: 'tip-retractor', state: attached ? 'attached' : 'absent', source });
    },
    motion: (estimate, tipSpeed, now) => {
      if (tipSpeed !== 0) movedAt = now;
      if (estimate === null) return;
      const due = duePathEvent(markedLength, estimate.length, estimate.tip, now - movedAt > REST);
      if (due === null) return;
      markedLength = estimate.length;
      append(due);
    },
    tripped: ({ code, text }, length) => append({ kind: 'tripped', code, text, length }),
    // One record a press and cause, not one a tick.
    refusal: (judged, wayBack, lease, length) => {
      const { refusal } = judged;
      if (refusal === null || lease.state !== 'held' || !isTravel(refusal.motion)) return;
      const key = [lease.client, lease.press, ...refusal.reasons.map((reason) => reason.code)].join(' ');
      if (key === refusedBefore) return;
      refusedBefore = key;
      append({
        kind: 'pull-refused',
        motion: refusal.motion,
        length,
        forces: forcesOf(wayBack),
        margin: wayBack.kind === 'cannot-judge' ? null : wayBack.margin,
        reasons: refusal.reasons.map((reason) => ({ ...reason })),
      });
    },
    alarms: (changes) => {
      for (const { change, alarm } of changes)
        append({ kind: 'alarm', id: alarm.id, change, priority: alarm.priority, cause: alarm.cause });
    },
  };
};

const isTravel = (motion: string): boolean =>
  motion === 'grow' || motion === 'retract' || motion === 'backtrack';

/** The forces behind a verdict; an infinite ratio, of a body of no length, has no place in JSON. */
const forcesOf = (wayBack: WayBack) => {
  if (wayBack.kind !== 'would-buckle' && wayBack.kind !== 'clear') return null;
  const { ratio } = wayBack.worst;
  return { ...wayBack.worst, ratio: Number.isFinite(ratio) ? ratio : Number.MAX_VALUE };
};

const linkText = (status: LinkStatus): string =>
  status.state === 'lost'
    ? `${status.text} ${status.remedy}`
    : `The line to ${status.port} is ${status.state}.`;
