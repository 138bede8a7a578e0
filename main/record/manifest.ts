import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { readdir, readFile, rename, rm, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import type { MissionEvent } from '../../shared-model/mission/event.ts';
import { foldMission, type MissionState } from '../../shared-model/mission/mission.ts';
import { syncFolder, writeNewFile } from './durable-file.ts';
import type { MissionFacts } from './mission-facts.ts';

export const MANIFEST_NAME = 'manifest.json';

/** What a mission folder says of itself. Times are RFC 3339 UTC; lengths in metres. */
export const manifestSchema = z.object({
  format: z.literal('foldback-mission'),
  version: z.literal(1),
  mission: z.string(),
  place: z.string(),
  rig: z.string(),
  simulated: z.boolean(),
  software: z.string(),
  started: z.string(),
  ended: z.string().nullable(),
  summary: z
    .object({
      length: z.number(),
      longest: z.number(),
      branchPoints: z.number(),
      waypoints: z.number(),
      alarms: z.number(),
    })
    .nullable(),
  files: z.array(z.object({ name: z.string(), bytes: z.number(), sha256: z.string() })),
});
export type Manifest = z.output<typeof manifestSchema>;

/** The manifest of a mission whose events these are; `ended` null while it runs. */
export const manifestOf = (
  facts: MissionFacts,
  started: string,
  ended: string | null,
  events: readonly MissionEvent[],
  files: Manifest['files'],
): Manifest => ({
  format: 'foldback-mission',
  version: 1,
  ...facts,
  started,
  ended,
  summary: summaryOf(foldMission(events)),
  files,
});

/** What a list of missions shows of one; lengths in metres. */
export const summaryOf = (state: MissionState) => ({
  length: state.length,
  longest: state.longest,
  branchPoints: state.branchPoints.length,
  waypoints: state.waypoints.length,
  alarms: state.alarms,
});

/** Written beside and renamed, so that a reader never meets half of it. */
export const writeManifest = async (folder: string, manifest: Manifest): Promise<void> => {
  const path = join(folder, MANIFEST_NAME);
  await rm(`${path}.part`, { force: true });
  await writeNewFile(`${path}.part`, `${JSON.stringify(manifest, null, 2)}\n`);
  await rename(`${path}.part`, path);
  await syncFolder(folder);
};

export const readManifest = async (folder: string): Promise<Manifest> =>
  manifestSchema.parse(JSON.parse(await readFile(join(folder, MANIFEST_NAME), 'utf8')));

/** Every file of the mission but the manifest, with size and SHA-256. */
export const hashFiles = async (folder: string): Promise<Manifest['files']> => {
  const names = (await readdir(folder, { recursive: true }))
    .filter((name) => !name.startsWith(MANIFEST_NAME))
    .sort();
  const files: Manifest['files'] = [];
  for (const name of names) {
    const path = join(folder, name);
    const facts = await stat(path);
    if (facts.isFile())
      files.push({ name: name.replaceAll('\\', '/'), bytes: facts.size, sha256: await sha256(path) });
  }
  return files;
};

const sha256 = (path: string): Promise<string> =>
  new Promise((resolve, reject) => {
    const hash = createHash('sha256');
    createReadStream(path)
      .on('data', (part) => hash.update(part))
      .on('error', reject)
      .on('end', () => resolve(hash.digest('hex')));
  });
