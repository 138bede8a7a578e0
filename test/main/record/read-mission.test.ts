import { readFile, truncate, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createMcapLog } from '../../../main/record/mcap-log.ts';
import { readMissionLog } from '../../../main/record/read-mission.ts';
import { freshFolder, record, sampleAt, someEvents } from './a-mission.ts';
import { createHandClock } from './hand-clock.ts';

const aLog = async (closed: boolean) => {
  const clock = createHandClock();
  const recorder = await record(await freshFolder(), clock);
  const events = someEvents(12);
  for (const event of events) {
    clock.pass(0.8);
    recorder.sample(sampleAt(clock.now()));
    await recorder.append(event);
  }
  if (closed) await recorder.close();
  return { path: join(recorder.folder, 'mission.mcap'), events };
};

describe('a log that is not whole', () => {
  it('gives every event of an unclosed mission, and says that it was not closed', async () => {
    const { path, events } = await aLog(false);
    const log = await readMissionLog(path);
    expect(log.events).toEqual(events);
    expect(log.trouble).toMatch(/not closed/);
  });

  it('gives the events up to wherever it was cut', async () => {
    const { path, events } = await aLog(false);
    const whole = await readFile(path);
    await fc.assert(
      fc.asyncProperty(fc.nat(whole.length - 1), async (cut) => {
        const broken = `${path}.cut`;
        await writeFile(broken, whole);
        await truncate(broken, cut);
        const log = await readMissionLog(broken);
        expect(log.events).toEqual(events.slice(0, log.events.length));
        expect(log.trouble).not.toBeNull();
      }),
    );
  });

  it('gives no event that was not recorded and hides no loss, whichever byte is damaged', async () => {
    const { path, events } = await aLog(true);
    const whole = await readFile(path);
    await fc.assert(
      fc.asyncProperty(fc.nat(whole.length - 1), fc.integer({ min: 1, max: 255 }), async (at, change) => {
        const damaged = Buffer.from(whole);
        damaged[at] = damaged[at]! ^ change;
        await writeFile(`${path}.bad`, damaged);
        const log = await readMissionLog(`${path}.bad`);
        expect(log.events).toEqual(log.events.map((event) => events[event.seq]));
        expect(log.trouble !== null || log.events.length === events.length).toBe(true);
      }),
    );
  });

  it('is read past a message that is not understood, and says how many there were', async () => {
    const path = join(await freshFolder(), 'mission.mcap');
    const log = await createMcapLog(path, [{ topic: '/events', schemaName: 'x', jsonSchema: {} }], new Map());
    const [event] = someEvents(1);
    for (const value of [{ kind: 'from-a-later-version' }, event])
      await log.write([{ channel: 0, time: 0n, data: new TextEncoder().encode(JSON.stringify(value)) }]);
    await log.end();
    const read = await readMissionLog(path);
    expect(read.events).toEqual([event]);
    expect(read.trouble).toMatch(/^1 message/);
  });

  it('that is missing, or no log at all, is said so', async () => {
    const dir = await freshFolder();
    await writeFile(join(dir, 'mission.mcap'), 'no log');
    for (const name of ['mission.mcap', 'missing.mcap']) {
      const log = await readMissionLog(join(dir, name));
      expect(log).toMatchObject({ events: [], readings: { count: 0 } });
      expect(log.trouble).toMatch(/\S/);
    }
  });
});
