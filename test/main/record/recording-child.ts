/**
 * Records a mission until it is killed. Writes one line a fact on standard output, at once:
 * `a <seq> <seconds it took>` for an acknowledged event, `s <at>` for a reading that was handed over.
 */
import { writeSync } from 'node:fs';
import { systemClock } from '../../../main/clock.ts';
import { openRecorder } from '../../../main/record/mission-recorder.ts';
import type { MissionEvent } from '../../../shared-model/mission/event.ts';

const [missionsDir = '.', seed = '1'] = process.argv.slice(2);
const say = (line: string): number => writeSync(1, `${line}\n`);

const facts = {
  mission: `kill-${seed}`,
  place: 'Tarrow Mill leat',
  rig: 'Built-in rig',
  simulated: true,
  software: 'test',
};
const recorder = await openRecorder(missionsDir, facts, systemClock);
let tick = 0;
let seq = 0;

const appendOne = async (): Promise<void> => {
  const length = 0.1 * (seq + 1);
  const event: MissionEvent = {
    seq: seq++,
    at: systemClock.now(),
    time: systemClock.wall().toISOString(),
    kind: 'extended',
    length,
    tip: { position: [0, 0, length], quaternion: [1, 0, 0, 0] },
  };
  if (await recorder.append(event)) say(`a ${event.seq} ${systemClock.now() - event.at}`);
};

setInterval(() => {
  const at = systemClock.now();
  recorder.sample({
    at,
    values: { tail_payout: tick / 100 },
    bad: [],
    length: null,
    ratio: null,
    asked: 0,
    permitted: 0,
  });
  say(`s ${at}`);
  tick++;
  // Now and then several at once, as a person and the tick may do together.
  if ((tick * 7 + Number(seed)) % 5 === 0) for (let i = 0; i <= tick % 3; i++) void appendOne();
}, 50);
