import type { BodyDescription } from '../body/body.ts';
import type { GravityLoad } from '../mechanics/gravity-moment.ts';
import { area } from '../mechanics/section.ts';
import { sampleSegments, tipPose } from '../shape/segments.ts';
import type { Pose, Segment } from '../shape/vector.ts';
import { type Arms, chordArm, createArms, tangentArm, updateArms } from './arms.ts';
import { type Case, parseCase } from './case.ts';
import { computeOutlook, createOutlook, forcesAt, type PullConditions, worstStation } from './outlook.ts';
import type { ForcesAt } from './verdict.ts';

/** Result of one planning case, SI. A ratio of null is infinite: nothing pulls, or there is no body that could fold. */
export type CaseResult =
  | {
      readonly id: string | number | null;
      readonly length: number;
      readonly tipTension: number;
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
  return parsed.ok ? solve(parsed.value) : { id: parsed.id, verdict: 'refuse', reason: parsed.reason };
};

/** Stations along the way: enough for the arms to be met within 1e-4 R, and never so many that a plan takes minutes. */
const STATIONS_MAX = 3000;
const WAY_SAGITTA = 1e-4;
const HERE_SAGITTA = 1e-7;

const solve = (planned: Case): CaseResult => {
  const { id, segments, margin } = planned;
  const pull = conditionsOf(planned);
  const length = segments.reduce((sum, one) => sum + one.length, 0);
  const here = forcesAtLength(planned, pull, length);
  const worst = worstOnTheWay(planned, pull, length, here);
  const numbers = [here.baseTension, here.columnLoad, here.capacity, here.arm];
  if (!numbers.every(Number.isFinite) || Number.isNaN(worst.ratio) || Number.isNaN(here.ratio))
    return { id, verdict: 'refuse', reason: 'case: the numbers are too large to be worked with' };
  const crush = planned.pressure * area(planned.body);
  const crushed = planned.tipRetractor && !(crush >= margin * here.tipTension);
  const verdict = worst.ratio >= margin && !crushed ? 'invert' : 'buckle';
  return {
    id,
    ...here,
    ratio: finiteOrNull(here.ratio),
    verdict,
    reason: crushed ? crushReason(crush, here.tipTension, margin) : ratioReason(worst, planned),
    worst: { length: worst.length, ratio: finiteOrNull(worst.ratio) },
    tip: tipPose(segments),
  };
};

const conditionsOf = (planned: Case): PullConditions => {
  const length = planned.segments.reduce((sum, one) => sum + one.length, 0);
  const { inversion } = planned;
  const loss = { ...inversion, rateCoefficient: inversion.rateCoefficient ?? Number.POSITIVE_INFINITY };
  const body: BodyDescription = {
    ...planned.body,
    inversion: loss,
    growth: loss,
    friction: planned.friction,
    tailWeight: planned.tailWeight,
    weight: planned.gravity?.weight ?? 0,
    payload: planned.gravity?.payload ?? 0,
    guideSetback: planned.guideSetback,
    collapseFraction: planned.collapseFraction,
    eccentricityFloor: planned.eccentricityFloor,
    measured: [],
    freeEnd: Number.POSITIVE_INFINITY,
    onGround: false,
  };
  return {
    body,
    pressure: planned.pressure,
    tipSpeed: planned.tipSpeed,
    excess: Math.max(0, (planned.payout ?? 0) / 2 - length),
    gravity: gravityOf(planned),
  };
};

const gravityOf = ({ gravity }: Case): GravityLoad =>
  gravity === null
    ? { weight: 0, payload: 0, direction: [0, 1, 0], supported: Number.POSITIVE_INFINITY }
    : {
        weight: gravity.weight,
        payload: gravity.payload,
        direction: gravity.direction,
        supported: gravity.support,
      };

/** Forces of the body cut at `length`, sampled so finely that the arm is exact to 1e-7 R where that is affordable. */
const forcesAtLength = (planned: Case, pull: PullConditions, length: number): ForcesAt => {
  const radius = pull.body.radius;
  const cut = cutAt(planned.segments, length);
  const affordable = sagittaFor(cut, HERE_SAGITTA * radius, 20 * STATIONS_MAX);
  const shape = sampleSegments(cut, Math.max(length / 200, 1e-9), affordable);
  const tip = shape.count - 1;
  const arms: Arms = createArms(shape.count);
  arms.tangent[tip] = tangentArm(shape, tip);
  arms.chord[tip] = chordArm(shape, tip, pull.body.guideSetback);
  const outlook = computeOutlook(shape, arms, pull, createOutlook(shape.count), tip);
  return heldInstead(forcesAt(shape, arms, outlook, tip), planned);
};

