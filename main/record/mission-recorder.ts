import { mkdir, open } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import type { RecordingStatus } from '../../shared-model/contract/frame.ts';
import { type MissionEvent, missionEventSchema } from '../../shared-model/mission/event.ts';
import { foldMission } from '../../shared-model/mission/mission.ts';
import type { Clock } from '../clock.ts';
import { hashFiles, type Manifest, writeManifest } from './manifest.ts';
import { createMcapLog, type LogMessage, type McapLog } from './mcap-log.ts';
import type { ReadingsSample, Recorder } from './recorder.ts';

export interface MissionFacts {
  readonly mission: string;
  readonly place: string;
  readonly rig: string;
  readonly simulated: boolean;
  readonly software: string;
}

export const EVENTS_TOPIC = '/events';
export const READINGS_TOPIC = '/readings';

export const sampleSchema = z.object({
  at: z.number(),
  values: z.record(z.string(), z.number()),
  bad: z.array(z.string()),
  length: z.number().nullable(),
  ratio: z.number().nullable(),
  asked: z.number(),
  permitted: z.number(),
});

const CHANNELS = [
  {
    topic: EVENTS_TOPIC,
    schemaName: 'foldback.MissionEvent',
    jsonSchema: z.toJSONSchema(missionEventSchema),
  },
  { topic: READINGS_TOPIC, schemaName: 'foldback.Readings', jsonSchema: z.toJSONSchema(sampleSchema) },
] as const;

/** Chunks are closed at this size or age, whichever comes first; a crash loses no more than the age. */
const CHUNK_BYTES = 48 * 1024;
const CHUNK_AGE = 0.8;
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
  const name = folderName(started, facts);
  const events: MissionEvent[] = [];
  let folder = join(missionsDir, name);
  let log: McapLog | null = null;
  let queue: LogMessage[] = [];
  let queuedBytes = 0;
  let oldest = Number.NaN;
  let trouble: string | null = null;
  let retryAt = Number.NEGATIVE_INFINITY;
  let attempts = 0;
  let busy: Promise<boolean> = Promise.resolve(true);
  let closed = false;

  const manifest = (ended: string | null, files: Manifest['files']): Manifest => {
    const state = foldMission(events);
    return {
      format: 'foldback-mission',
      version: 1,
      ...facts,
      started,
      ended,
      summary: {
        length: state.length,
        longest: state.longest,
        branchPoints: state.branchPoints.length,
        waypoints: state.waypoints.length,
        alarms: state.alarms,
      },
      files,
    };
  };

  const openLog = async (): Promise<McapLog> => {
    folder = join(missionsDir, attempts === 0 ? name : `${name}-part-${attempts + 1}`);
    await mkdir(join(folder, 'stills'), { recursive: true });
    const opened = await createMcapLog(
      join(folder, 'mission.mcap'),
      CHANNELS,
      new Map(Object.entries({ ...facts, simulated: String(facts.simulated), started })),
    );
    await writeManifest(folder, manifest(null, []));
    attempts++;
    return opened;
  };

  /** Writes what waits; at most one at a time, each taking all that has gathered. */
  const flush = (): Promise<boolean> => {
    busy = busy.then(writeWaiting);
    return busy;
  };
  const writeWaiting = async (): Promise<boolean> => {
    if (queue.length === 0 && log !== null) return trouble === null;
    if (trouble !== null && clock.now() < retryAt) return false;
    try {
      if (log === null) {
        log = await openLog();
        // A fresh log tells the whole story so far, whatever became of the one before.
        if (attempts > 1)
          queue = [...events.map(eventMessage), ...queue.filter((message) => message.channel === 1)];
      }
      while (queue.length > 0) {
        const part = nextChunk(queue);
        await log.write(part);
        queue = queue.slice(part.length);
      }
      queuedBytes = 0;
      trouble = null;
      return true;
    } catch (error) {
      trouble = explain(error, folder);
      retryAt = clock.now() + RETRY_AFTER;
      // A log that is gone is begun anew elsewhere; one that is merely full is tried again.
      if (isGone(error)) log = null;
      queue = keepLatest(queue);
      return false;
    }
  };

  const enqueue = (message: LogMessage): void => {
    if (queue.length === 0) oldest = clock.now();
    queue.push(message);
    queuedBytes += message.data.length;
  };

  await flush();
  return {
    get folder() {
      return folder;
    },
    status: (): RecordingStatus =>
      closed
        ? { state: 'off', text: 'The mission is closed.' }
        : trouble === null
          ? { state: 'recording', folder, since, bytes: log?.bytes() ?? 0 }
          : { state: 'failed', folder, text: trouble },
    append: async (event) => {
      events.push(event);
      enqueue(eventMessage(event));
      return flush();
    },
    sample: (sample) => {
      enqueue({ channel: 1, time: nanoseconds(clock.wall()), data: json(rounded(sample)) });
      if (queuedBytes >= CHUNK_BYTES || clock.now() - oldest >= CHUNK_AGE) void flush();
    },
    still: async (fileName, jpeg) => {
      try {
        const file = await open(join(folder, 'stills', fileName), 'wx');
        try {
          await file.writeFile(jpeg);
          await file.sync();
        } finally {
          await file.close();
        }
      } catch (error) {
        throw new Error(explain(error, folder));
      }
    },
    close: async () => {
      if (closed) return;
      retryAt = Number.NEGATIVE_INFINITY;
      await flush();
      closed = true;
      if (log === null) return;
      await log.end().catch(() => {});
      const files = await hashFiles(folder).catch(() => []);
      await writeManifest(folder, manifest(clock.wall().toISOString(), files)).catch(() => {});
    },
  };
};

