import { runFaults } from '../faults/campaign.ts';

/** The fault campaign at length; ends with an error when one invariant broke. */
export const faultCampaign = async (runs: number): Promise<void> => {
  let [moved, lost, broken] = [0, 0, 0];
  for (let seed = 1; seed <= runs; seed++) {
    const run = await runFaults(seed).catch((error: unknown) => ({
      violations: [error instanceof Error ? error.message : String(error)],
      motionWrites: 0,
      linkLosses: 0,
    }));
    moved += run.motionWrites;
    lost += run.linkLosses;
    if (run.violations.length > 0) {
      broken++;
      process.stdout.write(`seed ${seed}: ${run.violations.join('; ')}\n`);
    }
    if (seed % 500 === 0) process.stdout.write(`${seed} of ${runs} runs\n`);
  }
  process.stdout.write(
    `${runs} seeded runs of faults: ${moved} motion writes, ${lost} losses of the link, ${broken} runs that broke an invariant\n`,
  );
  process.exitCode = broken > 0 ? 1 : 0;
};
