import type { HoldStatus } from '../../shared-model/contract/frame.ts';
import type { Wish } from '../../shared-model/contract/request.ts';
import type { Lease } from './lease.ts';

/** The lease as a screen needs to know it. */
export const holdStatus = (lease: Lease): HoldStatus => {
  if (lease.state === 'held') return { state: 'held', press: lease.press, wish: lease.wish };
  if (lease.state === 'burnt') return { state: 'burnt', press: lease.press, text: lease.text };
  return { state: 'neutral' };
};

/** Tip speed that a wish asks for, + grows [m/s]. */
export const askedSpeed = ({ motion, tipSpeed }: Wish): number =>
  motion.kind === 'still' ? 0 : motion.kind === 'grow' ? tipSpeed : -tipSpeed;
