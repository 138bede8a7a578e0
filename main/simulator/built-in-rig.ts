import type { WriteSignal } from '../../shared-model/contract/reading.ts';
import type { Clock } from '../clock.ts';
import { LineError, type OpenLine, type SerialLine } from '../rig/serial-line.ts';
import type { RigDescription } from '../rig/signal.ts';
import { leatPassages } from './leat.ts';
import { createModbusServer } from './modbus-server.ts';
import { plantParameters } from './parameters.ts';
import { advancePlant, cameraPose, createPlant, createWorld, type Plant } from './plant.ts';
import { createRandom } from './random.ts';
import { createRegisters } from './registers.ts';
import { senseAll } from './sensors.ts';

export const FAULTS = [
  'none',
  'unplug',
  'dead-unit',
  'bit-errors',
  'delayed',
  'truncated',
  'stuck-pressure',
  'leak',
  'motor-stall',
  'retractor-loss',
  'retractor-stall',
  'weak-wall',
  'emergency-stop',
  'heartbeat-ignored',
] as const;
export type Fault = (typeof FAULTS)[number];

export interface BuiltInRig {
  /** In-process line, paced like the rig's serial line. */
  readonly openLine: OpenLine;
  /** Answers to bytes that came over a real line, with how long each waits before it is sent [s]. */
  receive(bytes: Uint8Array): { readonly bytes: Uint8Array; readonly delay: number }[];
  /** Adds a fault, or with 'none' ends all of them. */
  fault(name: Fault): void;
  /** What is really the case, for tests. */
  truth(): {
    readonly length: number;
    readonly payout: number;
    readonly folded: number;
    readonly tip: readonly number[];
    readonly gripped: boolean;
    readonly spoolSpeed: number;
  };
}

/** Time a slave takes to begin its answer [s]. */
const TURNAROUND = 0.002;
/** A machine whose master was away longer than this stood still by its watchdog; no more needs to be played [s]. */
const CATCH_UP = 5;

/** The simulated machine behind the register map of its rig file. Time advances with the clock, at each request. */
export const createBuiltInRig = (
  rig: RigDescription,
  options: { readonly seed: number; readonly clock: Clock },
): BuiltInRig => {
  const { clock } = options;
  const random = createRandom(options.seed);
  const parameters = plantParameters(rig, random);
  const world = createWorld(leatPassages(parameters.radius));
  const plant = createPlant(parameters);
  const faults = new Set<Fault>();
  let frozenPressure: number | null = null;
  let playedUntil = clock.now();
  let beat = { count: -1, at: clock.now() };
  let line: { lose(error: LineError): void } | null = null;
  const slave = rig.slaves[0]!;

  const play = (): void => {
    const now = clock.now();
    const silent = now - beat.at;
    const due = Math.min(CATCH_UP, now - playedUntil);
    if (due < 0.005) return;
    playedUntil = now;
    // The base stops by itself: what came after the watchdog ran out is played standing still.
    const moving = faults.has('heartbeat-ignored')
      ? due
      : Math.max(0, due - Math.max(0, silent - slave.watchdog));
    advancePlant(plant, parameters, world, Math.min(due, moving));
    if (moving < due) {
      plant.setpoints.spoolSpeed = 0;
      plant.setpoints.retractorSpeed = 0;
      advancePlant(plant, parameters, world, due - moving);
    }
  };

  const registers = createRegisters(rig, slave.id, {
    sense: () => senseAll(plant, parameters, random, frozenPressure),
    command: (name, value) => setPlant(plant, name, value),
    heartbeat: (count) => {
      if (count !== beat.count) beat = { count, at: clock.now() };
    },
  });
  const server = createModbusServer(registers);

  const receive: BuiltInRig['receive'] = (bytes) => {
    play();
    if (faults.has('dead-unit') || faults.has('unplug')) return [];
    return server.receive(bytes).map((reply) => ({
      bytes: spoil(reply, faults, random.uniform),
      delay: faults.has('delayed') ? 3 * rig.serial.replyTimeout : TURNAROUND,
    }));
  };

  return {
    receive,
    openLine: async () => {
      if (faults.has('unplug'))
        throw new LineError(
          'missing',
          'The built-in rig is unplugged.',
          'End the simulated fault on the Rig tab.',
        );
      const paced = pacedLine(rig, receive, clock);
      line = paced;
      return paced.line;
    },
    fault: (name) => {
      play();
      if (name === 'none') faults.clear();
      else faults.add(name);
      frozenPressure = faults.has('stuck-pressure') ? plant.pressure : null;
      plant.faults.leak = faults.has('leak');
      plant.faults.motorStall = faults.has('motor-stall');
      plant.faults.retractorLost = faults.has('retractor-loss');
      plant.faults.retractorStall = faults.has('retractor-stall');
      plant.faults.weakWall = faults.has('weak-wall');
      plant.faults.emergencyStop = faults.has('emergency-stop');
      if (name === 'unplug')
        line?.lose(
          new LineError(
            'unplugged',
            'The built-in rig was unplugged.',
            'End the simulated fault on the Rig tab.',
          ),
        );
    },
    truth: () => {
      play();
      return {
        length: plant.length,
        payout: plant.payout,
        folded: plant.folded,
        tip: cameraPose(plant).position,
        gripped: plant.gripped,
        spoolSpeed: plant.spoolSpeed,
      };
    },
  };
};

