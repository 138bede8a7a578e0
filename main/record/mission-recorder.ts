import { mkdir, rm } from 'node:fs/promises';
import { join } from 'node:path';
import type { RecordingStatus } from '../../shared-model/contract/frame.ts';
import { type MissionEvent, missionEventSchema } from '../../shared-model/mission/event.ts';
import { foldMission } from '../../shared-model/mission/mission.ts';
import type { Clock } from '../clock.ts';
import { explainDisk, isLost } from './disk-trouble.ts';
import { syncFolder, writeNewFile } from './durable-file.ts';
import { withComment } from './jpeg-comment.ts';
import { EVENTS, LOG_CHANNELS, LOG_NAME, READINGS } from './log-channels.ts';
import { hashFiles, type Manifest, writeManifest } from './manifest.ts';
import { createMcapLog, type LogMessage, type McapLog } from './mcap-log.ts';
import { folderName, type MissionFacts } from './mission-facts.ts';
import type { ReadingsSample, Recorder } from './recorder.ts';
import { type Told, thinSample } from './sample-coding.ts';

interface WaitingSample {
  readonly sample: ReadingsSample;
  readonly wall: Date;
  /** Monotonic [s]. */
  readonly since: number;
}

/** A chunk is closed at this size; with its index it stays below 64 KiB. */
const CHUNK_BYTES = 48 * 1024;
/** A sample waits no longer than this for its chunk [s]; with the write itself a crash loses less than a second. */
const SAMPLE_WAITS = 0.75;
/** After a failed write, the next try [s]. */
const RETRY_AFTER = 2;
/** Samples kept while nothing can be written: one minute at 20 Hz. Events are all kept. */
const SAMPLES_KEPT = 1200;

