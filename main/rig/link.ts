import type { LinkStatus } from '../../shared-model/contract/frame.ts';
import type { Reading, Readings, ReadSignal, WriteSignal } from '../../shared-model/contract/reading.ts';
import { PERMIT_LIFE, PermittedDrive, type Setpoints } from '../../shared-model/retraction/interlock.ts';
import type { Clock } from '../clock.ts';
import { decodeSignal } from './codec.ts';
import { createMaster, type Master, type Reply } from './master.ts';
import { type PlannedRead, planReads } from './read-plan.ts';
import type { RigLink, WriteOutcome } from './rig-link.ts';
import { LineError, type OpenLine, type SerialLine } from './serial-line.ts';
import type { RigDescription, Slave, WireSignal } from './signal.ts';
import { planWrites, type SignalValue } from './write-plan.ts';

/** How long to wait before opening the line again [s]. */
const REOPEN_AFTER = 1;
/** How often identity and fault words are read along [ticks]. */
const HEALTH_EVERY = 20;

/** The link to one rig over whatever line `openLine` gives. Opens at once and again after every loss. */
/** One connection; another one is another object. */
interface OpenedLine {
  readonly line: SerialLine;
  readonly master: Master;
  /** When it was opened, monotonic [s]. */
  readonly since: number;
}

export const createRigLink = (rig: RigDescription, openLine: OpenLine, clock: Clock): RigLink => {
  const plan = planReads(Object.entries(rig.reads) as [ReadSignal, WireSignal][]);
  const last = new Map<ReadSignal, Reading>();
  const port = rig.serial.path ?? 'built-in rig';
  const timing = {
    baudRate: rig.serial.baudRate,
    bitsPerCharacter: rig.serial.parity === 'none' && rig.serial.stopBits === 1 ? 10 : 11,
    replyTimeout: rig.serial.replyTimeout,
  };
  let status: LinkStatus = { state: 'opening', port };
  let open: OpenedLine | null = null;
  let cancelReopen: () => void = () => {};
  let closed = false;
  let beat = 0;
  let reads = 0;
  let rate = 0;
  let lastReadAt = Number.NaN;

  const lose = (error: LineError): void => {
    const was = open;
    open = null;
    was?.master.close();
    void was?.line.close().catch(() => {});
    if (closed) return;
    status = { state: 'lost', port, code: error.code, text: error.message, remedy: error.remedy };
    cancelReopen();
    cancelReopen = clock.after(REOPEN_AFTER, () => void tryOpen());
  };

  const tryOpen = async (): Promise<void> => {
    if (closed || open !== null) return;
    let mine: OpenedLine | null = null;
    try {
      const line = await openLine();
      if (closed) return void line.close();
      const master = createMaster(line, timing, clock);
      const here = { line, master, since: clock.now() };
      open = here;
      mine = here;
      line.onLost(lose);
      await checkIdentities(rig.slaves, master);
      // It may have been lost again meanwhile.
      if (open !== here) return;
      // Nothing read before a loss may pass for a present reading after it.
      last.clear();
      reads = 0;
      status = { state: 'open', port, cycleRate: 0, errors: 0, since: here.since };
    } catch (error) {
      // Lost meanwhile, and perhaps opened anew by someone else: that is not this try's to end.
      if (open !== mine) return;
      lose(
        error instanceof LineError
          ? error
          : new LineError('fault', String(error), 'See the message; then press Reconnect.'),
      );
    }
  };

  const read = async (now: number): Promise<Readings> => {
    const here = open;
    if (here === null || status.state !== 'open') return everythingBad(rig, `no link to ${port}`, now);
    const results = await Promise.all(plan.map((planned) => askAgainOnce(here.master, planned.question)));
    if (open !== here) return everythingBad(rig, `no link to ${port}`, now);
    for (const [i, planned] of plan.entries()) keepReadings(last, planned, results[i]!, clock.now());
    if (reads++ % HEALTH_EVERY === 0) await checkFaultWords(rig.slaves, here.master, lose);
    if (open !== here) return everythingBad(rig, `no link to ${port}`, now);
    noteRate();
    checkSilence(here);
    return Object.fromEntries(last) as Readings;
  };

  const noteRate = (): void => {
    const at = clock.now();
    const dt = at - lastReadAt;
    if (dt > 0) rate = rate === 0 ? 1 / dt : rate + 0.1 * (1 / dt - rate);
    lastReadAt = at;
  };

  const checkSilence = (here: NonNullable<typeof open>): void => {
    const counts = here.master.counts();
    const heard = Math.max(counts.lastFrameAt, here.since);
    if (clock.now() - heard > rig.serial.linkTimeout) lose(silent(port, rig.serial.linkTimeout));
    else
      status = {
        state: 'open',
        port,
        cycleRate: Math.round(rate * 10) / 10,
        errors: counts.errors,
        since: here.since,
      };
  };

  const write = async (drive: PermittedDrive, now: number): Promise<WriteOutcome> => {
    if (!PermittedDrive.isPermit(drive)) return failed('not a permit of the interlock');
    if (!(now - drive.issuedAt <= PERMIT_LIFE && now >= drive.issuedAt))
      return failed('the permit is too old');
    const here = open;
    if (here === null || status.state !== 'open') return failed(`no link to ${port}`);
    beat = (beat + 1) & 0x7fff;
    const values = [...setpointValues(rig, drive.setpoints), ...heartbeats(rig.slaves, beat)];
    const questions = planWrites(values);
    const replies = await Promise.all(questions.map((question) => here.master.ask(question)));
    const bad = replies.findIndex((reply) => reply.outcome !== 'answer');
    return bad < 0
      ? { outcome: 'confirmed' }
      : failed(`unit ${questions[bad]!.slave}: ${describe(replies[bad]!)}`);
  };

  const stop = async (drive: PermittedDrive): Promise<void> => {
    if (!PermittedDrive.isPermit(drive)) return;
    const { spoolSpeed, retractorSpeed } = drive.setpoints;
    if (spoolSpeed !== 0 || (retractorSpeed ?? 0) !== 0) return;
    await open?.master.overtake(planWrites(setpointValues(rig, drive.setpoints)));
  };

  void tryOpen();
  return {
    status: () => status,
    read,
    write,
    stop,
    reconnect: () => {
      if (open !== null)
        lose(new LineError('fault', `The line to ${port} was closed to open it again.`, 'Wait a moment.'));
      cancelReopen();
      void tryOpen();
    },
    close: async () => {
      closed = true;
      cancelReopen();
      status = { state: 'closed', port };
      open?.master.close();
      await open?.line.close().catch(() => {});
    },
  };
};

