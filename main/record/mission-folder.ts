import { readdir, readFile, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { McapStreamReader } from '@mcap/core';
import type { MissionOnDisk } from '../../shared-model/contract/request.ts';
import { type MissionEvent, missionEventSchema } from '../../shared-model/mission/event.ts';
import { foldMission } from '../../shared-model/mission/mission.ts';
import { readManifest } from './manifest.ts';
import { EVENTS_TOPIC, READINGS_TOPIC, sampleSchema } from './mission-recorder.ts';
import type { ReadingsSample } from './recorder.ts';

export interface MissionLogContent {
  readonly events: readonly MissionEvent[];
  readonly samples: readonly ReadingsSample[];
  /** What was met instead of the log's proper end, or null. */
  readonly trouble: string | null;
}

/** Reads a mission's log as far as it is whole; a log cut by a crash gives all up to its last chunk. */
export const readMissionLog = async (path: string): Promise<MissionLogContent> => {
  const bytes = await readFile(path);
  const reader = new McapStreamReader();
  const topics = new Map<number, string>();
  const events: MissionEvent[] = [];
  const samples: ReadingsSample[] = [];
  let trouble: string | null = null;
  let ended = false;
  try {
    reader.append(bytes);
    for (let record = reader.nextRecord(); record !== undefined; record = reader.nextRecord()) {
      if (record.type === 'Channel') topics.set(record.id, record.topic);
      else if (record.type === 'DataEnd') ended = true;
      else if (record.type === 'Message') {
        const value: unknown = JSON.parse(new TextDecoder().decode(record.data));
        const topic = topics.get(record.channelId);
        if (topic === EVENTS_TOPIC) events.push(missionEventSchema.parse(value));
        else if (topic === READINGS_TOPIC) samples.push(sampleSchema.parse(value));
      }
    }
    if (!ended) trouble = 'The log ends without its end mark; the mission was not closed.';
  } catch (error) {
    trouble = `The log is damaged after ${events.length} events: ${error instanceof Error ? error.message : String(error)}`;
  }
  return { events, samples, trouble };
};

/** Every mission folder below `dir`, newest first; what cannot be read is listed with its trouble. */
export const listMissions = async (dir: string): Promise<MissionOnDisk[]> => {
  const names = await readdir(dir).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return [];
    throw error;
  });
  const missions: MissionOnDisk[] = [];
  for (const name of names.sort().reverse()) {
    const folder = join(dir, name);
    if ((await stat(folder).catch(() => null))?.isDirectory()) missions.push(await describe(folder));
  }
  return missions;
};

const describe = async (folder: string): Promise<MissionOnDisk> => {
  const bytes = await sizeOf(folder);
  try {
    const manifest = await readManifest(folder);
    const known = {
      id: manifest.mission,
      folder,
      place: manifest.place,
      simulated: manifest.simulated,
      started: manifest.started,
      ended: manifest.ended,
      bytes,
    };
    if (manifest.ended !== null && manifest.summary !== null)
      return { ...known, ...manifest.summary, trouble: null };
    // Not closed: the manifest is of the start, the log knows better.
    const log = await readMissionLog(join(folder, 'mission.mcap'));
    const state = foldMission(log.events);
    return {
      ...known,
      length: state.length,
      longest: state.longest,
      branchPoints: state.branchPoints.length,
      waypoints: state.waypoints.length,
      alarms: state.alarms,
      trouble: log.trouble,
    };
  } catch (error) {
    const nothing = {
      place: '',
      simulated: false,
      started: '',
      ended: null,
      length: 0,
      longest: 0,
      branchPoints: 0,
      waypoints: 0,
      alarms: 0,
    };
    return {
      id: '',
      folder,
      ...nothing,
      bytes,
      trouble: `Not a readable mission folder: ${error instanceof Error ? (error.message.split('\n')[0] ?? '') : String(error)}`,
    };
  }
};

const sizeOf = async (folder: string): Promise<number> => {
  const names = await readdir(folder, { recursive: true }).catch(() => []);
  const sizes = await Promise.all(
    names.map((name) =>
      stat(join(folder, name)).then(
        (facts) => (facts.isFile() ? facts.size : 0),
        () => 0,
      ),
    ),
  );
  return sizes.reduce((sum, size) => sum + size, 0);
};
