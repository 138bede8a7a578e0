import type { Branch, BranchPoint, MissionState, Waypoint } from './mission.ts';
import { AT_BRANCH_POINT, currentBranch } from './path-tree.ts';

/** A place on the present body that the tip can come back to. */
export interface BacktrackTarget {
  readonly id: string;
  readonly kind: 'branch-point' | 'waypoint';
  readonly label: string;
  readonly length: number;
}

/** The current branch and those it came from, trunk last. */
const lineage = (state: MissionState): Branch[] => {
  const chain: Branch[] = [];
  let branch: Branch | undefined = currentBranch(state);
  while (branch !== undefined && !chain.includes(branch)) {
    chain.push(branch);
    const parent: string | null = branch.parent;
    branch = parent === null ? undefined : state.branches.find((one) => one.id === parent);
  }
  return chain;
};

/** Whether something logged at `length` on `branch` lies on the body as it lies now, `bodyLength` long. */
const onBody = (
  state: MissionState,
  place: { branch: string; length: number },
  bodyLength: number,
): boolean => {
  if (!(place.length <= bodyLength + AT_BRANCH_POINT)) return false;
  const chain = lineage(state);
  const i = chain.findIndex((branch) => branch.id === place.branch);
  if (i < 0) return false;
  const child = chain[i - 1];
  return child === undefined || place.length <= child.from + AT_BRANCH_POINT;
};

export const waypointsOnBody = (state: MissionState, bodyLength = state.length): Waypoint[] =>
  state.waypoints.filter((waypoint) => onBody(state, waypoint, bodyLength));

export const branchPointsOnBody = (state: MissionState, bodyLength = state.length): BranchPoint[] =>
  state.branchPoints.filter((point) => onBody(state, point, bodyLength));

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

/** Explored ways that the body does not lie in now. */
export const ghosts = (state: MissionState): Branch[] => {
  const chain = new Set(lineage(state).map((branch) => branch.id));
  return state.branches.filter((branch) => !chain.has(branch.id) && branch.reached > branch.from);
};

/** Arms that nobody has been in yet. */
export const openArms = (state: MissionState): { readonly point: BranchPoint; readonly arm: string }[] =>
  state.branchPoints.flatMap((point) =>
    point.arms.filter((arm) => arm.state === 'open').map((arm) => ({ point, arm: arm.name })),
  );

/** The branch point that the tip is at, if any. */
export const branchPointHere = (state: MissionState, bodyLength: number): BranchPoint | null =>
  branchPointsOnBody(state, bodyLength).find(
    (point) => Math.abs(point.length - bodyLength) <= AT_BRANCH_POINT,
  ) ?? null;
