import type { Alarm, AlarmPriority } from '../../shared-model/contract/frame.ts';

/** What an alarm says and when it comes; conditions are judged in alarm-conditions.ts. */
export interface AlarmDefinition {
  readonly id: string;
  readonly priority: AlarmPriority;
  readonly consequence: string;
  readonly action: string;
  /** The condition must last this long before it is an alarm [s]. */
  readonly onDelay: number;
  /** It must be gone this long before the alarm returns to normal [s]. */
  readonly offDelay: number;
}

/** A condition that holds now, with its cause in words. */
export type Condition = AlarmDefinition & { readonly cause: string };

interface Tracked {
  readonly definition: AlarmDefinition;
  readonly cause: string;
  readonly since: number;
  readonly lastSeen: number;
  readonly alarm: Alarm | null;
}
export type AlarmBoard = ReadonlyMap<string, Tracked>;
export const EMPTY_BOARD: AlarmBoard = new Map();

export type AlarmChange = {
  readonly change: 'raised' | 'acknowledged' | 'returned' | 'cleared';
  readonly alarm: Alarm;
};

/** One tick of the alarm board (states of IEC 62682): raise after the delay, return after the off-delay, clear once acknowledged. */
export const stepAlarms = (
  board: AlarmBoard,
  conditions: readonly Condition[],
  now: number,
): { readonly board: AlarmBoard; readonly changes: readonly AlarmChange[] } => {
  const next = new Map<string, Tracked>();
  const changes: AlarmChange[] = [];
  const present = new Map(conditions.map((condition) => [condition.id, condition]));
  for (const condition of conditions) {
    const before = board.get(condition.id);
    const since = before?.alarm?.state === 'returned' || before === undefined ? now : before.since;
    const tracked = {
      definition: condition,
      cause: condition.cause,
      since,
      lastSeen: now,
      alarm: before?.alarm ?? null,
    };
    next.set(condition.id, raise(tracked, now, changes));
  }
  for (const [id, tracked] of board) {
    if (present.has(id)) continue;
    const kept = calm(tracked, now, changes);
    if (kept !== null) next.set(id, kept);
  }
  return { board: next, changes };
};

/** A person has seen it. A returned alarm is cleared by that; an active one stays, acknowledged. */
export const acknowledgeAlarm = (
  board: AlarmBoard,
  id: string,
): { readonly board: AlarmBoard; readonly changes: readonly AlarmChange[] } => {
  const tracked = board.get(id);
  const alarm = tracked?.alarm ?? null;
  if (tracked === undefined || alarm === null || alarm.state === 'acknowledged')
    return { board, changes: [] };
  const next = new Map(board);
  if (alarm.state === 'returned') {
    next.delete(id);
    return {
      board: next,
      changes: [
        { change: 'acknowledged', alarm },
        { change: 'cleared', alarm },
      ],
    };
  }
  const seen: Alarm = { ...alarm, state: 'acknowledged' };
  next.set(id, { ...tracked, alarm: seen });
  return { board: next, changes: [{ change: 'acknowledged', alarm: seen }] };
};

const RANK: Record<AlarmPriority, number> = { high: 0, medium: 1, low: 2 };

/** Most urgent first: unacknowledged before the rest, then by priority, then newest first. */
export const listAlarms = (board: AlarmBoard): Alarm[] =>
  [...board.values()]
    .flatMap((tracked) => (tracked.alarm === null ? [] : [tracked.alarm]))
    .sort(
      (a, b) =>
        Number(a.state !== 'unacknowledged') - Number(b.state !== 'unacknowledged') ||
        RANK[a.priority] - RANK[b.priority] ||
        b.at - a.at,
    );

const raise = (tracked: Tracked, now: number, changes: AlarmChange[]): Tracked => {
  const active = tracked.alarm !== null && tracked.alarm.state !== 'returned';
  if (active) return { ...tracked, alarm: { ...(tracked.alarm as Alarm), cause: tracked.cause } };
  if (now - tracked.since < tracked.definition.onDelay) return tracked;
  const { id, priority, consequence, action } = tracked.definition;
  const alarm: Alarm = {
    id,
    priority,
    consequence,
    action,
    cause: tracked.cause,
    state: 'unacknowledged',
    at: now,
  };
  changes.push({ change: 'raised', alarm });
  return { ...tracked, alarm };
};

const calm = (tracked: Tracked, now: number, changes: AlarmChange[]): Tracked | null => {
  const { alarm } = tracked;
  if (alarm === null) return null;
  if (alarm.state === 'returned' || now - tracked.lastSeen < tracked.definition.offDelay) return tracked;
  if (alarm.state === 'acknowledged') {
    changes.push({ change: 'cleared', alarm });
    return null;
  }
  const returned: Alarm = { ...alarm, state: 'returned' };
  changes.push({ change: 'returned', alarm: returned });
  return { ...tracked, alarm: returned };
};
