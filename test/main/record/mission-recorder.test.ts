import { createHash } from 'node:crypto';
import { open, readdir, readFile } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { McapIndexedReader, McapStreamReader, type McapTypes } from '@mcap/core';
import { describe, expect, it } from 'vitest';
import { readManifest } from '../../../main/record/manifest.ts';
import { readMission } from '../../../main/record/read-mission.ts';
import { freshFolder, LEAT, messagesOf, record, sampleAt, someEvents, until } from './a-mission.ts';
import { createHandClock, type HandClock } from './hand-clock.ts';

const logOf = (folder: string) => join(folder, 'mission.mcap');

/** Twelve seconds at 20 Hz with an event every half second, closed. */
const shortMission = async (facts = LEAT) => {
  const clock = createHandClock();
  const dir = await freshFolder();
  const recorder = await record(dir, clock, facts);
  const events = someEvents(24);
  for (let i = 0; i < 240; i++) {
    clock.pass(0.05);
    recorder.sample(sampleAt(clock.now(), { tail_payout: i / 100 }));
    if (i % 10 === 0) await recorder.append(events[i / 10]!);
  }
  await recorder.still('001-ab12.jpg', new Uint8Array([0xff, 0xd8, 0xff, 0xd9]));
  await recorder.close();
  return { dir, folder: recorder.folder, events, recorder };
};

const records = async (path: string): Promise<McapTypes.TypedMcapRecord[]> => {
  const reader = new McapStreamReader({ includeChunks: true });
  reader.append(await readFile(path));
  const all: McapTypes.TypedMcapRecord[] = [];
  for (let record = reader.nextRecord(); record !== undefined; record = reader.nextRecord()) all.push(record);
  return all;
};

