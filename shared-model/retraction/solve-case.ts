import { WEIGHTLESS } from '../mechanics/gravity-moment.ts';
import { area } from '../mechanics/section.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import { cutShape, sampleSegments, tipPose } from '../shape/segments.ts';
import type { Pose } from '../shape/vector.ts';
import { createArms, type Holding, updateArms, updateStation } from './arms.ts';
import { type Case, parseCase } from './case.ts';
import { computeOutlook, createOutlook, forcesAt, type PullConditions } from './outlook.ts';
import { leavesTheory } from './validity.ts';
import type { ForcesAt } from './verdict.ts';

/** Result of one planning case, SI. A ratio of null is infinite: nothing pulls, or there is no body that could fold. */
export type CaseResult =
  | {
      readonly id: string | number | null;
      readonly length: number;
      readonly tipTension: number;
      /** With a tip retractor: what the spool still holds. */
      readonly baseTension: number;
      readonly columnLoad: number;
      readonly arm: number;
      readonly capacity: number;
      readonly ratio: number | null;
      readonly verdict: 'invert' | 'buckle';
      readonly reason: string;
      readonly worst: { readonly length: number; readonly ratio: number | null };
      readonly tip: Pose;
    }
  | { readonly id: string | number | null; readonly verdict: 'refuse'; readonly reason: string };

/** Parses and solves one case; bad input is refused with its reason, never thrown. */
export const solveCase = (json: unknown): CaseResult => {
  const parsed = parseCase(json);
  return parsed.ok
    ? solve(parsed.value, parsed.length)
    : { id: parsed.id, verdict: 'refuse', reason: parsed.reason };
};

const solve = (planned: Case, length: number): CaseResult => {
  const { id, segments, margin } = planned;
  const way = wayOf(planned, length);
  const here = way.forces.at(-1) as ForcesAt;
  const worst = worstOnTheWay(way, here);
  if (!isSound(here) || !isSound(worst))
    return {
      id,
      verdict: 'refuse',
      reason: 'case: the numbers are too large or too small to be worked with',
    };
  const crush = planned.pressure * area(planned.body);
  const crushed = planned.tipRetractor && !(crush >= margin * here.tipTension);
  return {
    id,
    ...here,
    ratio: finiteOrNull(here.ratio),
    verdict: worst.ratio >= margin && !crushed ? 'invert' : 'buckle',
    reason: crushed ? crushReason(crush, here.tipTension, margin) : ratioReason(worst, planned),
    worst: { length: worst.length, ratio: finiteOrNull(worst.ratio) },
    tip: tipPose(segments),
  };
};

/** All that the forces at any length on the way back follow from. */
interface Way {
  readonly planned: Case;
  readonly shape: SampledShape;
  readonly holding: Holding;
  readonly pull: PullConditions;
  readonly forces: readonly ForcesAt[];
}

/** Stations at most this share of the length apart, and no arc further from its chord than this share of the radius. */
const SPACING = 1 / 400;
const SAGITTA = 1e-3;
/** A body coiled up more than so many stations can follow is sampled coarser. */
const STATIONS_MAX = 20_000;

const wayOf = (planned: Case, length: number): Way => {
  const holding = holdingOf(planned);
  const pull = pullOf(planned, length);
  const sagitta = Math.max(SAGITTA * planned.body.radius, affordableSagitta(planned));
  const shape = sampleSegments(planned.segments, Math.max(length * SPACING, 1e-9), sagitta);
  const arms = createArms(shape.count, holding);
  updateArms(arms, shape, 0);
  const outlook = computeOutlook(shape, arms, pull, createOutlook(shape.count));
  const forces = Array.from({ length: shape.count }, (_, j) =>
    asHeld(forcesAt(shape, arms, outlook, j), planned),
  );
  return { planned, shape, holding, pull, forces };
};

const holdingOf = ({ guideSetback, gravity }: Case): Holding => ({
  setback: guideSetback,
  gravity: gravity === undefined ? WEIGHTLESS : { ...gravity, supported: gravity.support },
});

const pullOf = (planned: Case, length: number): PullConditions => {
  const { rateCoefficient = Number.POSITIVE_INFINITY } = planned.inversion;
  return {
    body: { ...planned, ...planned.body, inversion: { ...planned.inversion, rateCoefficient } },
    pressure: planned.pressure,
    tipSpeed: planned.tipSpeed,
    excess: Math.max(0, (planned.payout ?? 0) / 2 - length),
    shortest: 0,
  };
};

