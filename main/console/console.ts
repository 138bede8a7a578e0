import type {
  ConsoleHello,
  ConsoleMessage,
  LinkStatus,
  RigSummary,
  TipRetractorStatus,
} from '../../shared-model/contract/frame.ts';
import { goodValue, type Readings } from '../../shared-model/contract/reading.ts';
import {
  type Answer,
  type ConsoleRequest,
  requestSchema,
  WATCHER_REQUESTS,
  type Wish,
} from '../../shared-model/contract/request.ts';
import { targetsOnBody } from '../../shared-model/mission/selectors.ts';
import { type Judgement, PermittedDrive } from '../../shared-model/retraction/interlock.ts';
import { bentHoopStrength } from '../../shared-model/retraction/standing.ts';
import type { Reason, WayBack } from '../../shared-model/retraction/verdict.ts';
import { createEstimate, type Estimate, stepEstimate } from '../../shared-model/shape/estimate.ts';
import type { Clock } from '../clock.ts';
import type { Recorder } from '../record/recorder.ts';
import type { RigLink } from '../rig/rig-link.ts';
import type { TriedRig } from '../rig/trials.ts';
import { alarmConditions } from './alarm-conditions.ts';
import { acknowledgeAlarm, EMPTY_BOARD, listAlarms, stepAlarms } from './alarms.ts';
import { approachSpeed } from './approach.ts';
import { type Backtracking, stepBacktracking } from './backtracking.ts';
import { createBench } from './bench.ts';
import {
  expireLease,
  LEASE_LIFE,
  NEUTRAL_LEASE,
  releaseLease,
  renewLease,
  revokeLease,
  wishOf,
} from './lease.ts';
import { createMissionLog } from './mission-log.ts';
import { createMissionNotes } from './mission-notes.ts';
import { createPublisher } from './publisher.ts';
import { createPullGuard } from './pull-guard.ts';
import { answerRequest, type RequestContext } from './requests.ts';
import { sampleOf } from './sample.ts';
import { NO_RAMPS, stepRamps } from './setpoint-ramps.ts';
import { createTipRetractor, retractorState, retractorStatus } from './tip-retractor.ts';
import {
  createWayBackJudge,
  followShape,
  growthPressureOf,
  judgeTo,
  presentLine,
  remedyLine,
  type Surroundings,
  standingOf,
} from './way-back.ts';

/** What the console is made of; everything that touches the world comes in here. */
export interface ConsoleParts {
  readonly tried: TriedRig;
  readonly summary: RigSummary;
  readonly link: RigLink;
  readonly recorder: Recorder;
  readonly clock: Clock;
  /** Identifier of the mission and version of the software, as they stand in the record. */
  readonly mission: string;
  readonly software: string;
  readonly missionsDir: string;
  /** Built-in rig in this process only. */
  readonly simulateFault: ((name: string) => void) | null;
  readonly send: (client: string, message: ConsoleMessage) => void;
  /** Told of a fault of the console's own, for the log of the process. */
  readonly complain: (text: string) => void;
}

export interface RunningConsole {
  request(client: string, request: unknown): Promise<Answer>;
  /** Says hello to the client and sends it all messages from now on. The first to join drives. */
  join(client: string): void;
  leave(client: string): void;
  missionFolder(): string;
  close(): Promise<void>;
}

/** One tick at 20 Hz, or as fast as the line allows [s]. */
const TICK = 0.05;