describe('a finished mission', () => {
  it('is an indexed MCAP file that the library reads, all topics, in time', async () => {
    const { folder } = await shortMission();
    const file = await open(logOf(folder));
    const reader = await McapIndexedReader.Initialize({
      readable: {
        size: async () => BigInt((await file.stat()).size),
        read: async (offset, length) => {
          const bytes = new Uint8Array(Number(length));
          await file.read(bytes, 0, bytes.length, Number(offset));
          return bytes;
        },
      },
    });
    const counts: Record<string, number> = {};
    for await (const message of reader.readMessages()) {
      const topic = reader.channelsById.get(message.channelId)?.topic ?? '?';
      counts[topic] = (counts[topic] ?? 0) + 1;
    }
    await file.close();
    expect(counts).toEqual({ '/events': 24, '/readings': 240 });
    expect(reader.header).toMatchObject({ profile: '', library: 'foldback' });
    expect(reader.statistics?.messageCount).toBe(264n);
    const schemas = [...reader.schemasById.values()];
    expect(schemas.map((schema) => schema.encoding)).toEqual(['jsonschema', 'jsonschema']);
    for (const schema of schemas)
      expect(JSON.parse(new TextDecoder().decode(schema.data))).toHaveProperty('$schema');
  });

  it('gives back every event and every reading', async () => {
    const { folder, events } = await shortMission();
    const mission = await readMission(folder);
    expect(mission.events).toEqual(events);
    expect(mission.readings.count).toBe(240);
    expect(mission.readings.sample(239).values.tail_payout).toBeCloseTo(2.39, 2);
    expect(mission.trouble).toBeNull();
  });

  it('lists its files with their size and SHA-256', async () => {
    const { folder } = await shortMission();
    const manifest = await readManifest(folder);
    expect(manifest.files.map(({ name }) => name)).toEqual(['mission.mcap', 'stills/001-ab12.jpg']);
    for (const file of manifest.files) {
      const bytes = await readFile(join(folder, file.name));
      expect(file.bytes).toBe(bytes.length);
      expect(file.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
    }
    expect(manifest).toMatchObject({
      ended: '2026-04-01T09:30:12.000Z',
      summary: { longest: 2.4, waypoints: 0 },
    });
    expect(await readdir(folder)).not.toContain('manifest.json.part');
  });

  it('takes nothing more', async () => {
    const { recorder } = await shortMission();
    expect(await recorder.append(someEvents(30)[29]!)).toBe(false);
    expect(recorder.status().state).toBe('off');
    await recorder.close();
  });
});

describe('the mark of a simulated rig', () => {
  it('is in the folder name, the manifest, the log and the pictures', async () => {
    const { folder } = await shortMission();
    expect(basename(folder)).toMatch(/^2026-04-01T09-30-00Z-tarrow-mill-leat-.*simulated$/);
    expect((await readManifest(folder)).simulated).toBe(true);
    const metadata = (await records(logOf(folder))).find((record) => record.type === 'Metadata');
    expect(metadata?.metadata.get('simulated')).toBe('true');
    const picture = await readFile(join(folder, 'stills/001-ab12.jpg'));
    expect(picture.toString('latin1')).toContain('Simulated: Built-in rig, Tarrow Mill leat');
  });

  it('is in nothing that a real rig leaves', async () => {
    const { folder } = await shortMission({ ...LEAT, simulated: false });
    const bytes = await Promise.all(
      ['manifest.json', 'stills/001-ab12.jpg'].map((name) => readFile(join(folder, name), 'latin1')),
    );
    expect(bytes.join()).not.toMatch(/simulated": true|Simulated/);
    expect(basename(folder)).not.toContain('simulated');
  });
});

describe('a mission under way', () => {
  const start = async () => {
    const clock = createHandClock();
    const recorder = await record(await freshFolder(), clock);
    return { clock, recorder };
  };
  const sampleFor = (
    clock: HandClock,
    recorder: Awaited<ReturnType<typeof start>>['recorder'],
    seconds: number,
  ) => {
    for (let i = 0; i < seconds * 20; i++) {
      clock.pass(0.05);
      recorder.sample(sampleAt(clock.now()));
    }
  };

  it('has every acknowledged event in its log at once', async () => {
    const { recorder } = await start();
    for (const event of someEvents(5)) {
      expect(await recorder.append(event)).toBe(true);
      expect((await messagesOf(logOf(recorder.folder)))['/events']?.at(-1)).toEqual(event);
    }
  });

  it('keeps the order of events that are handed over together', async () => {
    const { recorder } = await start();
    const events = someEvents(300);
    expect(await Promise.all(events.map((event) => recorder.append(event)))).not.toContain(false);
    expect((await messagesOf(logOf(recorder.folder)))['/events']).toEqual(events);
  });

  it('has readings in its log before they are a second old, even when no more come', async () => {
    const { clock, recorder } = await start();
    sampleFor(clock, recorder, 0.5);
    clock.pass(0.45);
    await until(async () => (await messagesOf(logOf(recorder.folder)))['/readings']?.length === 10);
  });

  it('cuts its log into chunks of at most 64 KiB, however much comes at once', async () => {
    const { recorder } = await start();
    const long = someEvents(100).map((event) => ({ ...event, kind: 'stopped', by: 'x'.repeat(3000) }));
    await Promise.all(
      long.map((event) =>
        recorder.append({ seq: event.seq, at: 0, time: event.time, kind: 'stopped', by: event.by }),
      ),
    );
    const chunks = (await records(logOf(recorder.folder))).filter((record) => record.type === 'Chunk');
    expect(chunks.length).toBeGreaterThan(4);
    for (const chunk of chunks) expect(chunk.records.length).toBeLessThanOrEqual(64 * 1024);
  });

  it('records a refusal whose force is infinite, with the largest number there is', async () => {
    const { recorder } = await start();
    const forces = {
      length: 0,
      tipTension: 0,
      baseTension: 0,
      columnLoad: Number.POSITIVE_INFINITY,
      arm: 0,
      capacity: 1,
      ratio: 1,
    };
    const [event] = someEvents(1);
    const refused = await recorder.append({
      seq: 0,
      at: 1,
      time: event!.time,
      kind: 'pull-refused',
      motion: 'retract',
      length: 0,
      forces,
      margin: 1.25,
      reasons: [],
    });
    expect(refused).toBe(true);
    expect((await readMission(recorder.folder)).events[0]).toMatchObject({
      forces: { columnLoad: Number.MAX_VALUE },
    });
  });

  it('does not acknowledge an event that could not be read back', async () => {
    const { recorder } = await start();
    const [event, next] = someEvents(2);
    expect(await recorder.append({ ...event, length: Number.NaN } as never)).toBe(false);
    expect(await recorder.append(next!)).toBe(true);
    expect((await readMission(recorder.folder)).events).toEqual([next]);
  });

  it('does not share a folder with a mission of the same name', async () => {
    const { recorder, clock } = await start();
    const twin = await record(join(recorder.folder, '..'), createHandClock());
    expect(twin.folder).not.toBe(recorder.folder);
    expect(twin.status().state).toBe('recording');
    clock.pass(1);
  });
});
