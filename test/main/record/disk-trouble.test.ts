import type { FileHandle } from 'node:fs/promises';
import { mkdir, readdir, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { readMission } from '../../../main/record/read-mission.ts';
import { freshFolder, messagesOf, record, sampleAt, someEvents, until } from './a-mission.ts';
import { createHandClock } from './hand-clock.ts';

/** The disk below the recorder: how many bytes it still takes, and what it answers when it refuses. */
const disk = vi.hoisted(() => ({ room: Number.POSITIVE_INFINITY, code: 'ENOSPC' }));

vi.mock('node:fs/promises', async (importOriginal) => {
  const real = await importOriginal<typeof import('node:fs/promises')>();
  const refuse = () => Object.assign(new Error(disk.code), { code: disk.code });
  const take = (bytes: number): number => {
    const taken = Math.min(bytes, disk.room);
    disk.room -= taken;
    return taken;
  };
  const guarded = (file: FileHandle): FileHandle => {
    const write = file.write.bind(file) as (...args: unknown[]) => unknown;
    const writeFile = file.writeFile.bind(file);
    Object.assign(file, {
      // A disk that fills up takes a part of the bytes first, then none (POSIX write).
      write: async (bytes: Uint8Array, offset: number, length: number, position: number) => {
        const taken = take(length);
        if (taken === 0) throw refuse();
        return write(bytes, offset, taken, position);
      },
      writeFile: async (content: string | Uint8Array) => {
        const taken = take(content.length);
        await writeFile(content.slice(0, taken));
        if (taken < content.length) throw refuse();
      },
    });
    return file;
  };
  const open = async (...args: Parameters<typeof real.open>) => {
    if (disk.code === 'EACCES' && disk.room === 0 && args[1] === 'wx') throw refuse();
    return guarded(await real.open(...args));
  };
  return { ...real, open, default: { ...real, open } };
});

afterEach(() => {
  [disk.room, disk.code] = [Number.POSITIVE_INFINITY, 'ENOSPC'];
});

const start = async (dir?: string) => {
  const clock = createHandClock();
  const missions = dir ?? (await freshFolder());
  const recorder = await record(missions, clock);
  return { clock, missions, recorder, events: someEvents(40) };
};
const logOf = (folder: string) => join(folder, 'mission.mcap');

describe('a disk that is full', () => {
  it('is said so with its remedy, and acknowledges nothing that is not on it', async () => {
    const { recorder, events } = await start();
    await recorder.append(events[0]!);
    disk.room = 100;
    expect(await recorder.append(events[1]!)).toBe(false);
    expect(recorder.status()).toMatchObject({
      state: 'failed',
      text: expect.stringMatching(/full.*Free some space/),
    });
  });

  it('harms nothing written before', async () => {
    const { recorder, events } = await start();
    for (const event of events.slice(0, 5)) await recorder.append(event);
    const before = await readFile(logOf(recorder.folder));
    disk.room = 100;
    await recorder.append(events[5]!);
    const after = await readFile(logOf(recorder.folder));
    expect(after.equals(before)).toBe(true);
    expect((await readMission(recorder.folder)).events).toEqual(events.slice(0, 5));
  });

  it('gets what was kept as soon as it has room, without being asked', async () => {
    const { clock, recorder, events } = await start();
    await recorder.append(events[0]!);
    disk.room = 0;
    for (const event of events.slice(1, 4)) expect(await recorder.append(event)).toBe(false);
    recorder.sample(sampleAt(clock.now()));
    disk.room = Number.POSITIVE_INFINITY;
    clock.pass(3);
    await until(() => recorder.status().state === 'recording');
    const messages = await messagesOf(logOf(recorder.folder));
    expect(messages['/events']).toEqual(events.slice(0, 4));
    expect(messages['/readings']).toHaveLength(1);
    expect(await recorder.append(events[4]!)).toBe(true);
  });

  it('keeps the last minute of readings, not all of them, while it lasts', async () => {
    const { clock, recorder, events } = await start();
    disk.room = 0;
    for (let i = 0; i < 20 * 200; i++) {
      clock.pass(0.05);
      recorder.sample(sampleAt(clock.now(), { tail_payout: i }));
      if (i % 100 === 0) await new Promise((resolve) => setImmediate(resolve));
    }
    // Behind this no write is under way any more.
    await recorder.append(events[0]!);
    disk.room = Number.POSITIVE_INFINITY;
    await recorder.close();
    const { readings } = await readMission(recorder.folder);
    expect(readings.sample(readings.count - 1).values.tail_payout).toBe(3999);
    expect(readings.count).toBeLessThanOrEqual(2400);
    expect(readings.count).toBeGreaterThanOrEqual(1200);
  });

  it('from the start leaves one folder, not one for every try', async () => {
    disk.room = 50;
    const { clock, missions, recorder, events } = await start();
    expect(recorder.status().state).toBe('failed');
    expect(await recorder.append(events[0]!)).toBe(false);
    for (let i = 0; i < 5; i++) {
      clock.pass(3);
      await recorder.append(events[i + 1]!);
    }
    disk.room = Number.POSITIVE_INFINITY;
    clock.pass(3);
    expect(await recorder.append(events[6]!)).toBe(true);
    expect(await readdir(missions)).toHaveLength(1);
    expect((await readMission(recorder.folder)).events).toEqual(events.slice(0, 7));
  });

  it('does not let a mission be called ended', async () => {
    const { recorder, events } = await start();
    await recorder.append(events[0]!);
    disk.room = 0;
    await recorder.append(events[1]!);
    await recorder.close();
    expect(recorder.status()).toMatchObject({ state: 'off', text: expect.stringContaining('full') });
    const mission = await readMission(recorder.folder);
    expect(mission.manifest?.ended).toBeNull();
    expect(mission.events).toEqual([events[0]]);
  });

  it('refuses a picture with a sentence and leaves none half-written', async () => {
    const { recorder } = await start();
    disk.room = 3;
    const picture = new Uint8Array([0xff, 0xd8, 0xff, 0xd9]);
    await expect(recorder.still('001-ab12.jpg', picture)).rejects.toThrow(/full.*Free some space/);
    expect(await readdir(join(recorder.folder, 'stills'))).toEqual([]);
  });
});

describe('a folder that cannot be used', () => {
  it('because a file is in the way is said so, and used once the way is free', async () => {
    const dir = await freshFolder();
    const missions = join(dir, 'missions');
    await writeFile(missions, 'in the way');
    const { clock, recorder, events } = await start(missions);
    expect(recorder.status()).toMatchObject({
      state: 'failed',
      text: expect.stringMatching(/a file is in the way.*--missions/),
    });
    expect(await recorder.append(events[0]!)).toBe(false);
    await rm(missions);
    clock.pass(3);
    expect(await recorder.append(events[1]!)).toBe(true);
    expect((await readMission(recorder.folder)).events).toEqual(events.slice(0, 2));
  });

  it('because it may not be written is said so', async () => {
    [disk.room, disk.code] = [0, 'EACCES'];
    const { recorder } = await start();
    expect(recorder.status()).toMatchObject({
      state: 'failed',
      text: expect.stringMatching(/may not be written.*--missions/),
    });
  });

  it('because it was removed gets a new folder that holds the whole mission', async () => {
    const { clock, recorder, events } = await start();
    for (const event of events.slice(0, 3)) await recorder.append(event);
    const lost = recorder.folder;
    await rm(lost, { recursive: true });
    expect(await recorder.append(events[3]!)).toBe(false);
    expect(recorder.status()).toMatchObject({ state: 'failed', text: expect.stringContaining('is gone') });
    clock.pass(3);
    expect(await recorder.append(events[4]!)).toBe(true);
    expect(recorder.folder).not.toBe(lost);
    expect(recorder.folder).toMatch(/simulated$/);
    expect((await readMission(recorder.folder)).events).toEqual(events.slice(0, 5));
  });

  it('because another took its place leaves the other alone', async () => {
    const { clock, recorder, events } = await start();
    await recorder.append(events[0]!);
    const moved = `${recorder.folder}-moved`;
    await rename(recorder.folder, moved);
    await mkdir(recorder.folder);
    await writeFile(logOf(recorder.folder), 'not ours');
    const place = recorder.folder;
    expect(await recorder.append(events[1]!)).toBe(false);
    clock.pass(3);
    expect(await recorder.append(events[2]!)).toBe(true);
    expect(await readFile(logOf(place), 'utf8')).toBe('not ours');
    expect((await readMission(recorder.folder)).events).toEqual(events.slice(0, 3));
    expect((await readMission(moved)).events).toEqual([events[0]]);
  });
});
