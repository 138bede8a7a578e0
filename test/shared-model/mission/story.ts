import type { MissionEvent, UnstampedEvent } from '../../../shared-model/mission/event.ts';
import { foldMission, type MissionState } from '../../../shared-model/mission/mission.ts';
import type { Pose } from '../../../shared-model/shape/vector.ts';

/** A tip straight ahead of the base; the tree of paths does not depend on where exactly it is. */
export const tipAt = (
  length: number,
): Pose & {
  position: [number, number, number];
  quaternion: [number, number, number, number];
} => ({ position: [0, 0, length], quaternion: [1, 0, 0, 0] });

export const stamped = (events: readonly UnstampedEvent[]): MissionEvent[] =>
  events.map(
    (event, seq) =>
      ({
        ...event,
        seq,
        at: seq / 10,
        time: new Date(Date.UTC(2026, 3, 1, 9) + 100 * seq).toISOString(),
      }) as MissionEvent,
  );

export const grow = (from: number, to: number, step = 0.1): UnstampedEvent[] =>
  steps(from, to, step).map((length) => ({ kind: 'extended', length, tip: tipAt(length) }));

export const retract = (from: number, to: number, step = 0.25): UnstampedEvent[] =>
  steps(from, to, step).map((length) => ({ kind: 'retracted', length, tip: tipAt(length) }));

export const markAt = (length: number, id = 'fork', arms = ['left', 'right']): UnstampedEvent => ({
  kind: 'branch-point-marked',
  id,
  label: `Branch point ${id}`,
  length,
  tip: tipAt(length),
  arms,
});

export const enter = (arm: string, branchPoint = 'fork'): UnstampedEvent => ({
  kind: 'arm-entered',
  branchPoint,
  arm,
});

export const waypoint = (id: string, length: number): UnstampedEvent => ({
  kind: 'waypoint-logged',
  id,
  note: '',
  length,
  tip: tipAt(length),
  picture: null,
  readings: { body_pressure: 9000 },
});

export const fold = (...events: (UnstampedEvent | UnstampedEvent[])[]): MissionState =>
  foldMission(stamped(events.flat()));

const steps = (from: number, to: number, step: number): number[] => {
  const count = Math.max(1, Math.round(Math.abs(to - from) / step));
  return Array.from({ length: count }, (_, i) => from + ((to - from) * (i + 1)) / count);
};
