import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { McapStreamReader } from '@mcap/core';
import { afterEach } from 'vitest';
import type { Clock } from '../../../main/clock.ts';
import type { MissionFacts } from '../../../main/record/mission-facts.ts';
import { openRecorder } from '../../../main/record/mission-recorder.ts';
import type { ReadingsSample, Recorder } from '../../../main/record/recorder.ts';
import type { MissionEvent } from '../../../shared-model/mission/event.ts';
import { grow, stamped } from '../../shared-model/mission/story.ts';

export const LEAT: MissionFacts = {
  mission: 'c0ffee00-0000-4000-8000-000000000001',
  place: 'Tarrow Mill leat',
  rig: 'Built-in rig',
  simulated: true,
  software: 'foldback 0.1.0',
};

export const someEvents = (count: number): MissionEvent[] => stamped(grow(0, count / 10).slice(0, count));

export const sampleAt = (at: number, values: Record<string, number> = {}): ReadingsSample => ({
  at,
  values: { body_pressure: 9000, tail_payout: 2, ...values },
  bad: [],
  length: 1,
  ratio: 1.5,
  asked: 0,
  permitted: 0,
});

const folders: string[] = [];
const recorders: Recorder[] = [];
export const freshFolder = async (): Promise<string> => {
  const folder = await mkdtemp(join(tmpdir(), 'foldback-record-'));
  folders.push(folder);
  return folder;
};
/** A recorder that is closed after the test. */
export const record = async (dir: string, clock: Clock, facts = LEAT): Promise<Recorder> => {
  const recorder = await openRecorder(dir, facts, clock);
  recorders.push(recorder);
  return recorder;
};
afterEach(async () => {
  for (const recorder of recorders.splice(0)) await recorder.close();
  for (const folder of folders.splice(0)) await rm(folder, { recursive: true, force: true });
});

/** Messages of a log by topic, by the library's own reader and no code of ours. */
export const messagesOf = async (path: string): Promise<Record<string, Record<string, unknown>[]>> => {
  const reader = new McapStreamReader();
  reader.append(await readFile(path));
  const topics = new Map<number, string>();
  const messages: Record<string, Record<string, unknown>[]> = {};
  for (let record = reader.nextRecord(); record !== undefined; record = reader.nextRecord()) {
    if (record.type === 'Channel') topics.set(record.id, record.topic);
    if (record.type !== 'Message') continue;
    const topic = topics.get(record.channelId) ?? '?';
    messages[topic] ??= [];
    messages[topic].push(JSON.parse(new TextDecoder().decode(record.data)));
  }
  return messages;
};

/** Resolves once `holds`; the test's own limit ends a wait for what never comes. */
export const until = async (holds: () => boolean | Promise<boolean>): Promise<void> => {
  while (!(await holds())) await new Promise((resolve) => setImmediate(resolve));
};
