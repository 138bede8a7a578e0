import { mkdir, rm, truncate, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { missions } from '../../../main/commands/missions.ts';
import { listMissions } from '../../../main/record/mission-folder.ts';
import { grow, markAt, stamped, waypoint } from '../../shared-model/mission/story.ts';
import { freshFolder, LEAT, record } from './a-mission.ts';
import { createHandClock } from './hand-clock.ts';

const STORY = stamped([
  {
    kind: 'mission-started',
    mission: LEAT.mission,
    place: LEAT.place,
    rig: LEAT.rig,
    simulated: true,
    software: LEAT.software,
  },
  ...grow(0, 3),
  markAt(3),
  waypoint('w1', 3),
]);

const recordOn = async (dir: string, day: number, close = true): Promise<string> => {
  const recorder = await record(dir, createHandClock(Date.UTC(2026, 3, day, 9, 30)));
  for (const event of STORY) await recorder.append(event);
  if (close) await recorder.close();
  return recorder.folder;
};

describe('the missions on disk', () => {
  it('are listed newest first with what is in them', async () => {
    const dir = await freshFolder();
    await recordOn(dir, 1);
    await recordOn(dir, 2);
    const found = await listMissions(dir);
    expect(found.map((one) => one.started.slice(0, 10))).toEqual(['2026-04-02', '2026-04-01']);
    expect(found[0]).toMatchObject({
      place: LEAT.place,
      simulated: true,
      branchPoints: 1,
      waypoints: 1,
      trouble: null,
    });
    expect(found[0]?.longest).toBeCloseTo(3, 9);
  });

  it('tell what an unclosed mission holds from its log', async () => {
    const dir = await freshFolder();
    await recordOn(dir, 1, false);
    const [found] = await listMissions(dir);
    expect(found).toMatchObject({ id: LEAT.mission, ended: null, waypoints: 1, branchPoints: 1 });
    expect(found?.trouble).toMatch(/not closed/);
  });

  it('tell what a mission without its manifest was', async () => {
    const dir = await freshFolder();
    await rm(join(await recordOn(dir, 1), 'manifest.json'));
    const [found] = await listMissions(dir);
    expect(found).toMatchObject({ id: LEAT.mission, place: LEAT.place, simulated: true, waypoints: 1 });
    expect(found?.trouble).toMatch(/manifest/);
  });

  it('say which file is not as the manifest has it', async () => {
    const dir = await freshFolder();
    await truncate(join(await recordOn(dir, 1), 'mission.mcap'), 200);
    expect((await listMissions(dir))[0]?.trouble).toMatch(/mission\.mcap/);
  });

  it('list a folder that is no mission with its trouble, and pass over files', async () => {
    const dir = await freshFolder();
    await mkdir(join(dir, 'holiday'));
    await writeFile(join(dir, 'notes.txt'), '');
    expect(await listMissions(dir)).toMatchObject([
      { folder: join(dir, 'holiday'), trouble: expect.stringMatching(/not a mission folder/) },
    ]);
  });

  it('are none where there is no folder yet', async () => {
    expect(await listMissions(join(await freshFolder(), 'later'))).toEqual([]);
  });
});

describe('foldback missions', () => {
  const run = async (dir: string, json: boolean) => {
    const lines: string[] = [];
    const errors: string[] = [];
    const code = await missions(dir, json, {
      out: (line) => lines.push(line),
      error: (line) => errors.push(line),
    });
    return { code, lines, errors };
  };

  it('prints place, simulated mark, length and counts of each', async () => {
    const dir = await freshFolder();
    const folder = await recordOn(dir, 1);
    const { code, lines } = await run(dir, false);
    expect(code).toBe(0);
    expect(lines.join('\n')).toContain('Tarrow Mill leat (simulated)  3.00 m  1 branch point  1 waypoint');
    expect(lines.join('\n')).toContain(folder);
  });

  it('prints the same as JSON', async () => {
    const dir = await freshFolder();
    await recordOn(dir, 1);
    const { lines } = await run(dir, true);
    expect(JSON.parse(lines.join('\n'))).toEqual(await listMissions(dir));
  });

  it('says what to do about a folder that cannot be read', async () => {
    const dir = await freshFolder();
    await writeFile(join(dir, 'file'), '');
    const { code, errors } = await run(join(dir, 'file'), false);
    expect(code).toBe(1);
    expect(errors.join()).toMatch(/cannot be read.*Give the folder/);
  });
});