const worstOnTheWay = (planned: Case, pull: PullConditions, length: number, here: ForcesAt): ForcesAt => {
  const { radius, guideSetback } = pull.body;
  const sagitta = sagittaFor(planned.segments, WAY_SAGITTA * radius, STATIONS_MAX);
  const shape = sampleSegments(planned.segments, Math.max(length / 400, 1e-9), sagitta);
  const arms = createArms(shape.count);
  updateArms(arms, shape, 0, guideSetback);
  const outlook = computeOutlook(shape, arms, pull, createOutlook(shape.count));
  if (planned.tipRetractor)
    for (let j = 0; j < outlook.count; j++)
      outlook.ratio[j] = ratioOf(outlook.capacity[j]!, planned.heldTension);
  const j = worstStation(shape, outlook, planned.retractTo);
  const low = Math.max(planned.retractTo, shape.s[Math.max(0, j - 1)]!);
  const high = shape.s[Math.min(shape.count - 1, j + 1)]!;
  const atTarget = forcesAtLength(planned, pull, planned.retractTo);
  const between = refine((s) => forcesAtLength(planned, pull, s), low, high);
  return [atTarget, between].reduce((a, b) => (b.ratio < a.ratio ? b : a), here);
};

/** Golden-section search for the smallest ratio between two lengths; both ends are candidates too. */
const refine = (at: (length: number) => ForcesAt, from: number, to: number): ForcesAt => {
  const golden = (Math.sqrt(5) - 1) / 2;
  let [low, high] = [from, to];
  let best = [at(low), at(high)].reduce((a, b) => (b.ratio < a.ratio ? b : a));
  for (let i = 0; i < 24 && high - low > 1e-9; i++) {
    const a = at(high - golden * (high - low));
    const b = at(low + golden * (high - low));
    for (const one of [a, b]) if (one.ratio < best.ratio) best = one;
    if (a.ratio <= b.ratio) high = b.length;
    else low = a.length;
  }
  return best;
};

/** With a tip retractor only what the spool still holds loads the body. */
const heldInstead = (forces: ForcesAt, planned: Case): ForcesAt =>
  planned.tipRetractor
    ? { ...forces, baseTension: planned.heldTension, ratio: ratioOf(forces.capacity, planned.heldTension) }
    : forces;

const ratioOf = (capacity: number, tension: number): number =>
  tension === 0 ? Number.POSITIVE_INFINITY : capacity / tension;

/** The first `length` metres of a chain of arcs. */
export const cutAt = (segments: readonly Segment[], length: number): Segment[] => {
  const cut: Segment[] = [];
  let left = length;
  for (const one of segments) {
    if (!(left > 0)) break;
    cut.push({ ...one, length: Math.min(one.length, left) });
    left -= one.length;
  }
  return cut;
};

/** `wanted`, or the smallest sagitta that keeps the number of stations below `most`. */
const sagittaFor = (segments: readonly Segment[], wanted: number, most: number): number => {
  const weighted = segments.reduce(
    (sum, one) => sum + one.length * Math.sqrt(Math.abs(one.curvature) / 8),
    0,
  );
  return Math.max(wanted, (weighted / most) ** 2);
};

const finiteOrNull = (ratio: number): number | null => (Number.isFinite(ratio) ? ratio : null);

const ratioReason = (worst: ForcesAt, planned: Case): string => {
  if (!Number.isFinite(worst.ratio)) return 'nothing pulls on a body that could fold';
  const compare = worst.ratio >= planned.margin ? 'reaches' : 'is below';
  return `smallest ratio ${worst.ratio.toPrecision(4)} at ${worst.length.toPrecision(4)} m ${compare} the margin ${planned.margin}`;
};

const crushReason = (crush: number, tipTension: number, margin: number): string =>
  `the tip would crush: PA ${crush.toPrecision(4)} N is less than ${margin} times the ${tipTension.toPrecision(4)} N that inverts it`;
