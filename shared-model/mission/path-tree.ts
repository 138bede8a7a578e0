import type { Pose } from '../shape/vector.ts';
import type { MissionEvent } from './event.ts';
import { AT_BRANCH_POINT, branchAt, currentBranch, liesOnBody } from './lineage.ts';
import type { ArmState, Branch, BranchPoint, MissionState } from './mission.ts';

/** Coming back by less than this and growing again corrects the same way; more begins a new one [m]. */
const REGROWN = 0.5;

/** The path's last event may lag this far behind the tip [m], since one is sent only every so often. */
const EVENT_LAG = 0.3;

/** The tip came further, or came again over ground that it had left. Lengths below zero are the encoder's noise. */
export const extendPath = (before: MissionState, length: number, tip: Pose): MissionState => {
  const reach = Math.max(0, length);
  if (reach < before.length) return retractPath(before, reach, tip);
  const state = wayOnward(before, reach);
  const moved = { ...state, length: reach, longest: Math.max(state.longest, reach) };
  const branch = currentBranch(state);
  // Below its beginning the tip is still on the parent's line, which is drawn already.
  if (reach <= branch.from && branch.line.length > 0) return moved;
  const line = [
    ...branch.line.filter((point) => point.length < reach),
    { length: reach, position: tip.position },
  ];
  return withBranch(moved, { ...branch, line, reached: Math.max(branch.reached, reach) });
};

/** The tip came back. Where it passes the beginning of its branch, the parent becomes the current one. */
export const retractPath = (before: MissionState, length: number, tip: Pose): MissionState => {
  const reach = Math.max(0, length);
  if (reach > currentBranch(before).reached) return extendPath(before, reach, tip);
  let state: MissionState = { ...before, length: reach, longest: Math.max(before.longest, reach) };
  let branch = currentBranch(state);
  while (branch.parent !== null && reach < branch.from - AT_BRANCH_POINT) {
    state = leaveBranch(state, branch, branch.parent);
    branch = currentBranch(state);
  }
  return state;
};

/** Marks a branch point where the tip is; growth beyond it is in the first arm until another is entered. */
export const markBranchPoint = (
  before: MissionState,
  event: Extract<MissionEvent, { kind: 'branch-point-marked' }>,
): MissionState => {
  if (before.branchPoints.some((point) => point.id === event.id)) return before;
  const length = Math.max(0, event.length);
  // A few centimetres ahead of the last path event is where the tip already was, not growth to a new place.
  const move = length > before.length + AT_BRANCH_POINT ? extendPath : retractPath;
  const state = move(before, length, event.tip);
  const point: BranchPoint = {
    id: event.id,
    label: event.label,
    length,
    branch: branchAt(state, length).id,
    tip: event.tip,
    arms: event.arms.map((name) => ({ name, state: 'open' })),
  };
  const marked = { ...state, branchPoints: [...state.branchPoints, point] };
  const first = event.arms[0];
  return first === undefined ? marked : startArm(marked, point, first);
};

/**
 * From now on growth beyond the branch point belongs to this arm; the arm that was current has been explored. Changes
 * nothing when the branch point is not where the tip is.
 */
export const enterArm = (state: MissionState, branchPointId: string, arm: string): MissionState => {
  const point = state.branchPoints.find((one) => one.id === branchPointId);
  if (point === undefined || !liesOnBody(state, point, state.length + EVENT_LAG)) return state;
  if (!(Math.abs(state.length - point.length) <= EVENT_LAG)) return state;
  const asked = point.arms.find((one) => one.name === arm);
  if (asked === undefined || asked.state === 'current') return state;
  const there = retractPath(state, point.length, point.tip);
  return startArm(there, there.branchPoints.find((one) => one.id === point.id) ?? point, arm);
};

/**
 * The way that growth to `reach` takes: on along the branch, into an arm where it passes a branch point, or, from well
 * behind what was reached before, a new way of its own; what lies ahead then stays as explored.
 */
const wayOnward = (state: MissionState, reach: number): MissionState => {
  const branch = currentBranch(state);
  const ahead = state.branchPoints
    .filter((point) => point.branch === branch.id && point.length >= state.length - AT_BRANCH_POINT)
    .sort((a, b) => a.length - b.length)[0];
  const from = Math.max(branch.from, state.length);
  if (from < (ahead?.length ?? branch.reached) - REGROWN) return startWay(state, branch, from);
  if (ahead === undefined || !(reach > ahead.length + AT_BRANCH_POINT)) return state;
  const lastArm = state.branches.findLast((one) => one.arm?.branchPoint === ahead.id)?.arm?.name;
  return lastArm === undefined ? state : startArm(state, ahead, lastArm);
};

const startArm = (state: MissionState, point: BranchPoint, arm: string): MissionState => {
  const branch: Branch = {
    id: `${point.id}:${arm}:${state.lastSeq}`,
    parent: point.branch,
    arm: { branchPoint: point.id, name: arm },
    from: point.length,
    reached: point.length,
    line: [{ length: point.length, position: point.tip.position }],
  };
  const arms = point.arms.map((one) => ({
    ...one,
    state: one.name === arm ? ('current' as const) : leftArm(state, point.id, one),
  }));
  return {
    ...state,
    branchPoints: state.branchPoints.map((one) => (one.id === point.id ? { ...one, arms } : one)),
    branches: [...state.branches, branch],
    currentBranch: branch.id,
  };
};

const startWay = (state: MissionState, parent: Branch, from: number): MissionState => {
  const joint = parent.line.findLast((point) => point.length <= from);
  const branch: Branch = {
    id: `way:${state.lastSeq}`,
    parent: parent.id,
    arm: null,
    from,
    reached: from,
    line: joint === undefined ? [] : [joint],
  };
  return { ...state, branches: [...state.branches, branch], currentBranch: branch.id };
};

/** The body has left `branch` for its parent: the arm is explored or still open, and a way of mere noise is dropped. */
const leaveBranch = (state: MissionState, branch: Branch, parent: string): MissionState => {
  const branchPoints = state.branchPoints.map((point) =>
    point.id === branch.arm?.branchPoint
      ? { ...point, arms: point.arms.map((arm) => ({ ...arm, state: leftArm(state, point.id, arm) })) }
      : point,
  );
  const left = { ...state, branchPoints, currentBranch: parent };
  const named =
    branch.arm !== null ||
    state.branches.some((one) => one.parent === branch.id) ||
    state.branchPoints.some((point) => point.branch === branch.id) ||
    state.waypoints.some((waypoint) => waypoint.branch === branch.id);
  if (named || branch.reached - branch.from > AT_BRANCH_POINT) return left;
  return { ...left, branches: state.branches.filter((one) => one.id !== branch.id) };
};

/** What becomes of an arm when the body is not in it any more. */
const leftArm = (
  state: MissionState,
  point: string,
  arm: { readonly name: string; readonly state: ArmState },
): ArmState => {
  if (arm.state !== 'current') return arm.state;
  const grown = state.branches.some(
    (branch) =>
      branch.arm?.branchPoint === point &&
      branch.arm.name === arm.name &&
      branch.reached - branch.from > AT_BRANCH_POINT,
  );
  return grown ? 'explored' : 'open';
};

const withBranch = (state: MissionState, branch: Branch): MissionState => ({
  ...state,
  branches: state.branches.map((one) => (one.id === branch.id ? branch : one)),
});
