import type { ForcesAt } from '../retraction/verdict.ts';
import type { Pose, Vec3 } from '../shape/vector.ts';
import type { MissionEvent } from './event.ts';
import { branchAt } from './lineage.ts';
import { enterArm, extendPath, markBranchPoint, retractPath } from './path-tree.ts';

export type ArmState = 'open' | 'current' | 'explored';

export interface BranchPoint {
  readonly id: string;
  readonly label: string;
  /** Body length at which it lies [m], and the branch it lies on. */
  readonly length: number;
  readonly branch: string;
  readonly tip: Pose;
  readonly arms: readonly { readonly name: string; readonly state: ArmState }[];
}

/** One way the body has taken: from where it leaves its parent to the farthest it reached. */
export interface Branch {
  readonly id: string;
  readonly parent: string | null;
  /** Branch point and arm it began with; null for the trunk and for a way taken without a mark. */
  readonly arm: { readonly branchPoint: string; readonly name: string } | null;
  readonly from: number;
  readonly reached: number;
  /** Tip positions with the body length at each, rising; the first is the joint with the parent, at or before `from`. */
  readonly line: readonly { readonly length: number; readonly position: Vec3 }[];
}

export interface Waypoint {
  readonly id: string;
  readonly number: number;
  readonly note: string;
  readonly length: number;
  readonly branch: string;
  readonly tip: Pose;
  readonly picture: string | null;
  readonly readings: Readonly<Record<string, number>>;
  readonly time: string;
}

export interface PullRefusal {
  readonly at: number;
  readonly time: string;
  readonly motion: string;
  readonly length: number | null;
  readonly forces: ForcesAt | null;
  readonly text: string;
}

export interface Backtrack {
  readonly target: string;
  readonly from: number;
  readonly to: number;
  readonly arrived: boolean;
}

/** The whole mission: the fold of its events, in live driving, recovery, replay and report alike. */
export interface MissionState {
  readonly id: string | null;
  readonly place: string;
  readonly rig: string;
  readonly simulated: boolean;
  readonly started: string | null;
  readonly ended: string | null;
  /** Body length at the last path event and the longest so far [m]. */
  readonly length: number;
  readonly longest: number;
  readonly branches: readonly Branch[];
  readonly currentBranch: string;
  readonly branchPoints: readonly BranchPoint[];
  readonly waypoints: readonly Waypoint[];
  readonly refusals: readonly PullRefusal[];
  readonly tipRetractor: 'attached' | 'absent';
  /** The last backtrack asked for, from one body length to another [m]. */
  readonly backtrack: Backtrack | null;
  readonly alarms: number;
  readonly stops: number;
  readonly linkLosses: number;
  readonly lastSeq: number;
}

export const TRUNK = 'trunk';

export const emptyMission: MissionState = {
  id: null,
  place: '',
  rig: '',
  simulated: false,
  started: null,
  ended: null,
  length: 0,
  longest: 0,
  branches: [{ id: TRUNK, parent: null, arm: null, from: 0, reached: 0, line: [] }],
  currentBranch: TRUNK,
  branchPoints: [],
  waypoints: [],
  refusals: [],
  tipRetractor: 'absent',
  backtrack: null,
  alarms: 0,
  stops: 0,
  linkLosses: 0,
  lastSeq: -1,
};

export const foldMission = (events: Iterable<MissionEvent>): MissionState => {
  let state = emptyMission;
  for (const event of events) state = reduceMission(state, event);
  return state;
};

/** One event onto the state. Never throws on a valid event; an event already folded changes nothing. */
export const reduceMission = (before: MissionState, event: MissionEvent): MissionState => {
  if (event.seq <= before.lastSeq) return before;
  const state: MissionState = { ...before, lastSeq: event.seq };
  switch (event.kind) {
    case 'mission-started':
      return {
        ...state,
        id: event.mission,
        place: event.place,
        rig: event.rig,
        simulated: event.simulated,
        started: event.time,
      };
    case 'mission-ended':
      return { ...state, ended: event.time };
    case 'extended':
      return extendPath(state, event.length, event.tip);
    case 'retracted':
      return retractPath(state, event.length, event.tip);
    case 'branch-point-marked':
      return markBranchPoint(state, event);
    case 'arm-entered':
      return enterArm(state, event.branchPoint, event.arm);
    case 'waypoint-logged':
      return logWaypoint(state, event);
    case 'pull-refused':
      return { ...state, refusals: [...state.refusals, refusalOf(event)] };
    case 'backtrack-started':
      return {
        ...state,
        backtrack: { target: event.target, from: event.from, to: event.to, arrived: false },
      };
    case 'backtrack-arrived':
      return state.backtrack?.target === event.target
        ? { ...state, backtrack: { ...state.backtrack, arrived: true } }
        : state;
    case 'link':
      return event.state === 'lost' ? { ...state, linkLosses: state.linkLosses + 1 } : state;
    case 'tip-retractor':
      return { ...state, tipRetractor: event.state };
    case 'alarm':
      return event.change === 'raised' ? { ...state, alarms: state.alarms + 1 } : state;
    case 'stopped':
      return { ...state, stops: state.stops + 1 };
    default:
      return state;
  }
};

const logWaypoint = (
  state: MissionState,
  event: Extract<MissionEvent, { kind: 'waypoint-logged' }>,
): MissionState => {
  if (state.waypoints.some((one) => one.id === event.id)) return state;
  const waypoint: Waypoint = {
    id: event.id,
    number: state.waypoints.length + 1,
    note: event.note,
    length: event.length,
    branch: branchAt(state, event.length).id,
    tip: event.tip,
    picture: event.picture,
    readings: event.readings,
    time: event.time,
  };
  return { ...state, waypoints: [...state.waypoints, waypoint] };
};

const refusalOf = (event: Extract<MissionEvent, { kind: 'pull-refused' }>): PullRefusal => ({
  at: event.at,
  time: event.time,
  motion: event.motion,
  length: event.length,
  forces: event.forces,
  text: event.reasons.map((reason) => reason.text).join(' '),
});
