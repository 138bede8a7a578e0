import type { Branch, MissionState } from './mission.ts';

/** A tip within this distance of a branch point is at it [m]. */
export const AT_BRANCH_POINT = 0.05;

export const currentBranch = (state: MissionState): Branch =>
  state.branches.find((branch) => branch.id === state.currentBranch) ?? (state.branches[0] as Branch);

/** The branches that the body lies in, from the tip's back to the trunk. */
export const lineage = (state: MissionState): Branch[] => {
  const chain: Branch[] = [];
  let branch: Branch | undefined = currentBranch(state);
  while (branch !== undefined) {
    chain.push(branch);
    const parent: string | null = branch.parent;
    branch = parent === null ? undefined : state.branches.find((one) => one.id === parent);
  }
  return chain;
};

/** The branch of the present body at this body length [m]; a place where two meet belongs to the one nearer the base. */
export const branchAt = (state: MissionState, length: number): Branch => {
  const chain = lineage(state);
  return chain.find((branch) => length > branch.from) ?? (chain.at(-1) as Branch);
};

/** Whether what was noted at `place` lies on the body as it lies now, `bodyLength` long [m]. */
export const liesOnBody = (
  state: MissionState,
  place: { readonly branch: string; readonly length: number },
  bodyLength: number,
): boolean => {
  if (!(place.length <= bodyLength + AT_BRANCH_POINT)) return false;
  const chain = lineage(state);
  const i = chain.findIndex((branch) => branch.id === place.branch);
  if (i < 0) return false;
  const child = chain[i - 1];
  return child === undefined || place.length <= child.from + AT_BRANCH_POINT;
};
