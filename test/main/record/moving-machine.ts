import { stat } from 'node:fs/promises';
import { join } from 'node:path';
import { openRecorder } from '../../../main/record/mission-recorder.ts';
import type { ReadingsSample } from '../../../main/record/recorder.ts';
import { tipAt } from '../../shared-model/mission/story.ts';
import { createHandClock } from './hand-clock.ts';

/** A seeded normal deviate: the sum of twelve uniforms (central limit theorem). */
const noise = (seed: number) => {
  let x = seed;
  const uniform = () => {
    x = (Math.imul(x, 1664525) + 1013904223) >>> 0;
    return x / 2 ** 32;
  };
  return (deviation: number) =>
    deviation * (Array.from({ length: 12 }, uniform).reduce((sum, one) => sum + one, 0) - 6);
};

/**
 * A machine of eighteen signals that grows and comes back at 0.1 m/s and steers all the while, with the noise of
 * industrial sensors: 0.1 % of 10 kPa and of 50 kPa, a load cell's 0.05 N, encoder counts of 0.2 mm (common practice).
 */
const movingMachine = (normal: (deviation: number) => number, at: number): ReadingsSample => {
  const length = 10 + 5 * Math.abs(((((at * 0.02) % 2) + 2) % 2) - 1) * 2;
  const bend = Math.sin(at / 6);
  return {
    at,
    values: {
      body_pressure: 9000 + normal(10),
      tail_payout: Math.round((2 * length) / 0.0002) * 0.0002,
      tail_tension: 60 + 10 * bend + normal(0.05),
      muscle_1_pressure: 20_000 + 8000 * bend + normal(25),
      muscle_2_pressure: 9000 - 4000 * bend + normal(25),
      muscle_3_pressure: normal(25),
      tip_retractor_attached: 0,
      tip_retractor_travel: 0,
      tip_roll: 0.04 + normal(0.002),
      emergency_stop: 0,
      camera_x: 0.3 * bend,
      camera_y: 0.01,
      camera_z: length,
      camera_qw: Math.cos(bend / 8),
      camera_qx: 0,
      camera_qy: Math.sin(bend / 8),
      camera_qz: 0.02,
    },
    bad: [],
    length,
    ratio: 1.2 + 0.3 * bend,
    asked: 0.1,
    permitted: 0.1,
  };
};

/** Bytes an hour of a machine that moves and steers without a pause, path events included, from so many minutes of it. */
export const bytesAnHour = async (
  folder: string,
  facts: Parameters<typeof openRecorder>[1],
  minutes: number,
): Promise<number> => {
  const clock = createHandClock();
  const recorder = await openRecorder(folder, facts, clock);
  const normal = noise(7);
  for (let tick = 0; tick < 20 * 60 * minutes; tick++) {
    clock.pass(0.05);
    const sample = movingMachine(normal, clock.now());
    recorder.sample(sample);
    if (tick % 20 === 0)
      await recorder.append({
        seq: tick / 20,
        at: clock.now(),
        time: clock.wall().toISOString(),
        kind: 'extended',
        length: sample.length!,
        tip: tipAt(sample.length!),
      });
  }
  await recorder.close();
  const { size } = await stat(join(recorder.folder, 'mission.mcap'));
  return (size * 60) / minutes;
};
