import type { Body, BodyDescription } from '../body/body.ts';
import { capacity } from '../mechanics/capacity.ts';
import { columnLoad, columnLoadOf, setbackRoot } from '../mechanics/column.ts';
import { amplifiedLength, capstan, inversionTension } from '../mechanics/inversion.ts';
import { area, bendingStiffness, shearStiffness } from '../mechanics/section.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import type { Vec3 } from '../shape/vector.ts';
import type { Arms } from './arms.ts';
import type { ForcesAt } from './verdict.ts';

/** What of a body the forces of a pull depend on. */
export type PulledBody = Body &
  Pick<BodyDescription, 'inversion' | 'friction' | 'tailWeight' | 'collapseFraction' | 'eccentricityFloor'>;

/** What a pull is judged under. SI. */
export interface PullConditions {
  readonly body: PulledBody;
  /** Body pressure, gauge [Pa]. */
  readonly pressure: number;
  /** Speed at which the tip comes back [m/s]. */
  readonly tipSpeed: number;
  /** λ/2 − shape length, ≥ 0: counts as straight tail at the base and as column length [m]. */
  readonly excess: number;
  /** A shorter body is taken to be so long where it could buckle as a column [m]; 0 for the bare formula. */
  readonly shortest: number;
}

/** Forces at every body length, structure of arrays over the stations of the shape; forces in N, arms in m. */
export interface Outlook {
  count: number;
  baseTension: Float64Array;
  columnLoad: Float64Array;
  capacity: Float64Array;
  ratio: Float64Array;
  tipTension: number;
  /** e^{μΘ} from base to station, and ∫e^{μB}ds of the tail up to it [m]: what does not change with the pressure. */
  amplification: Float64Array;
  dragged: Float64Array;
  /** What the arrays were last filled for; null before. */
  filled: { readonly arms: Arms; readonly revision: number; readonly pull: PullConditions } | null;
}

export const createOutlook = (room: number): Outlook => ({
  count: 0,
  baseTension: new Float64Array(room),
  columnLoad: new Float64Array(room),
  capacity: new Float64Array(room),
  ratio: new Float64Array(room),
  tipTension: Number.NaN,
  amplification: new Float64Array(room),
  dragged: new Float64Array(room),
  filled: null,
});

/**
 * Fills `out` for the body lengths of `shape` from station `first` to the tip. O(n), but only what the last update of the
 * arms changed when the conditions are the ones `out` was filled for.
 */
export const computeOutlook = (
  shape: SampledShape,
  arms: Arms,
  pull: PullConditions,
  out: Outlook,
  first = 0,
): Outlook => {
  makeRoom(out, shape.count);
  const lieFrom = staleLie(out, arms, pull, shape.count);
  fillLie(out, shape, pull.body.friction, lieFrom);
  fillForces(out, shape, arms, pull, Math.max(first, samePull(out.filled?.pull, pull) ? lieFrom : 0));
  out.count = shape.count;
  out.tipTension = tipTensionOf(pull);
  // A partly filled outlook must not pass for a whole one.
  out.filled = first === 0 ? { arms, revision: arms.revision, pull } : null;
  return out;
};

/** First station of which `out` does not know how it lies now. */
const staleLie = (out: Outlook, arms: Arms, pull: PullConditions, count: number): number => {
  const { filled } = out;
  if (filled === null || filled.arms !== arms || filled.pull.body !== pull.body) return 0;
  if (filled.revision === arms.revision) return count;
  return filled.revision === arms.revision - 1 ? arms.changedFrom : 0;
};

const samePull = (a: PullConditions | undefined, b: PullConditions): boolean =>
  a !== undefined &&
  a.body === b.body &&
  a.pressure === b.pressure &&
  a.tipSpeed === b.tipSpeed &&
  a.excess === b.excess &&
  a.shortest === b.shortest;

const fillLie = (out: Outlook, shape: SampledShape, friction: number, from: number): void => {
  const { s, bend, count } = shape;
  const { amplification, dragged } = out;
  for (let j = from; j < count; j++) {
    amplification[j] = capstan(friction, bend[j]!);
    dragged[j] =
      j === 0 ? 0 : dragged[j - 1]! + amplifiedLength(friction, bend[j - 1]!, bend[j]!, s[j]! - s[j - 1]!);
  }
};

