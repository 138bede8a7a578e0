import type { UnstampedEvent } from '../../shared-model/mission/event.ts';
import type { Pose } from '../../shared-model/shape/vector.ts';

/** Body length between two marks of the drawn path [m]. */
const EVERY_GROWN = 0.1;
const EVERY_RETRACTED = 0.25;
/** Less than this is the encoder's noise. */
const NOISE = 0.003;

/**
 * The path event that is due: one every so often on the way, and one where a motion ends, so that the record holds the
 * length at which the body came to lie.
 */
export const duePathEvent = (
  marked: number,
  length: number,
  tip: Pose,
  cameToRest: boolean,
): Extract<UnstampedEvent, { kind: 'extended' | 'retracted' }> | null => {
  const moved = length - marked;
  const due = cameToRest ? Math.abs(moved) > NOISE : moved >= EVERY_GROWN || moved <= -EVERY_RETRACTED;
  if (!due) return null;
  return {
    kind: moved > 0 ? 'extended' : 'retracted',
    length,
    tip: { position: [...tip.position], quaternion: [...tip.quaternion] },
  };
};
