import {
  type AppliedTrials,
  applyTrials,
  type TrialStanding,
} from '../../shared-model/trials/apply-trials.ts';
import { companionPath, readCompanion } from './companion.ts';
import type { RigDescription } from './signal.ts';

/** A rig with what its trials gave, and how they stand. */
export interface TriedRig {
  readonly rig: RigDescription;
  readonly companion: string;
  readonly payout: AppliedTrials['payout'];
  readonly standings: readonly TrialStanding[];
  /** Why the companion is left out; null where it is not. */
  readonly trouble: string | null;
}

/**
 * Reads the companion of a rig file and applies it. One that cannot be read is left out, and then nothing counts as
 * measured: the larger margin holds until it can be.
 * @param folder where the companion lies, if not beside the rig file
 */
export const withTrials = (rig: RigDescription, folder: string | null, now: string): TriedRig => {
  const companion = companionPath(rig.file, folder ?? undefined);
  const read = readCompanion(companion);
  const careful = { ...rig, body: { ...rig.body, measured: [] } };
  const { body, muscles, payout, standings } = applyTrials(
    read.ok ? rig : careful,
    read.ok ? read.records : [],
    now,
  );
  const { tail_payout } = rig.reads;
  const corrected =
    tail_payout === undefined
      ? {}
      : {
          tail_payout: {
            ...tail_payout,
            scale: tail_payout.scale * payout.scale,
            offset: tail_payout.offset * payout.scale + payout.offset,
            // The range is the encoder's own: corrected alike, so that it still ends at the same counts.
            min: tail_payout.min * payout.scale + payout.offset,
            max: tail_payout.max * payout.scale + payout.offset,
          },
        };
  return {
    rig: { ...rig, body, muscles, reads: { ...rig.reads, ...corrected } },
    companion,
    payout,
    standings,
    trouble: read.ok ? null : read.errors.map((error) => `${error.replace(/\.$/, '')}.`).join(' '),
  };
};
