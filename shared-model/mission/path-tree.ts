import type { Pose } from '../shape/vector.ts';
import type { MissionEvent } from './event.ts';
import type { ArmState, Branch, BranchPoint, MissionState } from './mission.ts';

/** A tip within this distance of a branch point is at it [m]. */
export const AT_BRANCH_POINT = 0.05;

/** Coming back by less than this and growing again corrects the same way; more begins a new one [m]. */
const REGROWN = 0.5;

/** The tip came further, or came again over ground where no branch has been before. */
export const extendPath = (before: MissionState, length: number, tip: Pose): MissionState => {
  // Growing on from behind the end of a branch leaves what lies ahead as an explored way of its own.
  const state = length < currentBranch(before).reached - REGROWN ? startBranch(before, length) : before;
  const branch = currentBranch(state);
  const line = [...branch.line.filter((point) => point.length < length), { length, position: tip.position }];
  return {
    ...withBranch(state, { ...branch, line, reached: Math.max(branch.reached, length) }),
    length,
    longest: Math.max(state.longest, length),
  };
};

/** The tip came back. Where it passes the beginning of its branch, the parent becomes the current one. */
export const retractPath = (state: MissionState, length: number): MissionState => {
  let branch = currentBranch(state);
  while (branch.parent !== null && length < branch.from - AT_BRANCH_POINT)
    branch = state.branches.find((one) => one.id === branch.parent) ?? branch;
  return { ...state, length, currentBranch: branch.id };
};

export const markBranchPoint = (
  state: MissionState,
  event: Extract<MissionEvent, { kind: 'branch-point-marked' }>,
): MissionState => {
  const marked: BranchPoint = {
    id: event.id,
    label: event.label,
    length: event.length,
    branch: state.currentBranch,
    tip: event.tip,
    arms: event.arms.map((name) => ({ name, state: 'open' })),
  };
  const extended = extendPath(state, event.length, event.tip);
  const first = event.arms[0];
  const withPoint = {
    ...extended,
    branchPoints: [...extended.branchPoints, { ...marked, branch: extended.currentBranch }],
  };
  return first === undefined ? withPoint : enterArm(withPoint, event.id, first);
};

/** From now on growth beyond the branch point belongs to this arm; the arm that was current has been explored. */
export const enterArm = (state: MissionState, branchPointId: string, arm: string): MissionState => {
  const point = state.branchPoints.find((one) => one.id === branchPointId);
  if (point === undefined || !point.arms.some((one) => one.name === arm)) return state;
  if (point.arms.some((one) => one.name === arm && one.state === 'current')) return state;
  const beyond = (name: string) =>
    state.branches.some(
      (branch) =>
        branch.arm?.branchPoint === point.id && branch.arm.name === name && branch.reached > branch.from,
    );
  const arms = point.arms.map((one) => {
    const left: ArmState = one.state === 'current' ? (beyond(one.name) ? 'explored' : 'open') : one.state;
    return { ...one, state: one.name === arm ? ('current' as const) : left };
  });
  const branch: Branch = {
    id: `${point.id}:${arm}:${state.branches.length}`,
    parent: point.branch,
    arm: { branchPoint: point.id, name: arm },
    from: point.length,
    reached: point.length,
    line: [{ length: point.length, position: point.tip.position }],
  };
  return {
    ...state,
    branchPoints: state.branchPoints.map((one) => (one.id === point.id ? { ...one, arms } : one)),
    branches: [...state.branches, branch],
    currentBranch: branch.id,
  };
};

export const currentBranch = (state: MissionState): Branch =>
  state.branches.find((branch) => branch.id === state.currentBranch) ?? (state.branches[0] as Branch);

const startBranch = (state: MissionState, length: number): MissionState => {
  const old = currentBranch(state);
  const joint = old.line.filter((point) => point.length <= length).at(-1);
  const branch: Branch = {
    id: `${old.id}+${state.branches.length}`,
    parent: old.id,
    arm: null,
    from: length,
    reached: length,
    line: joint === undefined ? [] : [joint],
  };
  return { ...state, branches: [...state.branches, branch], currentBranch: branch.id };
};

const withBranch = (state: MissionState, branch: Branch): MissionState => ({
  ...state,
  branches: state.branches.map((one) => (one.id === branch.id ? branch : one)),
});
