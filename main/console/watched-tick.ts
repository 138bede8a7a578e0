import { goodValue, type Readings } from '../../shared-model/contract/reading.ts';
import { area } from '../../shared-model/mechanics/section.ts';
import type { PermittedDrive } from '../../shared-model/retraction/interlock.ts';
import type { WatchedTick } from '../../shared-model/retraction/pull-watch.ts';
import type { Estimate } from '../../shared-model/shape/estimate.ts';
import type { RigDescription } from '../rig/signal.ts';

/** Bodies shorter than this, or than they are wide, do not fold [m]. */
const SHORT = 0.15;

/** What the watch over a pull needs of one tick. `driven` is what the rig was last told; null where it was told nothing. */
export const watchedTick = (
  rig: RigDescription,
  readings: Readings,
  estimate: Estimate,
  gripped: boolean,
  driven: PermittedDrive | null,
  now: number,
): WatchedTick => {
  const value = (name: 'tail_payout' | 'tip_retractor_travel' | 'tail_tension' | 'body_pressure') =>
    goodValue(readings[name], now, rig.limits.readingAge);
  const pressure = Math.max(0, (value('body_pressure') ?? 0) - rig.limits.pressureAccuracy);
  return {
    now,
    spoolSpeed: driven?.setpoints.spoolSpeed ?? 0,
    retractorSpeed: driven?.setpoints.retractorSpeed ?? 0,
    payout: value('tail_payout'),
    travel: value('tip_retractor_travel'),
    tension: value('tail_tension'),
    gripped,
    losslessTension: (area(rig.body) / 2) * pressure,
    length: estimate.frame?.length ?? 0,
    shortLength: Math.max(SHORT, 2 * rig.body.radius),
    slackMax: rig.limits.tailSlackMax,
  };
};
