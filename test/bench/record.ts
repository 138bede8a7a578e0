import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { bytesAnHour } from '../main/record/moving-machine.ts';
import type { Figure } from './figure.ts';

/** Most that an hour at full rate may take [bytes]. */
const BAR = 12e6;

/** Size of the record of an hour at 20 Hz. */
export const recordFigures = async (): Promise<Figure[]> => {
  const dir = await mkdtemp(join(tmpdir(), 'foldback-bench-'));
  const facts = { mission: 'bench', place: 'Bench', rig: 'bench', simulated: true, software: 'bench' };
  const from = performance.now();
  const hour = await bytesAnHour(dir, facts, 10);
  const milliseconds = performance.now() - from;
  await rm(dir, { recursive: true, force: true });
  return [
    {
      name: `the record of an hour, ${(hour / 1e6).toFixed(1)} MB`,
      milliseconds,
      ratio: hour / BAR,
      of: 'of 12 MB',
    },
  ];
};