const setPlant = (plant: Plant, name: WriteSignal, value: number): void => {
  const { setpoints } = plant;
  if (name === 'spool_speed_setpoint') setpoints.spoolSpeed = value;
  else if (name === 'tip_retractor_speed_setpoint') setpoints.retractorSpeed = value;
  else if (name === 'body_pressure_setpoint') setpoints.bodyPressure = value;
  else if (name === 'tip_retractor_grip') setpoints.grip = value >= 0.5;
  else setpoints.musclePressures[Number(name.split('_')[1]) - 1] = value;
};

const spoil = (reply: Uint8Array, faults: ReadonlySet<Fault>, uniform: () => number): Uint8Array => {
  let bytes = reply;
  if (faults.has('truncated') && uniform() < 0.5) bytes = bytes.slice(0, Math.floor(bytes.length / 2));
  if (faults.has('bit-errors') && uniform() < 0.3) {
    bytes = bytes.slice();
    const at = Math.floor(uniform() * bytes.length);
    bytes[at] = bytes[at]! ^ (1 << Math.floor(uniform() * 8));
  }
  return bytes;
};

/** A line inside the process that takes as long for its bytes as the serial line would. */
const pacedLine = (
  rig: RigDescription,
  receive: BuiltInRig['receive'],
  clock: Clock,
): { readonly line: SerialLine; lose(error: LineError): void } => {
  const perByte = (rig.serial.parity === 'none' ? 10 : 11) / rig.serial.baudRate;
  const listeners = new Set<(bytes: Uint8Array) => void>();
  const losing = new Set<(error: LineError) => void>();
  let open = true;
  const answerAfter = (bytes: Uint8Array): void => {
    for (const reply of receive(bytes))
      clock.after(reply.delay + reply.bytes.length * perByte, () => {
        if (open) for (const listener of listeners) listener(reply.bytes);
      });
  };
  return {
    line: {
      name: 'built-in rig',
      write: (bytes) =>
        new Promise((resolve, reject) => {
          if (!open)
            return reject(
              new LineError('unplugged', 'The built-in rig was unplugged.', 'End the simulated fault.'),
            );
          clock.after(bytes.length * perByte, () => {
            resolve();
            if (open) answerAfter(bytes);
          });
        }),
      onData: (listener) => {
        listeners.add(listener);
        return () => listeners.delete(listener);
      },
      onLost: (listener) => {
        losing.add(listener);
        return () => losing.delete(listener);
      },
      close: async () => {
        open = false;
      },
    },
    lose: (error) => {
      if (!open) return;
      open = false;
      for (const listener of losing) listener(error);
    },
  };
};
