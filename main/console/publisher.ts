import type {
  Alarm,
  ConsoleFrame,
  LinkStatus,
  RecordingStatus,
  TipRetractorStatus,
} from '../../shared-model/contract/frame.ts';
import type { Readings } from '../../shared-model/contract/reading.ts';
import type { Wish } from '../../shared-model/contract/request.ts';
import type { Judgement } from '../../shared-model/retraction/interlock.ts';
import type { Trip } from '../../shared-model/retraction/pull-watch.ts';
import type { WayBack } from '../../shared-model/retraction/verdict.ts';
import { bodyLine } from '../../shared-model/shape/body-line.ts';
import type { Estimate } from '../../shared-model/shape/estimate.ts';
import type { Backtracking } from './backtracking.ts';
import { askedSpeed, holdStatus } from './hold-status.ts';
import type { Lease } from './lease.ts';
import type { Ramps } from './setpoint-ramps.ts';

/** What one tick came to. */
export interface TickOutcome {
  readonly now: number;
  readonly link: LinkStatus;
  readonly readings: Readings;
  readonly estimate: Estimate;
  readonly wayBack: WayBack;
  readonly lease: Lease;
  readonly wish: Wish;
  readonly judged: Judgement;
  /** Whether the rig acknowledged what was written. */
  readonly confirmed: boolean;
  readonly ramps: Ramps;
  readonly tipRetractor: TipRetractorStatus;
  readonly backtracking: Backtracking | null;
  readonly foldSuspected: Trip | null;
  readonly alarms: readonly Alarm[];
  readonly recording: RecordingStatus;
}

/** Frames for the screens: the small part every tick, the large ones now and then. */
export interface Publisher {
  /** The next frame carries everything, for a screen that has just joined. */
  sendAll(): void;
  publish(outcome: TickOutcome): void;
}

/** Large parts of a frame are sent at most this often [s]. */
const BODY_EVERY = 0.1;
const OUTLOOK_EVERY = 0.5;

export const createPublisher = (
  send: (frame: ConsoleFrame) => void,
  outlook: () => Pick<ConsoleFrame, 'outlook' | 'standing'>,
): Publisher => {
  let seq = 0;
  let bodyAt = Number.NEGATIVE_INFINITY;
  let outlookAt = Number.NEGATIVE_INFINITY;
  let bodyChanged = true;
  let everything = true;
  return {
    sendAll: () => {
      everything = true;
    },
    publish: (outcome) => {
      const { now, estimate } = outcome;
      bodyChanged ||= estimate.changedFrom < estimate.path.count;
      const withBody = everything || (bodyChanged && now - bodyAt >= BODY_EVERY);
      const withOutlook = everything || now - outlookAt >= OUTLOOK_EVERY;
      if (withBody) [bodyAt, bodyChanged] = [now, false];
      if (withOutlook) outlookAt = now;
      everything = false;
      send({
        ...smallPart(outcome, seq++),
        ...(withBody ? { body: bodyLine(estimate.path) } : {}),
        ...(withOutlook ? outlook() : {}),
      });
    },
  };
};

const smallPart = (outcome: TickOutcome, seq: number): ConsoleFrame => {
  const { lease, wish, judged, confirmed, ramps, estimate, backtracking } = outcome;
  return {
    kind: 'frame',
    seq,
    at: outcome.now,
    link: outcome.link,
    readings: outcome.readings,
    estimate: estimate.frame,
    wayBack: outcome.wayBack,
    hold: holdStatus(lease),
    drive: {
      asked: askedSpeed(wish),
      permitted: judged.tipSpeed,
      confirmed,
      bodyPressureSetpoint: ramps.bodyPressure,
      musclePressureSetpoints: [],
    },
    refusal: judged.refusal,
    tipRetractor: outcome.tipRetractor,
    backtrack:
      backtracking === null
        ? null
        : {
            target: backtracking.target,
            remaining: (estimate.frame?.length ?? backtracking.length) - backtracking.length,
            arrived: backtracking.arrived,
          },
    foldSuspected: outcome.foldSuspected,
    alarms: outcome.alarms,
    recording: outcome.recording,
  };
};