/** Opens a mission folder below `missionsDir`. Never rejects: a folder that cannot be made is a recorder that says so and tries again. */
export const openRecorder = async (
  missionsDir: string,
  facts: MissionFacts,
  clock: Clock,
): Promise<Recorder> => {
  const started = clock.wall().toISOString();
  const since = clock.now();
  const events: MissionEvent[] = [];
  /** How many of `events` are in the present log. */
  let written = 0;
  let samples: WaitingSample[] = [];
  let told: Told | null = null;
  let part = 1;
  let folder = join(missionsDir, folderName(started, facts, part));
  let log: McapLog | null = null;
  let trouble: string | null = null;
  let retryAt = Number.NEGATIVE_INFINITY;
  let cancelTimer: (() => void) | null = null;
  let busy: Promise<unknown> = Promise.resolve();
  let closed = false;

  const manifest = (ended: string | null, files: Manifest['files']): Manifest => {
    const { length, longest, branchPoints, waypoints, alarms } = foldMission(events);
    const summary = {
      length,
      longest,
      branchPoints: branchPoints.length,
      waypoints: waypoints.length,
      alarms,
    };
    return { format: 'foldback-mission', version: 1, ...facts, started, ended, summary, files };
  };

  /** A fresh folder and log. The log before, if any, stays as it is; the new one tells the whole story again. */
  const openLog = async (): Promise<McapLog> => {
    for (; ; part++) {
      folder = join(missionsDir, folderName(started, facts, part));
      await mkdir(join(folder, 'stills'), { recursive: true });
      const metadata = new Map(Object.entries({ ...facts, simulated: String(facts.simulated), started }));
      const opened = await createMcapLog(join(folder, LOG_NAME), LOG_CHANNELS, metadata).catch((error) => {
        if ((error as NodeJS.ErrnoException).code === 'EEXIST') return null;
        throw error;
      });
      if (opened === null) continue;
      [written, told] = [0, null];
      await writeManifest(folder, manifest(null, [])).catch(async (error) => {
        await opened.abandon();
        await rm(join(folder, LOG_NAME), { force: true });
        throw error;
      });
      await syncFolder(folder);
      await syncFolder(missionsDir);
      return opened;
    }
  };

  const writeEvents = async (to: McapLog): Promise<void> => {
    while (written < events.length) {
      const messages = fill(events.length - written, (i) => eventMessage(events[written + i]!));
      await to.write(messages);
      written += messages.length;
    }
  };

  const writeSamples = async (to: McapLog): Promise<void> => {
    while (samples.length > 0) {
      const tellings: Told[] = [];
      const messages = fill(samples.length, (i) => {
        const thinned = thinSample(tellings[i - 1] ?? told, samples[i]!.sample);
        tellings.push(thinned.told);
        return { channel: READINGS, time: nanoseconds(samples[i]!.wall), data: json(thinned.message) };
      });
      const last = samples[messages.length - 1]!;
      await to.write(messages);
      samples = samples.slice(samples.indexOf(last) + 1);
      told = tellings[messages.length - 1]!;
    }
  };

  const samplesDue = (): number => (samples[0]?.since ?? Number.POSITIVE_INFINITY) + SAMPLE_WAITS;

  /** Writes what waits: all events, and the samples once they are due. */
  const write = async (all: boolean): Promise<void> => {
    if (closed || (trouble !== null && !all && clock.now() < retryAt)) return;
    try {
      log ??= await openLog();
      await writeEvents(log);
      if (all || clock.now() >= samplesDue()) await writeSamples(log);
      trouble = null;
    } catch (error) {
      trouble = explainDisk(error, folder);
      retryAt = clock.now() + RETRY_AFTER;
      samples = samples.slice(-SAMPLES_KEPT);
      if (log !== null && isLost(error)) {
        await log.abandon();
        log = null;
        part++;
      }
    }
    schedule();
  };

  /** At most one write at a time, each taking all that has gathered. */
  const flush = (all: boolean): Promise<unknown> => {
    busy = busy.then(() => write(all));
    return busy;
  };

  const schedule = (): void => {
    if (cancelTimer !== null || closed) return;
    const due = trouble === null ? samplesDue() : retryAt;
    if (due === Number.POSITIVE_INFINITY) return;
    cancelTimer = clock.after(Math.max(0, due - clock.now()), () => {
      cancelTimer = null;
      void flush(false);
    });
  };

  const status = (): RecordingStatus => {
    if (closed) return { state: 'off', text: trouble ?? 'The mission is closed.' };
    if (trouble === null) return { state: 'recording', folder, since, bytes: log?.bytes() ?? 0 };
    return { state: 'failed', folder, text: trouble };
  };

  await flush(false);
  return {
    get folder() {
      return folder;
    },
    status,
    append: async (event) => {
      const recordable = recordableEvent(event);
      if (closed || recordable === null) return false;
      const index = events.push(recordable) - 1;
      await flush(false);
      return written > index;
    },
    sample: (sample) => {
      if (closed) return;
      samples.push({ sample, wall: clock.wall(), since: clock.now() });
      if (samples.length > 2 * SAMPLES_KEPT) samples = samples.slice(-SAMPLES_KEPT);
      schedule();
    },
    still: async (name, jpeg) => {
      const mark = `Simulated: ${facts.rig}, ${facts.place}`;
      const content = facts.simulated ? withComment(jpeg, mark) : jpeg;
      await writeNewFile(join(folder, 'stills', name), content).catch((error: unknown) => {
        throw new Error(explainDisk(error, folder));
      });
      await syncFolder(join(folder, 'stills'));
    },
    close: async () => {
      if (closed) return;
      await flush(true);
      closed = true;
      cancelTimer?.();
      try {
        await log?.end();
        // What could not be written must not be called ended: readers then go by the log.
        if (trouble !== null) return;
        await writeManifest(folder, manifest(clock.wall().toISOString(), await hashFiles(folder)));
      } catch (error) {
        trouble = explainDisk(error, folder);
      }
    },
  };
};

/** The first messages of `count` that fit into one chunk, at least one. */
const fill = (count: number, message: (i: number) => LogMessage): LogMessage[] => {
  const messages: LogMessage[] = [];
  let bytes = 0;
  while (messages.length < count) {
    const one = message(messages.length);
    bytes += one.data.length + MESSAGE_OVERHEAD;
    if (bytes > CHUNK_BYTES && messages.length > 0) break;
    messages.push(one);
  }
  return messages;
};
/** Record header, message header and index entry of a message. */
const MESSAGE_OVERHEAD = 9 + 22 + 16;

/** The event as it can be read back, or null. JSON has no infinity: the largest number stands for it. */
const recordableEvent = (event: MissionEvent): MissionEvent | null => {
  const written = JSON.stringify(event, (_, value: unknown) =>
    value === Number.POSITIVE_INFINITY || value === Number.NEGATIVE_INFINITY
      ? Math.sign(value as number) * Number.MAX_VALUE
      : value,
  );
  return missionEventSchema.safeParse(JSON.parse(written)).data ?? null;
};

const eventMessage = (event: MissionEvent): LogMessage => ({
  channel: EVENTS,
  time: nanoseconds(new Date(event.time)),
  data: json(event),
});

const json = (value: unknown): Uint8Array => new TextEncoder().encode(JSON.stringify(value));

/** Nanoseconds UTC; a time that is none becomes 0, so that no event is lost for it. */
const nanoseconds = (wall: Date): bigint => BigInt(wall.getTime() || 0) * 1_000_000n;
