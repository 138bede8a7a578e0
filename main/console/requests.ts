import { randomUUID } from 'node:crypto';
import type { EstimateFrame, OutlookLine } from '../../shared-model/contract/frame.ts';
import type { Readings } from '../../shared-model/contract/reading.ts';
import type { Answer, ConsoleRequest } from '../../shared-model/contract/request.ts';
import { branchPointHere, branchPointsOnBody } from '../../shared-model/mission/selectors.ts';
import type { Remedy } from '../../shared-model/retraction/verdict.ts';
import type { Pose } from '../../shared-model/shape/vector.ts';
import { listMissions } from '../record/mission-folder.ts';
import type { Recorder } from '../record/recorder.ts';
import type { RigDescription } from '../rig/signal.ts';
import type { Bench } from './bench.ts';
import type { MissionLog } from './mission-log.ts';
import type { TipRetractor } from './tip-retractor.ts';

/** What requests other than driving may see and do. */
export interface RequestContext {
  readonly rig: RigDescription;
  readonly recorder: Recorder;
  readonly mission: MissionLog;
  readonly missionsDir: string;
  readonly bench: Bench;
  readonly simulateFault: ((name: string) => void) | null;
  estimate(): EstimateFrame | null;
  readings(): Readings;
  isMoving(): boolean;
  retractor(): TipRetractor;
  setRetractor(next: TipRetractor): void;
  previewRemedy(kind: Remedy['kind']): OutlookLine | null;
  /** Whether a fold was suspected. */
  clearFold(): boolean;
  acknowledge(alarm: string): boolean;
  reconnect(): void;
  now(): number;
  wall(): Date;
}

type Request<Kind extends ConsoleRequest['kind']> = Extract<ConsoleRequest, { kind: Kind }>;
export type DeskRequest = Exclude<ConsoleRequest, { kind: 'hold' | 'release' | 'stop' | 'take-over' }>;

/** Answers everything that a person asks for beside driving. */
export const answerRequest = async (request: DeskRequest, context: RequestContext): Promise<Answer> => {
  switch (request.kind) {
    case 'mark-branch-point':
      return markBranchPoint(request, context);
    case 'choose-arm':
      return chooseArm(request, context);
    case 'log-waypoint':
      return logWaypoint(request, context);
    case 'set-tip-retractor':
      return setTipRetractor(request, context);
    case 'preview-remedy': {
      const line = context.previewRemedy(request.remedy);
      return line === null ? no('no-preview', 'That is not on offer now.') : { ok: true, value: line };
    }
    case 'clear-fold':
      return clearFold(request, context);
    case 'acknowledge-alarm':
      return context.acknowledge(request.alarm)
        ? { ok: true }
        : no('no-alarm', 'There is nothing to acknowledge there.');
    case 'reconnect':
      context.reconnect();
      return { ok: true };
    case 'simulate-fault':
      if (context.simulateFault === null)
        return no('not-simulated', 'Only the built-in rig in this process can simulate faults.');
      context.simulateFault(request.fault);
      return { ok: true };
    case 'bench-take':
      return context.isMoving()
        ? no('moving', 'Let go first; then take the reading.')
        : context.bench.take(request.trial, context.now());
    case 'bench-save':
      return saveTrial(request, context);
    case 'bench-list':
      return context.bench.list();
    case 'list-missions':
      return listed(context.missionsDir);
  }
};

const markBranchPoint = async (
  request: Request<'mark-branch-point'>,
  context: RequestContext,
): Promise<Answer> => {
  const here = context.estimate();
  if (here === null) return notLocated();
  const before = branchPointHere(context.mission.state(), here.length);
  if (before !== null) return no('already-marked', `${before.label} is already marked here.`);
  if (new Set(request.arms).size !== request.arms.length)
    return no('same-arms', 'Two arms have the same name. Give each its own.');
  const id = `b-${randomUUID().slice(0, 8)}`;
  const number = context.mission.state().branchPoints.length + 1;
  return acknowledged(
    context.mission.append({
      kind: 'branch-point-marked',
      id,
      label: request.label.trim() === '' ? `Branch point ${number}` : request.label.trim(),
      length: here.length,
      tip: poseOf(here.tip),
      arms: request.arms,
    }),
    { id },
  );
};

const chooseArm = async (request: Request<'choose-arm'>, context: RequestContext): Promise<Answer> => {
  const here = context.estimate();
  if (here === null) return notLocated();
  const point = branchPointsOnBody(context.mission.state(), here.length).find(
    (one) => one.id === request.branchPoint,
  );
  if (point === undefined) return no('not-on-body', 'That branch point does not lie on the body.');
  if (!point.arms.some((arm) => arm.name === request.arm))
    return no('no-arm', `${point.label} has no arm "${request.arm}".`);
  if (branchPointHere(context.mission.state(), here.length)?.id !== point.id)
    return no(
      'not-there',
      `The tip is ${Math.abs(here.length - point.length).toFixed(2)} m from ${point.label}. Backtrack to it first.`,
    );
  return acknowledged(
    context.mission.append({ kind: 'arm-entered', branchPoint: point.id, arm: request.arm }),
    {},
  );
};

