import { readdir, stat } from 'node:fs/promises';
import { join } from 'node:path';
import type { MissionOnDisk } from '../../shared-model/contract/request.ts';
import { foldMission } from '../../shared-model/mission/mission.ts';
import { LOG_NAME } from './log-channels.ts';
import { type Manifest, readManifest, summaryOf } from './manifest.ts';
import { readMissionLog } from './read-mission.ts';

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
  const sizes = await sizesOf(folder);
  const bytes = [...sizes.values()].reduce((sum, size) => sum + size, 0);
  const manifest = await readManifest(folder).catch((error: unknown) => asError(error));
  if (manifest instanceof Error) return fromLog(folder, bytes, manifest);
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
    return { ...known, ...manifest.summary, trouble: missingFiles(manifest, sizes) };
  // Not closed: the manifest is of the start, the log knows better.
  const log = await readMissionLog(join(folder, LOG_NAME), { readings: false });
  return { ...known, ...summaryOf(foldMission(log.events)), trouble: log.trouble };
};

/** Without a manifest the log still tells what the mission was. */
const fromLog = async (folder: string, bytes: number, why: Error): Promise<MissionOnDisk> => {
  const log = await readMissionLog(join(folder, LOG_NAME), { readings: false });
  const state = foldMission(log.events);
  return {
    id: state.id ?? '',
    folder,
    place: state.place,
    simulated: state.simulated,
    started: state.started ?? '',
    ended: state.ended,
    bytes,
    ...summaryOf(state),
    trouble:
      log.events.length === 0
        ? 'This is not a mission folder, or nothing in it can be read.'
        : `The manifest cannot be read (${why.message.split('\n')[0]}); this is what the log says.`,
  };
};

const missingFiles = (manifest: Manifest, sizes: ReadonlyMap<string, number>): string | null => {
  const wrong = manifest.files.filter(({ name, bytes }) => sizes.get(name) !== bytes);
  return wrong.length === 0
    ? null
    : `Missing, or not of the size that the manifest says: ${wrong.map(({ name }) => name).join(', ')}.`;
};

/** Size of every file by its name in the folder. */
const sizesOf = async (folder: string): Promise<Map<string, number>> => {
  const names = await readdir(folder, { recursive: true }).catch(() => []);
  const sizes = new Map<string, number>();
  for (const name of names) {
    const facts = await stat(join(folder, name)).catch(() => null);
    if (facts?.isFile()) sizes.set(name.replaceAll('\\', '/'), facts.size);
  }
  return sizes;
};

const asError = (error: unknown): Error => (error instanceof Error ? error : new Error(String(error)));
