import { mkdir, rm } from 'node:fs/promises';
import { join } from 'node:path';
import type { MissionEvent } from '../../shared-model/mission/event.ts';
import { syncFolder } from './durable-file.ts';
import { EVENTS, LOG_CHANNELS, LOG_NAME, READINGS } from './log-channels.ts';
import { type Manifest, writeManifest } from './manifest.ts';
import { createMcapLog, type LogMessage, type McapLog } from './mcap-log.ts';
import { folderName, type MissionFacts } from './mission-facts.ts';
import type { ReadingsSample } from './recorder.ts';
import { type Told, thinSample } from './sample-coding.ts';

export interface WaitingSample {
  readonly sample: ReadingsSample;
  readonly wall: Date;
  /** Monotonic [s]. */
  readonly since: number;
}

/**
 * One folder of a mission with its log. A mission has one, or more where a disk was lost on the way; each tells the
 * whole story from its beginning. What a write resolves for is on disk; when it rejects, nothing of it is.
 */
export interface MissionPart {
  readonly number: number;
  readonly folder: string;
  bytes(): number;
  /** How many of the mission's events are in this log. */
  eventsWritten(): number;
  /** Writes those of the mission's events that are not in this log yet, as chunks of their own. */
  writeEvents(events: readonly MissionEvent[]): Promise<void>;
  /** Writes one chunk of the first samples; resolves with how many it took. */
  writeSamples(samples: readonly WaitingSample[]): Promise<number>;
  /** Index and footer. */
  end(): Promise<void>;
  /** Lets go of a log that is lost. */
  abandon(): Promise<void>;
}

/** A chunk is closed at this size; with its index it stays below 64 KiB. */
const CHUNK_BYTES = 48 * 1024;
/** Record header, message header and index entry of a message. */
const MESSAGE_OVERHEAD = 9 + 22 + 16;

/** Makes the folder and log of a part, or of the next number that is free. Rejects with the system's error. */
export const openPart = async (
  missionsDir: string,
  facts: MissionFacts,
  manifest: Manifest,
  number: number,
): Promise<MissionPart> => {
  const folder = join(missionsDir, folderName(manifest.started, facts, number));
  await mkdir(join(folder, 'stills'), { recursive: true });
  const log = await openLog(folder, facts, manifest.started);
  if (log === null) return openPart(missionsDir, facts, manifest, number + 1);
  try {
    await writeManifest(folder, manifest);
  } catch (error) {
    await log.abandon();
    await rm(log.path, { force: true });
    throw error;
  }
  await syncFolder(folder);
  await syncFolder(missionsDir);
  return partOf(number, folder, log);
};

/** Null where a log of this name exists: another mission's, or one of this mission that could not be written on. */
const openLog = (folder: string, facts: MissionFacts, started: string): Promise<McapLog | null> => {
  const metadata = new Map(Object.entries({ ...facts, simulated: String(facts.simulated), started }));
  return createMcapLog(join(folder, LOG_NAME), LOG_CHANNELS, metadata).catch(
    (error: NodeJS.ErrnoException) => {
      if (error.code === 'EEXIST') return null;
      throw error;
    },
  );
};

const partOf = (number: number, folder: string, log: McapLog): MissionPart => {
  let written = 0;
  let told: Told | null = null;
  return {
    number,
    folder,
    bytes: log.bytes,
    eventsWritten: () => written,
    writeEvents: async (events) => {
      while (written < events.length) {
        const messages = fill(events.length - written, (i) => eventMessage(events[written + i]!));
        await log.write(messages);
        written += messages.length;
      }
    },
    writeSamples: async (samples) => {
      const tellings: Told[] = [];
      const messages = fill(samples.length, (i) => {
        const { message, told: after } = thinSample(tellings[i - 1] ?? told, samples[i]!.sample);
        tellings.push(after);
        return { channel: READINGS, time: nanoseconds(samples[i]!.wall), data: json(message) };
      });
      await log.write(messages);
      told = tellings[messages.length - 1] ?? told;
      return messages.length;
    },
    end: log.end,
    abandon: log.abandon,
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

const eventMessage = (event: MissionEvent): LogMessage => ({
  channel: EVENTS,
  time: nanoseconds(new Date(event.time)),
  data: json(event),
});

const json = (value: unknown): Uint8Array => new TextEncoder().encode(JSON.stringify(value));

/** Nanoseconds UTC; a time that is none becomes 0, so that no event is lost for it. */
const nanoseconds = (wall: Date): bigint => BigInt(wall.getTime() || 0) * 1_000_000n;