const eventMessage = (event: MissionEvent): LogMessage => ({
  channel: 0,
  time: nanoseconds(new Date(event.time)),
  data: json(event),
});

const nextChunk = (queue: readonly LogMessage[]): LogMessage[] => {
  let bytes = 0;
  const end = queue.findIndex((message) => {
    bytes += message.data.length + 64;
    return bytes > CHUNK_BYTES;
  });
  return queue.slice(0, end < 0 ? queue.length : Math.max(1, end));
};

const keepLatest = (queue: readonly LogMessage[]): LogMessage[] => {
  const samples = queue.filter((message) => message.channel === 1);
  const kept = new Set(samples.slice(-SAMPLES_KEPT));
  return queue.filter((message) => message.channel === 0 || kept.has(message));
};

/** Half a millimetre, a pascal and a hundredth of a newton are below every sensor; more digits only fill the disk. */
const rounded = (sample: ReadingsSample): ReadingsSample => ({
  ...sample,
  at: Number(sample.at.toFixed(3)),
  values: Object.fromEntries(
    Object.entries(sample.values).map(([name, value]) => [
      name,
      Number(value.toFixed(name.includes('pressure') ? 0 : 4)),
    ]),
  ),
  length: sample.length === null ? null : Number(sample.length.toFixed(4)),
  ratio: sample.ratio === null ? null : Number(sample.ratio.toPrecision(4)),
});

const folderName = (started: string, facts: MissionFacts): string => {
  const slug =
    facts.place
      .toLowerCase()
      .replace(/[^a-z0-9]+/g, '-')
      .replace(/^-|-$/g, '') || 'mission';
  const stamp = started.replaceAll(':', '-').replace(/\.\d+/, '');
  return `${stamp}-${slug}-${facts.mission.slice(0, 6)}${facts.simulated ? '-simulated' : ''}`;
};

const json = (value: unknown): Uint8Array => new TextEncoder().encode(JSON.stringify(value));
const nanoseconds = (wall: Date): bigint => BigInt(wall.getTime()) * 1_000_000n;

const isGone = (error: unknown): boolean =>
  (error as NodeJS.ErrnoException).code === 'ENOENT' ||
  (error instanceof Error && error.message.includes('replaced by another'));

/** What a person can do about a disk. */
export const explain = (error: unknown, folder: string): string => {
  const code = (error as NodeJS.ErrnoException).code;
  if (code === 'ENOSPC' || code === 'EDQUOT')
    return `The disk of ${folder} is full. Free some space; recording goes on by itself.`;
  if (code === 'EACCES' || code === 'EPERM' || code === 'EROFS')
    return `${folder} may not be written. Choose another missions folder (--missions), or allow writing there.`;
  if (code === 'ENOENT') return `${folder} is gone. Put the disk back; a new part is begun by itself.`;
  if (code === 'ENOTDIR')
    return `${folder} cannot be made: a file is in the way. Choose another missions folder (--missions).`;
  return `${folder} cannot be written (${error instanceof Error ? error.message : String(error)}). Check the disk.`;
};