const tipTensionOf = ({ body, pressure, tipSpeed }: PullConditions): number =>
  inversionTension(area(body), pressure, body.inversion, tipSpeed);

const fillForces = (
  out: Outlook,
  shape: SampledShape,
  arms: Arms,
  pull: PullConditions,
  from: number,
): void => {
  const { body } = pull;
  const PA = pull.pressure * area(body);
  const EI = bendingStiffness(body);
  const S = shearStiffness(body, pull.pressure);
  const drag = body.friction * body.tailWeight;
  const tipTension = tipTensionOf(pull);
  const floor = body.eccentricityFloor * body.radius;
  const { setback, gravity } = arms.holding;
  let u = Math.PI;
  for (let j = from; j < shape.count; j++) {
    const lifted = body.tailWeight * depthBelowBase(shape, j, gravity.direction);
    const tension = tipTension * out.amplification[j]! + drag * (pull.excess + out.dragged[j]!) + lifted;
    const L = shape.s[j]! + pull.excess;
    const column = Math.max(L, pull.shortest);
    u = setbackRoot(EI, S, column, setback, u);
    const F_c = columnLoadOf(u, EI, S, column);
    const arm = Math.max(arms.tangent[j]!, arms.chord[j]!, floor);
    out.baseTension[j] = tension;
    out.columnLoad[j] = F_c;
    // A body of no length cannot buckle: its wall is all clamp.
    out.capacity[j] =
      L === 0 ? PA : capacity(F_c, PA, body.radius, arm, arms.moment[j]!, body.collapseFraction);
    out.ratio[j] = L === 0 ? Number.POSITIVE_INFINITY : out.capacity[j]! / tension;
  }
};

/** Load that folds the body cut at station j [N], for one pressure: what `computeOutlook` fills in there. */
export const capacityAt = (shape: SampledShape, arms: Arms, pull: PullConditions, j: number): number => {
  const { body, pressure, excess, shortest } = pull;
  const PA = pressure * area(body);
  const L = shape.s[j]! + excess;
  if (L === 0) return PA;
  const F_c = columnLoad(
    bendingStiffness(body),
    shearStiffness(body, pressure),
    Math.max(L, shortest),
    arms.holding.setback,
  );
  const arm = Math.max(arms.tangent[j]!, arms.chord[j]!, body.eccentricityFloor * body.radius);
  return capacity(F_c, PA, body.radius, arm, arms.moment[j]!, body.collapseFraction);
};

/** How far a station lies below the base [m]; above it counts as zero: what the tail's weight helps is not relied on. */
const depthBelowBase = (shape: SampledShape, j: number, down: Vec3): number => {
  const { position: p } = shape;
  return Math.max(0, down[0] * p[3 * j]! + down[1] * p[3 * j + 1]! + down[2] * p[3 * j + 2]!);
};

/**
 * Station of the smallest ratio among body lengths from the tip to `target` [m], the first at or below it included; a NaN
 * ratio is the worst there is.
 */
export const worstStation = (shape: SampledShape, outlook: Outlook, target: number): number => {
  let worst = outlook.count - 1;
  for (let j = worst; j >= 0; j--) {
    const ratio = outlook.ratio[j]!;
    if (Number.isNaN(ratio)) return j;
    if (ratio < outlook.ratio[worst]!) worst = j;
    if (shape.s[j]! <= target) break;
  }
  return worst;
};

/** Smallest capacity [N] among the same body lengths; NaN if one of them is. */
export const leastCapacity = (shape: SampledShape, outlook: Outlook, target: number): number => {
  let least = Number.POSITIVE_INFINITY;
  for (let j = outlook.count - 1; j >= 0; j--) {
    least = Math.min(least, outlook.capacity[j]!);
    if (shape.s[j]! <= target) break;
  }
  return least;
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
  for (const part of [
    'baseTension',
    'columnLoad',
    'capacity',
    'ratio',
    'amplification',
    'dragged',
  ] as const) {
    const next = new Float64Array(room);
    next.set(out[part]);
    out[part] = next;
  }
};
