import { createReadStream } from 'node:fs';
import { join } from 'node:path';
import { McapStreamReader } from '@mcap/core';
import { type MissionEvent, missionEventSchema } from '../../shared-model/mission/event.ts';
import { EVENTS_TOPIC, LOG_NAME, READINGS_TOPIC } from './log-channels.ts';
import { type LoggedReadings, loggedReadings } from './logged-readings.ts';
import { type Manifest, readManifest } from './manifest.ts';
import { type SampleMessage, sampleMessageSchema } from './sample-coding.ts';

export interface MissionLogContent {
  readonly events: readonly MissionEvent[];
  readonly readings: LoggedReadings;
  /** What was met instead of the log's proper end, or null. */
  readonly trouble: string | null;
}

/** A whole mission folder. `manifest` is null where it is missing or unreadable; the log is read all the same. */
export const readMission = async (
  folder: string,
): Promise<MissionLogContent & { readonly manifest: Manifest | null }> => {
  const manifest = await readManifest(folder).catch(() => null);
  return { manifest, ...(await readMissionLog(join(folder, LOG_NAME))) };
};

/**
 * Reads a mission's log as far as it is whole: a log cut by a crash gives all up to its last chunk, a damaged one all
 * up to the damage. Never rejects for what the file holds or lacks; `trouble` says what was met.
 */
export const readMissionLog = async (
  path: string,
  want: { readonly readings: boolean } = { readings: true },
): Promise<MissionLogContent> => {
  const content = createContent(want.readings);
  const reader = new McapStreamReader();
  let ended = false;
  try {
    for await (const bytes of createReadStream(path, { highWaterMark: 1 << 20 })) {
      reader.append(bytes as Uint8Array);
      for (let record = reader.nextRecord(); record !== undefined; record = reader.nextRecord()) {
        if (record.type === 'Channel') content.topics.set(record.id, record.topic);
        else if (record.type === 'Message') content.take(record.channelId, record.data);
        else if (record.type === 'DataEnd') ended = true;
        else if (record.type === 'Statistics') content.expect(Number(record.messageCount));
      }
    }
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    return content.result(`The log cannot be read beyond event ${content.count()} (${why}).`);
  }
  return content.result(ended ? null : 'The mission was not closed; the log ends with its last whole chunk.');
};

/** Gathers messages; one that does not say what its channel promises is left out and counted. */
const createContent = (wantReadings: boolean) => {
  const topics = new Map<number, string>();
  const events: MissionEvent[] = [];
  const readings: SampleMessage[] = [];
  const text = new TextDecoder();
  let foreign = 0;
  let taken = 0;
  let expected: number | null = null;
  const takeEvent = (data: Uint8Array): void => {
    events.push(missionEventSchema.parse(JSON.parse(text.decode(data))));
  };
  const takeReading = (data: Uint8Array): void => {
    readings.push(sampleMessageSchema.parse(JSON.parse(text.decode(data))));
  };
  return {
    topics,
    count: () => events.length,
    /** What the log itself says of its number of messages. */
    expect: (count: number): void => {
      expected = count;
    },
    take: (channel: number, data: Uint8Array): void => {
      const topic = topics.get(channel);
      taken++;
      try {
        if (topic === EVENTS_TOPIC) takeEvent(data);
        else if (topic !== READINGS_TOPIC) foreign++;
        else if (wantReadings) takeReading(data);
      } catch {
        foreign++;
      }
    },
    result: (trouble: string | null): MissionLogContent => {
      const skipped = foreign === 0 ? null : `${foreign} messages of the log are not understood.`;
      const missing =
        expected === null || expected === taken
          ? null
          : `The log holds ${taken} of its ${expected} messages.`;
      const troubles = [trouble, skipped, missing].filter((one) => one !== null);
      return {
        events,
        readings: loggedReadings(readings),
        trouble: troubles.length === 0 ? null : troubles.join(' '),
      };
    },
  };
};
