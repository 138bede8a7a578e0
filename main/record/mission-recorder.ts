import { join } from 'node:path';
import type { RecordingStatus } from '../../shared-model/contract/frame.ts';
import { type MissionEvent, missionEventSchema } from '../../shared-model/mission/event.ts';
import type { Clock } from '../clock.ts';
import { explainDisk, isLost } from './disk-trouble.ts';
import { syncFolder, writeNewFile } from './durable-file.ts';
import { withComment } from './jpeg-comment.ts';
import { hashFiles, manifestOf, writeManifest } from './manifest.ts';
import { folderName, type MissionFacts } from './mission-facts.ts';
import { type MissionPart, openPart, type WaitingSample } from './mission-part.ts';
import type { Recorder } from './recorder.ts';

/** A sample waits no longer than this for its chunk [s]; with the write itself a crash loses less than a second. */
const SAMPLE_WAITS = 0.75;
/** After a failed write, the next try [s]. */
const RETRY_AFTER = 2;
/** Samples kept while nothing can be written: one minute at 20 Hz. Events are all kept. */
const SAMPLES_KEPT = 1200;

/**
 * Records a mission in a folder of its own below `missionsDir`. Never rejects, and nothing of it throws into the tick: a
 * disk that cannot be written makes a recorder that says so, keeps what it is given, and tries again by itself.
 */
export const openRecorder = async (
  missionsDir: string,
  facts: MissionFacts,
  clock: Clock,
): Promise<Recorder> => {
  const started = clock.wall().toISOString();
  const since = clock.now();
  const events: MissionEvent[] = [];
  let samples: WaitingSample[] = [];
  let part: MissionPart | null = null;
  let partNumber = 1;
  let folder = join(missionsDir, folderName(started, facts, partNumber));
  let trouble: string | null = null;
  let retryAt = Number.NEGATIVE_INFINITY;
  let cancelTimer: (() => void) | null = null;
  let busy: Promise<unknown> = Promise.resolve();
  let closed = false;

  const samplesDue = (): number => (samples[0]?.since ?? Number.POSITIVE_INFINITY) + SAMPLE_WAITS;

  const presentPart = async (): Promise<MissionPart> => {
    part ??= await openPart(missionsDir, facts, manifestOf(facts, started, null, events, []), partNumber);
    ({ number: partNumber, folder } = part);
    return part;
  };

  const writeSamples = async (to: MissionPart): Promise<void> => {
    while (samples.length > 0) {
      const batch = samples;
      const count = await to.writeSamples(batch);
      samples = samples.slice(samples.indexOf(batch[count - 1]!) + 1);
    }
  };

  /** Writes what waits: all events, and the samples when they are due or `all` is asked for. */
  const write = async (all: boolean): Promise<void> => {
    if (closed || (trouble !== null && !all && clock.now() < retryAt)) return;
    try {
      const to = await presentPart();
      await to.writeEvents(events);
      if (all || clock.now() >= samplesDue()) await writeSamples(to);
      trouble = null;
    } catch (error) {
      await noteTrouble(error);
    }
    schedule();
  };

  const noteTrouble = async (error: unknown): Promise<void> => {
    trouble = explainDisk(error, folder);
    retryAt = clock.now() + RETRY_AFTER;
    samples = samples.slice(-SAMPLES_KEPT);
    if (part === null || !isLost(error)) return;
    await part.abandon();
    part = null;
    partNumber++;
  };

  /** At most one write at a time, each taking all that has gathered. */
  const flush = (all: boolean): Promise<unknown> => {
    busy = busy.then(() => write(all));
    return busy;
  };

  const schedule = (): void => {
    const due = trouble === null ? samplesDue() : retryAt;
    if (cancelTimer !== null || closed || due === Number.POSITIVE_INFINITY) return;
    cancelTimer = clock.after(Math.max(0, due - clock.now()), () => {
      cancelTimer = null;
      void flush(false);
    });
  };

  const finish = async (): Promise<void> => {
    try {
      await part?.end();
      // What could not be written must not be called ended: readers then go by the log.
      if (trouble !== null) return;
      const files = await hashFiles(folder);
      await writeManifest(folder, manifestOf(facts, started, clock.wall().toISOString(), events, files));
    } catch (error) {
      trouble = explainDisk(error, folder);
    }
  };

  await flush(false);
  return {
    get folder() {
      return folder;
    },
    status: (): RecordingStatus => {
      if (closed) return { state: 'off', text: trouble ?? 'The mission is closed.' };
      if (trouble !== null) return { state: 'failed', folder, text: trouble };
      return { state: 'recording', folder, since, bytes: part?.bytes() ?? 0 };
    },
    append: async (event) => {
      const recordable = recordableEvent(event);
      if (closed || recordable === null) return false;
      const count = events.push(recordable);
      await flush(false);
      return part !== null && part.eventsWritten() >= count;
    },
    sample: (sample) => {
      if (closed) return;
      samples.push({ sample, wall: clock.wall(), since: clock.now() });
      if (samples.length > 2 * SAMPLES_KEPT) samples = samples.slice(-SAMPLES_KEPT);
      schedule();
    },
    still: async (name, jpeg) => {
      const mark = `Simulated: ${facts.rig}, ${facts.place}`;
      const stills = join(folder, 'stills');
      await writeNewFile(join(stills, name), facts.simulated ? withComment(jpeg, mark) : jpeg).catch(
        (error: unknown) => {
          throw new Error(explainDisk(error, folder));
        },
      );
      await syncFolder(stills);
    },
    close: async () => {
      if (closed) return;
      await flush(true);
      closed = true;
      cancelTimer?.();
      await finish();
    },
  };
};

/** The event as it can be read back, or null. JSON has no infinity: the largest number stands for it. */
const recordableEvent = (event: MissionEvent): MissionEvent | null => {
  const written = JSON.stringify(event, (_, value: unknown) =>
    value === Number.POSITIVE_INFINITY || value === Number.NEGATIVE_INFINITY
      ? Math.sign(value as number) * Number.MAX_VALUE
      : value,
  );
  return missionEventSchema.safeParse(JSON.parse(written)).data ?? null;
};
