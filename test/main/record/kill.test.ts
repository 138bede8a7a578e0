import { spawn } from 'node:child_process';
import { readdir } from 'node:fs/promises';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { describe, expect, it } from 'vitest';
import { readMission } from '../../../main/record/read-mission.ts';
import { foldMission } from '../../../shared-model/mission/mission.ts';
import { freshFolder, messagesOf } from './a-mission.ts';

/** Raise it for a campaign (FOLDBACK_KILLS=200). */
const KILLS = Number(process.env.FOLDBACK_KILLS ?? 20);
const SIDE_BY_SIDE = 4;

/** Numerical Recipes' quick linear congruential generator (from memory): any spread of moments will do. */
const fractions = function* (seed: number) {
  for (let x = seed; ; ) {
    x = (Math.imul(x, 1664525) + 1013904223) >>> 0;
    yield x / 2 ** 32;
  }
};

interface Killed {
  readonly folder: string;
  readonly acknowledged: readonly number[];
  readonly slowest: number;
  readonly handedOver: readonly number[];
}

/** Records and is killed once it has handed over this many readings. */
const recordUntil = async (dir: string, seed: number, readings: number): Promise<Killed> => {
  const child = spawn(
    process.execPath,
    ['--import', 'tsx', join(import.meta.dirname, 'recording-child.ts'), dir, String(seed)],
    { stdio: ['ignore', 'pipe', 'inherit'] },
  );
  const acknowledged: number[] = [];
  const handedOver: number[] = [];
  let slowest = 0;
  for await (const line of createInterface({ input: child.stdout })) {
    const [kind, value, took] = line.split(' ');
    if (kind === 's') handedOver.push(Number(value));
    if (kind === 'a') {
      acknowledged.push(Number(value));
      slowest = Math.max(slowest, Number(took));
    }
    if (handedOver.length === readings) child.kill('SIGKILL');
  }
  const [name = ''] = await readdir(dir);
  return { folder: join(dir, name), acknowledged, handedOver, slowest };
};

const checkKilled = async (killed: Killed): Promise<void> => {
  const messages = await messagesOf(join(killed.folder, 'mission.mcap'));
  const logged = (messages['/events'] ?? []).map((event) => event.seq as number);
  expect(logged).toEqual(logged.map((_, i) => i));
  expect(killed.acknowledged.filter((seq) => !logged.includes(seq))).toEqual([]);

  // A write that the machine holds up is not the recorder's waiting; the slowest acknowledgement shows how long it does.
  const last = (messages['/readings'] ?? []).at(-1)?.at as number | undefined;
  const lost = killed.handedOver.at(-1)! - (last ?? killed.handedOver[0]!);
  expect(lost).toBeLessThanOrEqual(1 + killed.slowest);

  const mission = await readMission(killed.folder);
  expect(mission.events.map((event) => event.seq)).toEqual(logged);
  expect(foldMission(mission.events).longest).toBeCloseTo(0.1 * logged.length, 9);
};

describe(`a console killed while it records, ${KILLS} times`, () => {
  it('has lost nothing that was acknowledged, and no more than a second of readings', async () => {
    const moments = fractions(20260401);
    const runs = Array.from({ length: KILLS }, (_, i) => ({
      seed: i,
      readings: 1 + Math.floor(60 * (moments.next().value as number)),
    }));
    let acknowledged = 0;
    const worker = async (): Promise<void> => {
      for (let run = runs.pop(); run !== undefined; run = runs.pop()) {
        const killed = await recordUntil(await freshFolder(), run.seed, run.readings);
        acknowledged += killed.acknowledged.length;
        await checkKilled(killed);
      }
    };
    await Promise.all(Array.from({ length: SIDE_BY_SIDE }, worker));
    expect(acknowledged).toBeGreaterThan(KILLS);
  }, 600_000);
});