export const createConsole = (parts: ConsoleParts): RunningConsole => {
  const { link, recorder, clock } = parts;
  const { rig } = parts.tried;
  const bench = createBench(parts.tried);
  const mission = createMissionLog(clock, recorder, (event) => broadcast({ kind: 'event', event }));
  const notes = createMissionNotes((event) => void mission.append(event));
  const clients = new Set<string>();
  const judge = createWayBackJudge(rig, missingTrials(parts.tried));
  const guard = createPullGuard(rig);
  const described = new Set(Object.keys(rig.reads));
  const hasRetractorDrive = rig.writes.tip_retractor_speed_setpoint !== undefined;
  let driver: string | null = null;
  let lease = NEUTRAL_LEASE;
  let cancelLapse: () => void = () => {};
  let estimate = createEstimate();
  let ramps = NO_RAMPS;
  let retractor = createTipRetractor(rig.reads.tip_retractor_attached !== undefined);
  let around: Surroundings = {
    estimate,
    readings: {},
    retractorAttached: false,
    foldSuspected: null,
    now: Number.NaN,
  };
  let board = EMPTY_BOARD;
  let readings: Readings = {};
  let confirmed = false;
  let backtracking: Backtracking | null = null;
  let lastTickAt = Number.NaN;
  let running = true;
  let ticking: Promise<void> = Promise.resolve();
  let cancelTick: () => void = () => {};

  const broadcast = (message: ConsoleMessage): void => {
    for (const client of clients) parts.send(client, message);
  };

  const publisher = createPublisher(broadcast, () => ({
    outlook: presentLine(judge, rig, around),
    standing: standingOf(judge, rig, around),
  }));

  /** Zero speeds at once, whatever the tick is doing. */
  const stopNow = (): void => void link.stop(PermittedDrive.holdStill(clock.now(), hasRetractorDrive));

  const disarm = (why: string): void => {
    lease = revokeLease(lease, why);
    cancelLapse();
    stopNow();
  };

  const watchLapse = (): void => {
    cancelLapse();
    cancelLapse = clock.after(LEASE_LIFE + 0.001, () => {
      const before = lease;
      lease = expireLease(lease, clock.now());
      if (before.state === 'held' && lease.state !== 'held') stopNow();
    });
  };

  const tick = async (): Promise<void> => {
    readings = await link.read(clock.now());
    if (!running) return;
    const now = clock.now();
    const dt = Math.min(2 * TICK, Math.max(0, now - lastTickAt)) || TICK;
    lastTickAt = now;
    const linkRead = link.status();
    noteLink(linkRead);
    lease = expireLease(lease, now);
    const gripState = retractorState(retractor, readings, now, rig.limits.readingAge);
    const attached = gripState === 'attached';
    notes.retractor(gripState, retractor.source);
    estimate = stepEstimate(estimate, readings, attached, { ...rig, gravity: rig.place.gravity }, now);
    followShape(judge, estimate);
    noteTrips(attached, now);
    around = {
      estimate,
      readings,
      retractorAttached: attached,
      foldSuspected: guard.watch().foldSuspected,
      now,
    };
    const wayBack = judgeTo(judge, rig, around, 0);
    const stepped = stepBacktracking(
      backtracking,
      wishOf(lease, now),
      lease.state === 'held' ? lease.press : null,
      estimate.frame?.length ?? null,
      () => targetsOnBody(mission.state(), estimate.frame?.length ?? 0),
    );
    backtracking = stepped.backtracking;
    for (const event of stepped.events) void mission.append(event);
    const verdict = backtracking === null ? wayBack : judgeTo(judge, rig, around, backtracking.length);
    const judged = decide(stepped.wish, verdict, gripState, dt);
    const ends = guard.endsPress(judged);
    if (ends !== null) lease = revokeLease(lease, ends);
    const outcome = linkRead.state === 'open' ? await link.write(judged.drive, clock.now()) : null;
    confirmed = outcome?.outcome === 'confirmed';
    const missed = guard.wrote(judged.drive, outcome);
    if (missed !== null) disarm(missed);
    bench.note(readings, estimate.frame, turnOf(estimate), judged.tipSpeed, now);
    notes.motion(estimate.frame, judged.tipSpeed, now);
    notes.refusal(judged, verdict, lease, estimate.frame?.length ?? null);
    noteAlarms(now);
    recorder.sample(
      sampleOf({ readings, estimate: estimate.frame, wayBack, wish: wishOf(lease, now), judged, now }),
    );
    publisher.publish({
      now,
      link: link.status(),
      readings,
      estimate,
      wayBack,
      lease,
      wish: wishOf(lease, now),
      judged,
      confirmed,
      ramps,
      tipRetractor: retractorStatus(retractor, gripState, wayBack, now),
      backtracking,
      foldSuspected: guard.watch().foldSuspected,
      alarms: listAlarms(board),
      recording: recorder.status(),
    });
  };

  const remainingTo = (length: number): number | null => {
    const remaining = (estimate.frame?.length ?? Number.NaN) - length;
    return Number.isFinite(remaining) ? remaining : null;
  };

  /** A drive that does not follow, a suspected fold or a grip that changed ends the press. */
  const noteTrips = (attached: boolean, now: number): void => {
    const { trip, ends } = guard.step(readings, estimate, attached, now);
    if (trip !== null) notes.tripped(trip, estimate.frame?.length ?? null);
    if (ends !== null && (trip !== null || lease.state === 'held')) disarm(ends);
  };

  const decide = (
    wish: Wish,
    wayBack: WayBack,
    gripState: TipRetractorStatus['state'],
    dt: number,
  ): Judgement => {
    const { now, retractorAttached } = around;
    const stepped = stepRamps(
      ramps,
      wish,
      {
        bend: estimate.frame?.bend ?? null,
        bodyPressure: goodValue(readings.body_pressure, now, rig.limits.readingAge) ?? null,
      },
      rig,
      dt,
    );
    const target = wish.motion.kind === 'backtrack' ? (backtracking?.length ?? Number.NaN) : 0;
    const remaining = remainingTo(target);
    const judged = PermittedDrive.judge({
      now,
      wish,
      leaseAlive: lease.state === 'held' && now < lease.until,
      linkOpen: link.status().state === 'open',
      readings,
      limits: rig.limits,
      emergencyStopWired: rig.emergencyStopWired,
      described,
      body: estimate.frame,
      estimateReasons: estimate.reasons,
      shapeAt: estimate.at,
      wayBack,
      judgedAt: now,
      remaining,
      approachSpeed: remaining === null ? Number.NaN : approachSpeed(remaining),
      watch: guard.watch(),
      tipRetractorAttached: retractorAttached,
      tipRetractorState: gripState,
      hasRetractorDrive,
      grip: rig.writes.tip_retractor_grip === undefined ? null : retractor.commanded,
      musclePressures: stepped.musclePressures,
      bodyPressure: stepped.ramps.bodyPressure,
      bodyPressureBefore:
        ramps.bodyPressure ?? goodValue(readings.body_pressure, now, rig.limits.readingAge) ?? null,
      growthPressure: wish.motion.kind === 'grow' ? growthPressureOf(estimate, rig) : null,
      hoopStrength: wish.pressure > 0 ? bentHoopStrength(estimate.path, rig.body) : rig.body.hoopStrength,
      bodyRadius: rig.body.radius,
    });
    // A ramp that was refused must not run on behind the refusal.
    if (judged.refusal === null) ramps = stepped.ramps;
    return judged;
  };

  /** After any change of the link nothing moves until a person presses afresh, and no ramp runs on. */
  const noteLink = (status: LinkStatus): void => {
    if (!notes.link(status)) return;
    lease = revokeLease(lease, 'The link was interrupted.');
    ramps = NO_RAMPS;
    if (status.state === 'open') estimate = { ...estimate, payout: null };
    retractor = { ...retractor, commanded: null };
  };

  const noteAlarms = (now: number): void => {
    const inputs = {
      link: link.status(),
      readings,
      limits: rig.limits,
      recording: recorder.status(),
      watch: guard.watch(),
    };
    const conditions = alarmConditions({ ...inputs, emergencyStopWired: rig.emergencyStopWired });
    const stepped = stepAlarms(board, conditions, now);
    board = stepped.board;
    notes.alarms(stepped.changes);
  };

  const loop = (): void => {
    const began = clock.now();
    ticking = tick()
      .catch((error: unknown) => {
        // A bug in a tick must not leave a motor running on its last setpoint.
        disarm('The console met an internal error.');
        parts.complain(`tick failed: ${error instanceof Error ? error.stack : String(error)}`);
      })
      .then(() => {
        if (running) cancelTick = clock.after(Math.max(0.001, TICK - (clock.now() - began)), loop);
      });
  };

  const hello = (client: string): ConsoleHello => ({
    kind: 'hello',
    role: client === driver ? 'driver' : 'watcher',
    rig: parts.summary,
    events: mission.events(),
  });

  const setDriver = (client: string | null, change: 'took-over' | 'left'): void => {
    disarm(change === 'left' ? 'The driving window is gone.' : 'Another window drives now.');
    lease = NEUTRAL_LEASE;
    driver = client;
    void mission.append({ kind: 'driver', client: client ?? 'nobody', change });
    for (const one of clients) parts.send(one, hello(one));
  };

  const context: RequestContext = {
    rig,
    recorder,
    mission,
    missionsDir: parts.missionsDir,
    bench,
    simulateFault: parts.simulateFault,
    estimate: () => estimate.frame,
    readings: () => readings,
    isMoving: () => lease.state === 'held',
    retractor: () => retractor,
    setRetractor: (next) => {
      retractor = next;
    },
    previewRemedy: (kind) => remedyLine(judge, rig, around, kind),
    clearFold: () => guard.clearFold(),
    acknowledge: (id) => {
      const stepped = acknowledgeAlarm(board, id);
      board = stepped.board;
      notes.alarms(stepped.changes);
      return stepped.changes.length > 0;
    },
    reconnect: () => {
      disarm('The link is opened again.');
      estimate = createEstimate();
      guard.restart();
      judge.arms.count = 0;
      link.reconnect();
    },
    now: () => clock.now(),
    wall: () => clock.wall(),
  };

  const drive = (client: string, request: Extract<ConsoleRequest, { kind: 'hold' | 'release' }>): Answer => {
    const now = clock.now();
    if (request.kind === 'release') {
      const before = lease;
      lease = releaseLease(lease, client, request.press);
      if (before.state === 'held' && lease.state !== 'held') stopNow();
      return { ok: true };
    }
    const before = lease;
    lease = renewLease(lease, { client, press: request.press, seq: request.seq, wish: request.wish }, now);
    if (lease.state === 'held' && before.state !== 'held') guard.rearm();
    if (lease.state !== 'held') {
      if (lease.state === 'burnt') stopNow();
      return {
        ok: false,
        code: 'not-held',
        text: lease.state === 'burnt' ? lease.text : 'This press is over. Press afresh.',
      };
    }
    watchLapse();
    return { ok: true };
  };

  void mission.append({
    kind: 'mission-started',
    mission: parts.mission,
    place: rig.place.name,
    rig: rig.name,
    simulated: rig.simulated,
    software: parts.software,
  });
  loop();

  return {
    request: async (client, raw) => {
      const parsed = requestSchema.safeParse(raw);
      if (!parsed.success)
        return {
          ok: false,
          code: 'bad-request',
          text: `Not a request: ${parsed.error.issues.map((issue) => `${issue.path.join('.') || 'request'}: ${issue.message}`).join('; ')}`,
        };
      const request = parsed.data;
      if (client !== driver && !WATCHER_REQUESTS.includes(request.kind))
        return {
          ok: false,
          code: 'watching',
          text: 'This window watches. Take over to drive; Stop works from here too.',
        };
      if (request.kind === 'stop') {
        disarm('Stop was pressed.');
        void mission.append({ kind: 'stopped', by: client === driver ? 'driver' : 'watcher' });
        return { ok: true };
      }
      if (request.kind === 'take-over') {
        if (!clients.has(client))
          return { ok: false, code: 'not-joined', text: 'This window has not joined the console.' };
        if (client !== driver) setDriver(client, 'took-over');
        return { ok: true };
      }
      if (request.kind === 'hold' || request.kind === 'release') return drive(client, request);
      return answerRequest(request, context);
    },
    join: (client) => {
      clients.add(client);
      if (driver === null) driver = client;
      publisher.sendAll();
      parts.send(client, hello(client));
    },
    leave: (client) => {
      if (!clients.delete(client) || client !== driver) return;
      setDriver(null, 'left');
    },
    missionFolder: () => recorder.folder,
    close: async () => {
      if (!running) return;
      running = false;
      cancelTick();
      disarm('The console is closing.');
      await ticking;
      await link.stop(PermittedDrive.holdStill(clock.now(), hasRetractorDrive));
      await mission.append({ kind: 'mission-ended', reason: 'The console was closed.' });
      await recorder.close();
      await link.close();
    },
  };
};

/** Trials that cannot be read may have been more careful than the rig file: until they can, nothing is pulled. */
const missingTrials = ({ trouble, companion }: TriedRig): Reason | null =>
  trouble === null
    ? null
    : {
        code: 'trials-unread',
        text: `What was measured on this machine cannot be read. ${trouble}`,
        remedy: `Mend ${companion}, or move it away to rely on the rig file; then start the console again.`,
      };

/** Total bend of the body as estimated [rad]. */
const turnOf = ({ path }: Estimate): number => path.bend[path.count - 1] ?? 0;
