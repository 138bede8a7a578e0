import type { Limits, Muscles } from '../../shared-model/body/body.ts';
import type { Wish } from '../../shared-model/contract/request.ts';
import { type Bend, pressuresForBend, STRAIGHT } from '../../shared-model/steering/muscle-bend.ts';

/** Setpoints that held controls move at a limited rate. Null until a control was held: then the rig keeps its own. */
export interface Ramps {
  readonly bend: Bend | null;
  readonly bodyPressure: number | null;
}
export const NO_RAMPS: Ramps = { bend: null, bodyPressure: null };

/** What the wish comes to in one tick of `dt` [s], from the present bend and pressure where no ramp runs yet. */
export const stepRamps = (
  ramps: Ramps,
  wish: Wish,
  present: { readonly bend: Bend | null; readonly bodyPressure: number | null },
  rig: { readonly limits: Limits; readonly muscles: Muscles },
  dt: number,
): { readonly ramps: Ramps; readonly musclePressures: readonly number[] | null } => {
  const pressureFrom = ramps.bodyPressure ?? present.bodyPressure;
  const { bodyPressureMin: low, bodyPressureMax: high, bodyPressureRate } = rig.limits;
  const bodyPressure =
    wish.pressure === 0 || pressureFrom === null
      ? ramps.bodyPressure
      : Math.min(high, Math.max(low, pressureFrom + wish.pressure * bodyPressureRate * dt));
  const bendFrom = ramps.bend ?? present.bend;
  if (wish.steer === null || bendFrom === null || rig.muscles.muscles.length === 0)
    return { ramps: { ...ramps, bodyPressure }, musclePressures: null };
  const wanted =
    wish.steer.kind === 'straighten'
      ? towardsStraight(bendFrom, rig.limits.bendRate * dt)
      : turned(bendFrom, wish.steer, rig.limits.bendRate * dt);
  const { pressures, reached } = pressuresForBend(rig.muscles, wanted, rig.limits.musclePressureMax);
  return { ramps: { bend: reached, bodyPressure }, musclePressures: pressures };
};

const turned = (bend: Bend, steer: { right: number; down: number }, step: number): Bend => ({
  right: bend.right + steer.right * step,
  down: bend.down + steer.down * step,
});

const towardsStraight = (bend: Bend, step: number): Bend => {
  const size = Math.hypot(bend.right, bend.down);
  if (size <= step) return STRAIGHT;
  return { right: bend.right * (1 - step / size), down: bend.down * (1 - step / size) };
};
