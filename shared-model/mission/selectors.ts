import { AT_BRANCH_POINT, liesOnBody, lineage } from './lineage.ts';
import type { Branch, BranchPoint, MissionState, Waypoint } from './mission.ts';

/** A place on the present body that the tip can come back to. */
export interface BacktrackTarget {
  readonly id: string;
  readonly kind: 'branch-point' | 'waypoint';
  readonly label: string;
  readonly length: number;
}

/** What was logged on the way that the body lies in now, as far as a body of `bodyLength` [m] reaches. */
export const onBody = (
  state: MissionState,
  bodyLength = state.length,
): { readonly waypoints: Waypoint[]; readonly branchPoints: BranchPoint[] } => ({
  waypoints: waypointsOnBody(state, bodyLength),
  branchPoints: branchPointsOnBody(state, bodyLength),
});

export const waypointsOnBody = (state: MissionState, bodyLength = state.length): Waypoint[] =>
  state.waypoints.filter((waypoint) => liesOnBody(state, waypoint, bodyLength));

export const branchPointsOnBody = (state: MissionState, bodyLength = state.length): BranchPoint[] =>
  state.branchPoints.filter((point) => liesOnBody(state, point, bodyLength));

/** Everything on the body that one can backtrack to, nearest to the tip first. */
export const targetsOnBody = (state: MissionState, bodyLength = state.length): BacktrackTarget[] =>
  [
    ...branchPointsOnBody(state, bodyLength).map((point) => ({
      id: point.id,
      kind: 'branch-point' as const,
      label: point.label,
      length: point.length,
    })),
    ...waypointsOnBody(state, bodyLength).map((waypoint) => ({
      id: waypoint.id,
      kind: 'waypoint' as const,
      label: `Waypoint ${waypoint.number}${waypoint.note === '' ? '' : `: ${waypoint.note}`}`,
      length: waypoint.length,
    })),
  ].sort((a, b) => b.length - a.length);

/** Explored ways, or the far parts of them, that the body does not lie in now. */
export const ghosts = (state: MissionState): Branch[] => {
  const chain = lineage(state);
  return state.branches.flatMap((branch) => {
    const i = chain.indexOf(branch);
    const left = i < 0 ? branch.from : i === 0 ? state.length : (chain[i - 1] as Branch).from;
    if (!(branch.reached - left > AT_BRANCH_POINT)) return [];
    return [i < 0 ? branch : beyond(branch, left)];
  });
};

/** The part of a branch beyond a body length, from the last drawn point at or before it. */
const beyond = (branch: Branch, length: number): Branch => {
  const joint = branch.line.findLastIndex((point) => point.length <= length);
  return { ...branch, from: Math.max(branch.from, length), line: branch.line.slice(Math.max(0, joint)) };
};

/** Arms that nobody has been in yet. */
export const openArms = (state: MissionState): { readonly point: BranchPoint; readonly arm: string }[] =>
  state.branchPoints.flatMap((point) =>
    point.arms.filter((arm) => arm.state === 'open').map((arm) => ({ point, arm: arm.name })),
  );

/**
 * So near to a branch point the next arm may be chosen [m]: the tip creeps on by half the loose tail when a retractor
 * lets go, and a fork is wider than that.
 */
const CHOOSING = 0.1;

/** The branch point that the tip is at, if any. */
export const branchPointHere = (state: MissionState, bodyLength: number): BranchPoint | null =>
  branchPointsOnBody(state, bodyLength).find((point) => Math.abs(point.length - bodyLength) <= CHOOSING) ??
  null;
