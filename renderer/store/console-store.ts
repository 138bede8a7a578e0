import { useStore } from 'zustand';
import { createStore } from 'zustand/vanilla';
import type { ConsoleApi } from '../../shared-model/contract/api.ts';
import type {
  BodyLine,
  ConsoleFrame,
  ConsoleMessage,
  OutlookLine,
  RigSummary,
} from '../../shared-model/contract/frame.ts';
import {
  emptyMission,
  foldMission,
  type MissionState,
  reduceMission,
} from '../../shared-model/mission/mission.ts';
import type { Standing } from '../../shared-model/retraction/standing.ts';

/** Everything the screen knows, all of it told by the console. */
export interface ConsoleState {
  readonly connected: boolean;
  readonly role: 'driver' | 'watcher';
  readonly rig: RigSummary | null;
  readonly mission: MissionState;
  readonly frame: ConsoleFrame | null;
  /** Kept from the last frame that carried them. */
  readonly body: BodyLine | null;
  readonly outlook: OutlookLine | null;
  readonly standing: Standing | null;
  /** This page's clock at the last frame [s]; with `frame.at` it gives ages. */
  readonly framedAt: number;
}

export const initialState: ConsoleState = {
  connected: false,
  role: 'watcher',
  rig: null,
  mission: emptyMission,
  frame: null,
  body: null,
  outlook: null,
  standing: null,
  framedAt: 0,
};

/** One message onto the state; the mission is folded by the console's own reducer. */
export const receive = (state: ConsoleState, message: ConsoleMessage, pageTime: number): ConsoleState => {
  if (message.kind === 'hello')
    return { ...state, role: message.role, rig: message.rig, mission: foldMission(message.events) };
  if (message.kind === 'event') return { ...state, mission: reduceMission(state.mission, message.event) };
  return {
    ...state,
    frame: message,
    body: message.body ?? state.body,
    outlook: message.outlook ?? state.outlook,
    standing: message.standing === undefined ? state.standing : message.standing,
    framedAt: pageTime,
  };
};

export const consoleStore = createStore<ConsoleState>(() => initialState);

export const connectStore = (api: ConsoleApi): void => {
  api.subscribe((message) =>
    consoleStore.setState((state) => receive(state, message, performance.now() / 1000)),
  );
  api.onConnection((connected) => consoleStore.setState({ connected }));
};

/** One selector a component; a component draws again only when what it selects changes. */
export const useConsole = <Selected>(select: (state: ConsoleState) => Selected): Selected =>
  useStore(consoleStore, select);