const logWaypoint = async (request: Request<'log-waypoint'>, context: RequestContext): Promise<Answer> => {
  const here = context.estimate();
  if (here === null) return notLocated();
  const number = context.mission.state().waypoints.length + 1;
  const jpeg = request.picture === null ? null : Buffer.from(request.picture, 'base64');
  if (jpeg !== null && !(jpeg.length > 4 && jpeg[0] === 0xff && jpeg[1] === 0xd8))
    return no('not-jpeg', 'The picture is not a JPEG; nothing was logged.');
  const name = `${String(number).padStart(3, '0')}-${randomUUID().slice(0, 4)}.jpg`;
  let warning: string | null = null;
  // The waypoint matters more than its picture: without one it is logged all the same.
  const saved =
    jpeg !== null &&
    (await context.recorder.still(name, jpeg).then(
      () => true,
      (error: Error) => {
        warning = error.message;
        return false;
      },
    ));
  const readings = Object.fromEntries(
    Object.entries(context.readings()).flatMap(([signal, reading]) =>
      reading.quality === 'good' ? [[signal, reading.value]] : [],
    ),
  );
  const id = `w-${randomUUID().slice(0, 8)}`;
  return acknowledged(
    context.mission.append({
      kind: 'waypoint-logged',
      id,
      note: request.note.trim(),
      length: here.length,
      tip: poseOf(here.tip),
      picture: saved ? name : null,
      readings,
    }),
    { id, number, warning },
  );
};

const setTipRetractor = (request: Request<'set-tip-retractor'>, context: RequestContext): Answer => {
  if (context.isMoving()) return no('moving', 'Hold still before the tip retractor is engaged or released.');
  const retractor = context.retractor();
  const asked = (): void =>
    void context.mission.append({ kind: 'tip-retractor-asked', attached: request.attached });
  if (context.rig.writes.tip_retractor_grip !== undefined) {
    context.setRetractor({ ...retractor, commanded: request.attached, since: context.now() });
    asked();
    return { ok: true };
  }
  if (retractor.source === 'sensed')
    return no(
      'by-hand',
      'This rig senses the tip retractor but cannot engage it. Do it at the rig; the reading follows.',
    );
  if (!request.confirmed)
    return no(
      'confirm',
      request.attached
        ? 'Confirm that the tip retractor is fitted and grips the tail.'
        : 'Confirm that the tip retractor is released.',
    );
  context.setRetractor({ ...retractor, declared: request.attached, since: context.now() });
  asked();
  return { ok: true };
};

const saveTrial = async (request: Request<'bench-save'>, context: RequestContext): Promise<Answer> => {
  const { trial, initials, expires } = request;
  const { answer, record } = await context.bench.save(trial, initials, expires, context.wall());
  if (record !== null)
    void context.mission.append({
      kind: 'trial-saved',
      trial: record.trial.kind,
      initials,
      values: record.values,
    });
  return answer;
};

const clearFold = async (request: Request<'clear-fold'>, context: RequestContext): Promise<Answer> => {
  if (!request.confirmed)
    return no('confirm', 'Confirm that the picture shows the body lying as before, and where the tip is.');
  if (!context.clearFold()) return no('no-fold', 'No fold is suspected.');
  return acknowledged(context.mission.append({ kind: 'fold-cleared' }), {});
};

const listed = async (missionsDir: string): Promise<Answer> => {
  try {
    return { ok: true, value: await listMissions(missionsDir) };
  } catch (error) {
    return no(
      'unreadable',
      `${missionsDir} cannot be read (${error instanceof Error ? error.message : String(error)}).`,
    );
  }
};

const acknowledged = async (
  written: Promise<{ readonly recorded: boolean }>,
  value: object,
): Promise<Answer> => {
  const { recorded } = await written;
  return recorded
    ? { ok: true, value }
    : no(
        'not-recorded',
        'Noted, but not on disk yet: see Recording. It is kept and written as soon as the disk takes it.',
      );
};

const notLocated = (): Answer => no('not-located', 'The body length is not known now; see the alarms.');
const no = (code: string, text: string): Answer => ({ ok: false, code, text });
const poseOf = (tip: Pose) => ({
  position: [...tip.position] as [number, number, number],
  quaternion: [...tip.quaternion] as [number, number, number, number],
});
