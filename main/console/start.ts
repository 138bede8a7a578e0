import { randomUUID } from 'node:crypto';
import { type BodyDescription, MEASURED_VALUES, type TipLoss } from '../../shared-model/body/body.ts';
import type { CameraSource, ConsoleMessage, RigSummary } from '../../shared-model/contract/frame.ts';
import { defaultMargin } from '../../shared-model/retraction/judge.ts';
import { type Clock, systemClock } from '../clock.ts';
import { openRecorder } from '../record/mission-recorder.ts';
import { createRigLink } from '../rig/link.ts';
import { BUILT_IN_RIG_FILE, loadRigFile } from '../rig/rig-file.ts';
import type { OpenLine } from '../rig/serial-line.ts';
import { serialPortOpener } from '../rig/serial-port-line.ts';
import type { RigDescription } from '../rig/signal.ts';
import { type TriedRig, withTrials } from '../rig/trials.ts';
import { createBuiltInRig, type Fault } from '../simulator/built-in-rig.ts';
import { leatPassages } from '../simulator/leat.ts';
import { SOFTWARE } from '../software.ts';
import { createConsole, type RunningConsole } from './console.ts';

export interface ConsoleOptions {
  /** Null for the built-in rig. */
  readonly rigFile: string | null;
  /** Port instead of the rig file's; with the built-in rig, the port on which it is served elsewhere. */
  readonly serialPath: string | null;
  readonly missionsDir: string;
  /** Seed of the built-in rig's true parameters. */
  readonly seed: number;
}

/** A console cannot be started; the message says every reason. */
export class StartError extends Error {}

/** Puts the console together for a rig and starts it. Rejects with a `StartError` when the rig file is wrong. */
export const startConsole = async (
  options: ConsoleOptions,
  send: (client: string, message: ConsoleMessage) => void,
  clock: Clock = systemClock,
): Promise<RunningConsole> => {
  const loaded = loadRigFile(options.rigFile ?? BUILT_IN_RIG_FILE);
  if (!loaded.ok) throw new StartError(loaded.errors.join('\n'));
  const file = withPath(loaded.rig, options.serialPath);
  // A package may not be written into, so the built-in rig's companion lies with the missions.
  const folder = options.rigFile === null ? options.missionsDir : null;
  const tried = withTrials(file, folder, clock.wall().toISOString());
  const { rig } = tried;
  // The simulated machine is what its file says, whatever trials make of it.
  const { openLine, simulateFault } = lineFor(file, options.seed, clock);
  const link = createRigLink(rig, openLine, clock);
  const facts = {
    mission: randomUUID(),
    place: rig.place.name,
    rig: rig.name,
    simulated: rig.simulated,
    software: SOFTWARE,
  };
  const recorder = await openRecorder(options.missionsDir, facts, clock);
  return createConsole({
    tried,
    summary: summaryOf(tried),
    link,
    recorder,
    clock,
    mission: facts.mission,
    software: SOFTWARE,
    missionsDir: options.missionsDir,
    simulateFault,
    send,
    complain: (text) => void process.stderr.write(`${text}\n`),
  });
};

const withPath = (rig: RigDescription, path: string | null): RigDescription =>
  path === null ? rig : { ...rig, serial: { ...rig.serial, path, usb: null } };

const lineFor = (
  rig: RigDescription,
  seed: number,
  clock: Clock,
): { readonly openLine: OpenLine; readonly simulateFault: ((name: string) => void) | null } => {
  if (!rig.simulated || rig.serial.path !== null || rig.serial.usb !== null)
    return { openLine: serialPortOpener(rig.serial), simulateFault: null };
  const simulated = createBuiltInRig(rig, { seed, clock });
  return { openLine: simulated.openLine, simulateFault: (name) => simulated.fault(name as Fault) };
};

const summaryOf = ({ rig, companion, payout, standings, trouble }: TriedRig): RigSummary => ({
  name: rig.name,
  simulated: rig.simulated,
  file: rig.file,
  place: rig.place.name,
  gravity: rig.place.gravity,
  bodyRadius: rig.body.radius,
  muscleAngles: rig.muscles.muscles.map((muscle) => muscle.angle),
  limits: rig.limits,
  margin: defaultMargin(rig.body),
  catalogue: MEASURED_VALUES.filter((value) => !rig.body.measured.includes(value)),
  machine: { body: finiteBody(rig.body), muscles: rig.muscles, limits: rig.limits },
  payout,
  trials: standings,
  companion,
  companionTrouble: trouble,
  camera: cameraOf(rig),
  tipRetractor:
    rig.reads.tip_retractor_attached !== undefined
      ? 'sensed'
      : rig.writes.tip_retractor_speed_setpoint !== undefined
        ? 'declared'
        : 'none',
  signals: [...Object.entries(rig.reads), ...Object.entries(rig.writes)].map(([name, signal]) => ({
    name,
    unit: signal.unit,
    slave: signal.slave,
    table: signal.table,
    address: signal.address,
    type: signal.type,
  })),
});

/** JSON has no infinity: the largest number stands for it. */
const finiteBody = (body: BodyDescription): BodyDescription => {
  const finite = (loss: TipLoss): TipLoss => ({
    ...loss,
    rateCoefficient: Math.min(loss.rateCoefficient, Number.MAX_VALUE),
  });
  return {
    ...body,
    growth: finite(body.growth),
    inversion: finite(body.inversion),
    freeEnd: Math.min(body.freeEnd, Number.MAX_VALUE),
  };
};

const cameraOf = (rig: RigDescription): CameraSource =>
  rig.camera.kind === 'drawn' ? { kind: 'drawn', passages: leatPassages(rig.body.radius) } : rig.camera;