/** The smallest sagitta that keeps the stations below their most. */
const affordableSagitta = ({ segments }: Case): number =>
  (segments.reduce((sum, one) => sum + one.length * Math.sqrt(Math.abs(one.curvature) / 8), 0) /
    STATIONS_MAX) **
  2;

/** The worst body length from here to `retractTo`: the worst station, and whatever is worse to either side of it. */
const worstOnTheWay = (way: Way, here: ForcesAt): ForcesAt => {
  const { shape, forces, planned } = way;
  const target = planned.retractTo;
  let worst = worse(here, forcesAtLength(way, target));
  let station = shape.count - 1;
  for (let j = station; j >= 0 && shape.s[j]! > target; j--) {
    if (worse(worst, forces[j]!) === worst) continue;
    worst = forces[j]!;
    station = j;
  }
  const low = Math.max(target, shape.s[Math.max(0, station - 1)]!);
  const high = shape.s[Math.min(shape.count - 1, station + 1)]!;
  return worse(
    worst,
    leastBetween((length) => forcesAtLength(way, length), low, high),
  );
};

/** Golden-section search for the smallest ratio between two lengths. */
const leastBetween = (at: (length: number) => ForcesAt, from: number, to: number): ForcesAt => {
  const golden = (Math.sqrt(5) - 1) / 2;
  let [low, high] = [from, to];
  let a = at(high - golden * (high - low));
  let b = at(low + golden * (high - low));
  for (let i = 0; i < 20; i++) {
    if (a.ratio <= b.ratio) {
      high = b.length;
      b = a;
      a = at(high - golden * (high - low));
    } else {
      low = a.length;
      a = b;
      b = at(low + golden * (high - low));
    }
  }
  return worse(a, b);
};

/** Forces of the body cut at any length. */
const forcesAtLength = (way: Way, length: number): ForcesAt => {
  const { planned, holding, pull } = way;
  const shape = cutShape(way.shape, planned.segments, length);
  const tip = shape.count - 1;
  const arms = createArms(shape.count, holding);
  updateStation(arms, shape, tip);
  const outlook = computeOutlook(shape, arms, pull, createOutlook(shape.count), tip);
  return asHeld(forcesAt(shape, arms, outlook, tip), planned);
};

/** With a tip retractor only what the spool still holds loads the body. */
const asHeld = (forces: ForcesAt, { tipRetractor, heldTension }: Case): ForcesAt =>
  tipRetractor
    ? {
        ...forces,
        baseTension: heldTension,
        ratio: heldTension === 0 ? Number.POSITIVE_INFINITY : forces.capacity / heldTension,
      }
    : forces;

/** The one with the smaller ratio; one that is not a number is worse than any. */
const worse = (a: ForcesAt, b: ForcesAt): ForcesAt => (Number.isNaN(a.ratio) || a.ratio <= b.ratio ? a : b);

const isSound = (forces: ForcesAt): boolean =>
  !Number.isNaN(forces.ratio) &&
  [forces.tipTension, forces.baseTension, forces.columnLoad, forces.capacity, forces.arm].every(
    Number.isFinite,
  );

const finiteOrNull = (ratio: number): number | null => (Number.isFinite(ratio) ? ratio : null);

const ratioReason = (worst: ForcesAt, planned: Case): string => {
  const where = `at ${worst.length.toPrecision(4)} m`;
  if (worst.ratio === Number.POSITIVE_INFINITY) return 'nothing pulls on a body that could fold';
  if (worst.capacity === 0) return `gravity alone folds the body ${where}`;
  const compare = worst.ratio >= planned.margin ? 'reaches' : 'is below';
  return `smallest ratio ${worst.ratio.toPrecision(4)} ${where} ${compare} the margin ${planned.margin}${beyond(planned)}`;
};

/** What a person should know who relies on the bare formula. */
const beyond = ({ body, segments }: Case): string => {
  const left = leavesTheory(
    body,
    segments.reduce((sum, one) => sum + one.length, 0),
  );
  return left.length === 0 ? '' : `; beyond the theory (${left.join(', ')})`;
};

const crushReason = (crush: number, tipTension: number, margin: number): string =>
  `the tip would crush: PA ${crush.toPrecision(4)} N is less than ${margin} times the ${tipTension.toPrecision(4)} N that inverts it`;
