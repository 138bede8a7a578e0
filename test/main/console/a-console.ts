import { createConsole, type RunningConsole } from '../../../main/console/console.ts';
import type { Recorder } from '../../../main/record/recorder.ts';
import { createRigLink } from '../../../main/rig/link.ts';
import type { SerialLine } from '../../../main/rig/serial-line.ts';
import type { RigDescription } from '../../../main/rig/signal.ts';
import { withTrials } from '../../../main/rig/trials.ts';
import { type BuiltInRig, createBuiltInRig } from '../../../main/simulator/built-in-rig.ts';
import type {
  ConsoleFrame,
  ConsoleHello,
  ConsoleMessage,
  RigSummary,
} from '../../../shared-model/contract/frame.ts';
import { STILL, type Wish } from '../../../shared-model/contract/request.ts';
import type { MissionEvent } from '../../../shared-model/mission/event.ts';
import { builtInRig } from '../rig/built-in-rig.ts';
import { createVirtualClock, type VirtualClock } from '../virtual-clock.ts';

/** A speed setpoint as it passed on the wire: of the spool [m/s of tail] and of the retractor [m/s of tip]. */
export interface WireSpeed {
  readonly at: number;
  readonly spool: number;
  readonly retractor: number;
}

export interface Bench {
  readonly clock: VirtualClock;
  readonly console_: RunningConsole;
  readonly rig: BuiltInRig;
  /** Every motion write that passed between master and slave. */
  readonly wire: readonly WireSpeed[];
  readonly events: readonly MissionEvent[];
  /** Faults of the console's own; a sound one has none. */
  readonly complaints: readonly string[];
  frame(client?: string): ConsoleFrame;
  hello(client: string): ConsoleHello;
  run(seconds: number): Promise<void>;
  /** Closes the console; its last frames need time on the line too. */
  close(): Promise<void>;
  /** Holds a motion as a screen would, until something is so. */
  hold(wish: Partial<Wish>, until: () => boolean, most?: number): Promise<void>;
}

/** The whole console on the built-in rig, in virtual time, with a recorder between master and slave. */
export const startBench = async (
  seed = 5,
  {
    companionFolder = '/nowhere',
    change = (rig) => rig,
    wrap = (line) => line,
  }: {
    readonly companionFolder?: string;
    /** Makes another machine of the built-in rig's description. */
    readonly change?: (rig: RigDescription) => RigDescription;
    /** What stands between the recorder and the machine: a bad line. */
    readonly wrap?: (line: SerialLine, clock: VirtualClock) => SerialLine;
  } = {},
): Promise<Bench> => {
  const clock = createVirtualClock();
  const description = change(builtInRig());
  const rig = createBuiltInRig(description, { seed, clock });
  const wire: WireSpeed[] = [];
  const openLine = async (): Promise<SerialLine> => {
    const line = wrap(await rig.openLine(), clock);
    return {
      ...line,
      write: (bytes) => {
        note(wire, clock.now(), bytes);
        return line.write(bytes);
      },
    };
  };
  const events: MissionEvent[] = [];
  const complaints: string[] = [];
  const inbox = new Map<string, { frame?: ConsoleFrame; hello?: ConsoleHello }>();
  const send = (client: string, message: ConsoleMessage): void => {
    const box = inbox.get(client) ?? {};
    inbox.set(
      client,
      message.kind === 'frame'
        ? { ...box, frame: message }
        : message.kind === 'hello'
          ? { ...box, hello: message }
          : box,
    );
  };
  const console_ = createConsole({
    tried: withTrials(description, companionFolder, '2026-01-01T00:00:00Z'),
    summary: { name: description.name } as RigSummary,
    link: createRigLink(description, openLine, clock),
    recorder: memoryRecorder(events),
    clock,
    mission: 'm-1',
    software: 'test',
    missionsDir: '/nowhere',
    simulateFault: (name) => rig.fault(name as Parameters<typeof rig.fault>[0]),
    send,
    complain: (text) => void complaints.push(text),
  });
  console_.join('driver');
  let press = 0;
  const bench: Bench = {
    clock,
    console_,
    rig,
    wire,
    events,
    complaints,
    frame: (client = 'driver') => inbox.get(client)?.frame as ConsoleFrame,
    hello: (client) => inbox.get(client)?.hello as ConsoleHello,
    run: (seconds) => clock.advanceTo(clock.now() + seconds),
    close: async () => {
      let closed = false;
      const closing = console_.close().then(() => {
        closed = true;
      });
      while (!closed) await bench.run(0.05);
      await closing;
      if (complaints.length > 0) throw new Error(complaints.join('\n'));
    },
    hold: async (wish, until, most = 90) => {
      press++;
      const from = clock.now();
      for (let seq = 0; !until() && clock.now() - from < most; seq++) {
        await console_.request('driver', {
          kind: 'hold',
          press,
          seq,
          wish: { ...STILL, tipSpeed: 0.25, ...wish },
        });
        await bench.run(0.05);
      }
      await console_.request('driver', { kind: 'release', press });
      await bench.run(0.6);
    },
  };
  await bench.run(1);
  return bench;
};

export const memoryRecorder = (events: MissionEvent[]): Recorder => ({
  folder: '/nowhere',
  status: () => ({ state: 'recording', folder: '/nowhere', since: 0, bytes: 0 }),
  append: async (event) => {
    events.push(event);
    return true;
  },
  sample: () => {},
  still: async () => {},
  close: async () => {},
});

/** Speeds in a write of registers 0 and 1 of the built-in rig, in units of 0.1 mm/s. */
const note = (wire: WireSpeed[], at: number, bytes: Uint8Array): void => {
  const signed = (i: number): number => (((bytes[i]! << 8) | bytes[i + 1]!) << 16) >> 16;
  if (bytes[1] !== 16 || bytes[2] !== 0 || bytes[3] !== 0) return;
  wire.push({ at, spool: signed(7) / 10_000, retractor: signed(9) / 10_000 });
};