const askAgainOnce = async (master: Master, question: PlannedRead<string>['question']): Promise<Reply> => {
  const first = await master.ask(question);
  return first.outcome === 'timeout' || first.outcome === 'bad-frame' ? master.ask(question) : first;
};

/** A failed read leaves the last good value, marked stale; a signal never read, or refused by the device, is bad. */
const keepReadings = (
  last: Map<ReadSignal, Reading>,
  planned: PlannedRead<ReadSignal>,
  reply: Reply,
  at: number,
): void => {
  for (const { name, signal, offset, width } of planned.signals) {
    if (reply.outcome === 'answer') {
      const decoded = decodeSignal(signal, reply.values.slice(offset, offset + width));
      last.set(
        name,
        decoded.ok ? { quality: 'good', value: decoded.value, at } : { quality: 'bad', why: decoded.why, at },
      );
      continue;
    }
    const before = last.get(name);
    const known = before !== undefined && before.quality !== 'bad' && reply.outcome !== 'exception';
    last.set(name, known ? { ...before, quality: 'stale' } : { quality: 'bad', why: describe(reply), at });
  }
};

const everythingBad = (rig: RigDescription, why: string, at: number): Readings =>
  Object.fromEntries(Object.keys(rig.reads).map((name) => [name, { quality: 'bad', why, at }])) as Readings;

