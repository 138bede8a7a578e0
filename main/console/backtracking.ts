import { STILL, type Wish } from '../../shared-model/contract/request.ts';
import type { UnstampedEvent } from '../../shared-model/mission/event.ts';
import type { BacktrackTarget } from '../../shared-model/mission/selectors.ts';
import { ARRIVED } from './approach.ts';

/** One held press that goes back to a mark. */
export interface Backtracking {
  readonly press: number;
  readonly target: string;
  /** Body length at the target [m]. */
  readonly length: number;
  readonly arrived: boolean;
}

export interface BacktrackStep {
  readonly backtracking: Backtracking | null;
  /** The wish with a backtrack that has arrived held still. */
  readonly wish: Wish;
  readonly events: readonly UnstampedEvent[];
}

/**
 * Follows the held wish towards its target. A target that is not on the body gives no backtracking, and the interlock
 * then refuses for want of a distance. `press` is null while nothing is held.
 */
export const stepBacktracking = (
  before: Backtracking | null,
  wish: Wish,
  press: number | null,
  bodyLength: number | null,
  targets: () => readonly BacktrackTarget[],
): BacktrackStep => {
  if (wish.motion.kind !== 'backtrack' || press === null || bodyLength === null)
    return { backtracking: null, wish, events: [] };
  const { target } = wish.motion;
  const events: UnstampedEvent[] = [];
  let backtracking = before?.press === press && before.target === target ? before : null;
  if (backtracking === null) {
    const found = targets().find((one) => one.id === target);
    if (found === undefined) return { backtracking: null, wish, events };
    backtracking = { press, target, length: found.length, arrived: false };
    events.push({ kind: 'backtrack-started', target, from: bodyLength, to: found.length });
  }
  if (!backtracking.arrived && bodyLength - backtracking.length <= ARRIVED) {
    backtracking = { ...backtracking, arrived: true };
    events.push({ kind: 'backtrack-arrived', target, length: bodyLength });
  }
  return { backtracking, wish: backtracking.arrived ? { ...wish, motion: STILL.motion } : wish, events };
};
