import { expect, it } from 'vitest';
import { runFaults } from './campaign.ts';

// A smaller count of the campaign of design/quality.md; `npm run bench -- faults 10000` runs it whole.
const RUNS = 150;

it(`moves nothing without a live press in ${RUNS} seeded runs of faults on line, machine and hand`, async () => {
  let [moved, lost] = [0, 0];
  for (let seed = 1; seed <= RUNS; seed++) {
    const run = await runFaults(seed);
    expect(run.violations, `seed ${seed}`).toEqual([]);
    moved += run.motionWrites;
    lost += run.linkLosses;
  }
  // The campaign is worth nothing if nothing moved or nothing broke.
  expect(moved).toBeGreaterThan(20 * RUNS);
  expect(lost).toBeGreaterThan(RUNS / 4);
}, 300_000);
