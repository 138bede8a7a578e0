import type { BodyDescription } from '../body/body.ts';
import { capacity } from '../mechanics/capacity.ts';
import { columnLoad } from '../mechanics/column.ts';
import { type GravityLoad, gravityMoment } from '../mechanics/gravity-moment.ts';
import { amplifiedLength, capstan, inversionTension } from '../mechanics/inversion.ts';
import { area, bendingStiffness, shearStiffness } from '../mechanics/section.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import type { Arms } from './arms.ts';
import type { ForcesAt } from './verdict.ts';

/** What a pull is judged under. SI. */
export interface PullConditions {
  readonly body: BodyDescription;
  /** Body pressure, gauge [Pa]. */
  readonly pressure: number;
  /** Speed at which the tip comes back [m/s]. */
  readonly tipSpeed: number;
  /** λ/2 − shape length, ≥ 0: counts as straight tail at the base and as column length [m]. */
  readonly excess: number;
  readonly gravity: GravityLoad;
}

/** Forces at every body length, structure of arrays over the stations of the shape; forces in N, arms in m. */
export interface Outlook {
  count: number;
  baseTension: Float64Array;
  columnLoad: Float64Array;
  capacity: Float64Array;
  ratio: Float64Array;
  tipTension: number;
}

export const createOutlook = (room: number): Outlook => ({
  count: 0,
  baseTension: new Float64Array(room),
  columnLoad: new Float64Array(room),
  capacity: new Float64Array(room),
  ratio: new Float64Array(room),
  tipTension: Number.NaN,
});

/** Fills `out` for the body lengths of `shape` from station `first` to the tip; O(n) where ground carries the body. */
export const computeOutlook = (
  shape: SampledShape,
  arms: Arms,
  pull: PullConditions,
  out: Outlook,
  first = 0,
): Outlook => {
  makeRoom(out, shape.count);
  const { body } = pull;
  const A = area(body);
  const PA = pull.pressure * A;
  const EI = bendingStiffness(body);
  const S = shearStiffness(body, pull.pressure);
  const drag = body.friction * body.tailWeight;
  const tipTension = inversionTension(A, pull.pressure, body.inversion, pull.tipSpeed);
  const { direction, supported } = pull.gravity;
  let dragged = pull.excess;
  for (let j = 0; j < shape.count; j++) {
    const s = shape.s[j]!;
    if (j > 0) {
      const before = shape.s[j - 1]!;
      dragged += amplifiedLength(body.friction, shape.bend[j - 1]!, shape.bend[j]!, s - before);
    }
    if (j < first) continue;
    const below =
      direction[0] * shape.position[3 * j]! +
      direction[1] * shape.position[3 * j + 1]! +
      direction[2] * shape.position[3 * j + 2]!;
    // Weight lifted counts when the base is above the tip; no credit the other way.
    const lifted = below > 0 ? body.tailWeight * below : below <= 0 ? 0 : Number.NaN;
    const tension = tipTension * capstan(body.friction, shape.bend[j]!) + drag * dragged + lifted;
    const F_c = columnLoad(EI, S, s + pull.excess, body.guideSetback);
    const arm = Math.max(arms.tangent[j]!, arms.chord[j]!, body.eccentricityFloor * body.radius);
    const M_g = supported >= s ? 0 : gravityMoment(shape, j, pull.gravity);
    out.baseTension[j] = tension;
    out.columnLoad[j] = F_c;
    // A body of no length cannot buckle: its wall is all clamp.
    out.capacity[j] =
      s + pull.excess === 0 ? PA : capacity(F_c, PA, body.radius, arm, M_g, body.collapseFraction);
    out.ratio[j] = s + pull.excess === 0 ? Number.POSITIVE_INFINITY : out.capacity[j]! / tension;
  }
  out.count = shape.count;
  out.tipTension = tipTension;
  return out;
};

/** Station of the smallest ratio among body lengths from `target` [m] to the tip; a NaN ratio is the worst there is. */
export const worstStation = (shape: SampledShape, outlook: Outlook, target: number): number => {
  let worst = outlook.count - 1;
  for (let j = outlook.count - 1; j >= 0 && shape.s[j]! >= target; j--) {
    const ratio = outlook.ratio[j]!;
    if (Number.isNaN(ratio)) return j;
    if (ratio < outlook.ratio[worst]!) worst = j;
  }
  return worst;
};

export const forcesAt = (shape: SampledShape, arms: Arms, outlook: Outlook, station: number): ForcesAt => ({
  length: shape.s[station]!,
  tipTension: outlook.tipTension,
  baseTension: outlook.baseTension[station]!,
  columnLoad: outlook.columnLoad[station]!,
  arm: arms.tangent[station]!,
  capacity: outlook.capacity[station]!,
  ratio: outlook.ratio[station]!,
});

const makeRoom = (out: Outlook, count: number): void => {
  if (out.ratio.length >= count) return;
  const room = Math.max(count, 2 * out.ratio.length);
  out.baseTension = new Float64Array(room);
  out.columnLoad = new Float64Array(room);
  out.capacity = new Float64Array(room);
  out.ratio = new Float64Array(room);
};