const checkIdentities = async (slaves: readonly Slave[], master: Master): Promise<void> => {
  for (const slave of slaves) {
    if (slave.identity === null || slave.identityExpected === null) continue;
    const reply = await askAgainOnce(master, questionFor(slave.identity));
    if (reply.outcome !== 'answer')
      throw new LineError(
        'silent',
        `${slave.name} (unit ${slave.id}) does not answer: ${describe(reply)}.`,
        'Check its power, its line, the baud rate and the unit id in the rig file.',
      );
    const decoded = decodeSignal(slave.identity, reply.values);
    const found = decoded.ok ? decoded.value : Number.NaN;
    if (found !== slave.identityExpected)
      throw new LineError(
        'fault',
        `Unit ${slave.id} identifies itself as ${found}, not as ${slave.name} (${slave.identityExpected}).`,
        'This is another machine, or the rig file is of another machine.',
      );
  }
};

const checkFaultWords = async (
  slaves: readonly Slave[],
  master: Master,
  lose: (error: LineError) => void,
): Promise<void> => {
  for (const slave of slaves) {
    if (slave.faultWord === null) continue;
    const reply = await master.ask(questionFor(slave.faultWord));
    const word = reply.outcome === 'answer' ? (reply.values[0] ?? 0) : 0;
    if (word !== 0)
      lose(
        new LineError(
          'fault',
          `${slave.name} (unit ${slave.id}) reports fault ${word}.`,
          'Clear the fault at the device; see its manual.',
        ),
      );
  }
};

const questionFor = (signal: WireSignal): PlannedRead<string>['question'] =>
  planReads([['one', signal]])[0]!.question;

/** Speeds first, so that a stop and a start are the first bytes on the line. */
const setpointValues = (rig: RigDescription, setpoints: Setpoints): SignalValue[] => {
  const values: [WriteSignal, number | null][] = [
    ['spool_speed_setpoint', setpoints.spoolSpeed],
    ['tip_retractor_speed_setpoint', setpoints.retractorSpeed],
    ['body_pressure_setpoint', setpoints.bodyPressure],
    ...(setpoints.musclePressures ?? []).map((pressure, i): [WriteSignal, number] => [
      `muscle_${i + 1}_pressure_setpoint` as WriteSignal,
      pressure,
    ]),
    ['tip_retractor_grip', setpoints.retractorGrip === null ? null : Number(setpoints.retractorGrip)],
  ];
  return values.flatMap(([name, value]) => {
    const signal = rig.writes[name];
    return signal === undefined || value === null ? [] : [[signal, value] as const];
  });
};

const heartbeats = (slaves: readonly Slave[], beat: number): SignalValue[] =>
  slaves.flatMap((slave) => (slave.heartbeat === null ? [] : [[slave.heartbeat, beat] as const]));

const describe = (reply: Reply): string => {
  if (reply.outcome === 'timeout') return 'no answer in time';
  if (reply.outcome === 'bad-frame') return `bad frame, ${reply.why}`;
  if (reply.outcome === 'dropped') return reply.why;
  if (reply.outcome === 'answer') return 'answered';
  return EXCEPTIONS[reply.code] ?? `exception ${reply.code}`;
};

/** MODBUS Application Protocol V1.1b3, 7. */
const EXCEPTIONS: Record<number, string> = {
  1: 'the device does not know this function (exception 1): check the table in the rig file',
  2: 'the device has no such address (exception 2): check the address in the rig file',
  3: 'the device does not accept the value (exception 3): check type and range in the rig file',
  4: 'the device reports a fault of its own (exception 4)',
  5: 'the device is still at work (exception 5)',
  6: 'the device is busy (exception 6)',
};

const failed = (text: string): WriteOutcome => ({ outcome: 'failed', text });

const silent = (port: string, timeout: number): LineError =>
  new LineError(
    'silent',
    `No valid frame on ${port} for ${timeout.toFixed(1)} s.`,
    'Check power and cable of the rig; the line is opened again by itself.',
  );
