import { describe, expect, it } from 'vitest';
import type { MissionState } from '../../../shared-model/mission/mission.ts';
import { ghosts, onBody, openArms, targetsOnBody } from '../../../shared-model/mission/selectors.ts';
import { enter, fold, grow, markAt, retract, waypoint } from './story.ts';

const arms = (state: MissionState, id = 'fork') =>
  Object.fromEntries(
    (state.branchPoints.find((point) => point.id === id)?.arms ?? []).map((arm) => [arm.name, arm.state]),
  );
const current = (state: MissionState) => state.branches.find((branch) => branch.id === state.currentBranch);

// The leat of the demo: a fork 9.5 m in; the left arm to a chamber, the right arm to a sump.
const toFork = [...grow(0, 9.5), markAt(9.5)];
const leftAndBack = [...toFork, ...grow(9.5, 14), ...retract(14, 9.52)];

describe('the tree of paths', () => {
  it('takes the first arm at a branch point and leaves the others open', () => {
    const state = fold(toFork);
    expect(arms(state)).toEqual({ left: 'current', right: 'open' });
    expect(openArms(state).map(({ arm }) => arm)).toEqual(['right']);
  });

  it('names the way beyond a branch point by its arm', () => {
    const state = fold(toFork, grow(9.5, 12));
    expect(current(state)).toMatchObject({
      parent: 'trunk',
      arm: { branchPoint: 'fork', name: 'left' },
      from: 9.5,
      reached: 12,
    });
  });

  it('keeps what was explored when the body comes back', () => {
    const state = fold(leftAndBack);
    const [ghost] = ghosts(state);
    expect(ghost?.line.at(-1)).toEqual({ length: 14, position: [0, 0, 14] });
    expect(ghost?.from).toBeCloseTo(9.52, 9);
    expect(state).toMatchObject({ length: 9.52, longest: 14 });
  });

  it('makes the other arm a sibling and calls the first explored', () => {
    const state = fold(leftAndBack, enter('right'), grow(9.5, 11));
    expect(arms(state)).toEqual({ left: 'explored', right: 'current' });
    expect(current(state)).toMatchObject({
      parent: 'trunk',
      arm: { name: 'right' },
      from: 9.5,
      reached: 11,
    });
    expect(ghosts(state).map((branch) => branch.arm?.name)).toEqual(['left']);
    expect(openArms(state)).toEqual([]);
  });

  it('takes an arm from the branch point although the last path event came 25 cm before it', () => {
    const state = fold(toFork, grow(9.5, 14), retract(14, 9.74), enter('right'));
    expect(arms(state).right).toBe('current');
    expect(state.length).toBe(9.5);
  });

  it('does not take an arm of a branch point that the tip is far from', () => {
    const there = fold(toFork, grow(9.5, 14));
    const state = fold(toFork, grow(9.5, 14), enter('right'));
    expect(state.branches).toEqual(there.branches);
    expect(arms(state)).toEqual(arms(there));
  });

  it('does not take an arm of a branch point that lies in a way the body has left', () => {
    const state = fold(
      ...leftAndBack.slice(0, -1),
      markAt(9.5, 'b'),
      grow(9.5, 11),
      markAt(11, 'inner', ['up', 'down']),
      retract(11, 9.5),
      enter('right', 'b'),
      grow(9.5, 11),
      enter('down', 'inner'),
    );
    expect(current(state)?.arm).toEqual({ branchPoint: 'b', name: 'right' });
  });

  it('leaves an arm open that was chosen and not grown into', () => {
    expect(arms(fold(toFork, enter('right')))).toEqual({ left: 'open', right: 'current' });
  });

  it('calls an arm explored once the body is back before its branch point', () => {
    const state = fold(leftAndBack, retract(9.52, 8));
    expect(arms(state)).toEqual({ left: 'explored', right: 'open' });
    expect(state.currentBranch).toBe('trunk');
  });

  it('grows into the last arm again after coming back only a little before the branch point', () => {
    const state = fold(leftAndBack, retract(9.52, 9.3), grow(9.3, 10));
    expect(current(state)?.arm).toEqual({ branchPoint: 'fork', name: 'left' });
    expect(onBody(state).branchPoints.map((point) => point.id)).toEqual(['fork']);
  });

  it('begins a way of its own where growth sets in far behind the end', () => {
    const state = fold(grow(0, 10), retract(10, 6), grow(6, 7));
    expect(current(state)).toMatchObject({ parent: 'trunk', arm: null, from: 6, reached: 7 });
    const [ghost] = ghosts(state);
    expect([ghost?.from, ghost?.reached]).toEqual([6, 10]);
  });

  it('corrects the same way after a short step back', () => {
    const state = fold(grow(0, 5), retract(5, 4.75), grow(4.75, 6));
    expect(state.branches).toHaveLength(1);
    const lengths = state.branches[0]?.line.map((point) => point.length) ?? [];
    expect(lengths).toEqual([...lengths].sort((a, b) => a - b));
  });

  it('lays a branch point that is seen on the way back on the way already drawn', () => {
    const state = fold(grow(0, 12), retract(12, 6), markAt(6, 'late'));
    expect(state.branchPoints[0]).toMatchObject({ branch: 'trunk', length: 6 });
    expect(state.branches.map((branch) => branch.parent)).toEqual([null, 'trunk']);
    expect(ghosts(state)[0]).toMatchObject({ id: 'trunk', from: 6, reached: 12 });
  });

  it('does not take encoder noise after coming to rest for a way of its own', () => {
    const state = fold(grow(0, 10), retract(10, 5), grow(5, 5.004), retract(5.004, 3));
    expect(state.branches.map((branch) => branch.id)).toEqual(['trunk']);
  });
});

describe('what lies on the present body', () => {
  it('offers branch points and waypoints to backtrack to, nearest to the tip first', () => {
    const state = fold(waypoint('w0', 0), grow(0, 4), waypoint('w1', 4), grow(4, 9.5), markAt(9.5));
    expect(targetsOnBody(state).map(({ id, length }) => [id, length])).toEqual([
      ['fork', 9.5],
      ['w1', 4],
      ['w0', 0],
    ]);
  });

  it('does not offer a waypoint in the arm that was left', () => {
    const state = fold(
      toFork,
      grow(9.5, 12),
      waypoint('chamber', 12),
      retract(12, 9.5),
      enter('right'),
      grow(9.5, 13),
    );
    expect(targetsOnBody(state).map(({ id }) => id)).toEqual(['fork']);
  });

  it('keeps a waypoint logged at the branch point on the body when the other arm is taken', () => {
    const state = fold(leftAndBack, waypoint('here', 9.48), enter('right'), grow(9.5, 11));
    expect(onBody(state).waypoints.map(({ id }) => id)).toEqual(['here']);
  });

  it('does not offer what lies beyond the tip', () => {
    const state = fold(grow(0, 4), waypoint('w1', 4), retract(4, 2));
    expect(onBody(state)).toEqual({ waypoints: [], branchPoints: [] });
    expect(onBody(state, 4).waypoints).toHaveLength(1);
  });
});
