import type { MissionEvent, UnstampedEvent } from '../../shared-model/mission/event.ts';
import { emptyMission, type MissionState, reduceMission } from '../../shared-model/mission/mission.ts';
import type { Clock } from '../clock.ts';
import type { Recorder } from '../record/recorder.ts';

/** The mission while it runs: stamps events, folds them, and acknowledges each only when it is on disk. */
export interface MissionLog {
  state(): MissionState;
  /** Events already acknowledged, oldest first. */
  events(): readonly MissionEvent[];
  /** Resolves with the stamped event and whether it is on disk. The state holds it at once. */
  append(event: UnstampedEvent): Promise<{ readonly event: MissionEvent; readonly recorded: boolean }>;
}

export const createMissionLog = (
  clock: Clock,
  recorder: Pick<Recorder, 'append'>,
  publish: (event: MissionEvent) => void,
): MissionLog => {
  let state = emptyMission;
  let seq = 0;
  const acknowledged: MissionEvent[] = [];
  // One chain, so that events are published in the order they are stamped in.
  let last: Promise<unknown> = Promise.resolve();
  const acknowledge = (event: MissionEvent): void => {
    acknowledged.push(event);
    publish(event);
  };
  return {
    state: () => state,
    events: () => acknowledged,
    append: (unstamped) => {
      const event = {
        ...unstamped,
        seq: seq++,
        at: clock.now(),
        time: clock.wall().toISOString(),
      } as MissionEvent;
      state = reduceMission(state, event);
      const written = recorder.append(event);
      const done = last.then(async () => {
        const recorded = await written;
        acknowledge(event);
        return { event, recorded };
      });
      last = done;
      return done;
    },
  };
};
