import type { Readings } from '../../shared-model/contract/reading.ts';
import { systemClock } from '../clock.ts';
import { createRigLink } from '../rig/link.ts';
import { BUILT_IN_RIG_FILE, loadRigFile } from '../rig/rig-file.ts';
import { serialPortOpener } from '../rig/serial-port-line.ts';
import type { RigDescription, WireSignal } from '../rig/signal.ts';
import { withTrials } from '../rig/trials.ts';

export interface CheckRigOptions {
  /** Rig file; the built-in rig's when left out. */
  readonly file?: string | undefined;
  readonly json: boolean;
  /** Read every signal once over the line. */
  readonly live: boolean;
  /** Serial port instead of the rig file's. */
  readonly serial?: string | undefined;
}
export interface Output {
  out(line: string): void;
  error(line: string): void;
}

/** Checks a rig file and, with `live`, the machine; returns the exit code. */
export const checkRig = async (options: CheckRigOptions, output: Output): Promise<number> => {
  const result = loadRigFile(options.file ?? BUILT_IN_RIG_FILE);
  if (!result.ok) {
    for (const error of result.errors) output.error(error);
    output.error(
      `${result.errors.length} fault${result.errors.length === 1 ? '' : 's'}; the rig file cannot be used.`,
    );
    return 1;
  }
  const { rig } = result;
  const readings = options.live ? await readOnce(rig, options.serial, output) : null;
  if (options.live && readings === null) return 1;
  if (options.json)
    output.out(
      JSON.stringify(
        { name: rig.name, simulated: rig.simulated, file: rig.file, signals: rows(rig, readings) },
        null,
        2,
      ),
    );
  else printTable(rig, readings, output);
  if (!reportTrials(rig, options, output)) return 1;
  const bad =
    readings === null ? 0 : Object.values(readings).filter((reading) => reading.quality !== 'good').length;
  return bad === 0 ? 0 : 1;
};

/** How the trials in the companion stand; whether it can be read. The built-in rig's lies with its missions. */
const reportTrials = (rig: RigDescription, options: CheckRigOptions, output: Output): boolean => {
  if (options.file === undefined) return true;
  const { companion, standings, trouble } = withTrials(rig, null, systemClock.wall().toISOString());
  if (trouble !== null) {
    output.error(`${trouble} The console pulls nothing until it can be read.`);
    return false;
  }
  if (options.json) return true;
  for (const { kind, state, record } of standings)
    if (record !== null)
      output.out(
        `  trial ${kind.padEnd(24)} ${state} by ${record.initials} on ${record.date}, until ${record.expires} (${companion})`,
      );
  return true;
};

const rows = (rig: RigDescription, readings: Readings | null) => {
  const signals: (readonly [string, 'read' | 'write', WireSignal])[] = [
    ...Object.entries(rig.reads).map(([name, signal]) => [name, 'read', signal] as const),
    ...Object.entries(rig.writes).map(([name, signal]) => [name, 'write', signal] as const),
    ...rig.slaves.flatMap((slave) => [
      ...(slave.heartbeat === null
        ? []
        : [[`unit_${slave.id}_heartbeat`, 'write', slave.heartbeat] as const]),
      ...(slave.identity === null ? [] : [[`unit_${slave.id}_identity`, 'read', slave.identity] as const]),
      ...(slave.faultWord === null
        ? []
        : [[`unit_${slave.id}_fault_word`, 'read', slave.faultWord] as const]),
    ]),
  ];
  return signals.map(([name, direction, signal]) => {
    const factor = siPerUnit(signal.unit);
    const reading = direction === 'read' ? readings?.[name as keyof Readings] : undefined;
    return {
      name,
      direction,
      unit: signal.unit,
      unitId: signal.slave,
      table: signal.table,
      address: signal.address,
      type: signal.type,
      wordOrder: signal.wordOrder,
      scale: tidy(signal.scale / factor),
      offset: tidy(signal.offset / factor),
      range: [tidy(signal.min / factor), tidy(signal.max / factor)],
      ...(reading === undefined
        ? {}
        : reading.quality === 'bad'
          ? { quality: 'bad', why: reading.why }
          : { quality: reading.quality, value: tidy(reading.value / factor) }),
    };
  });
};

const printTable = (rig: RigDescription, readings: Readings | null, output: Output): void => {
  output.out(`${rig.name} (${rig.file}): ${rig.simulated ? 'simulated, ' : ''}rig file is sound.`);
  for (const row of rows(rig, readings)) {
    const where = `unit ${row.unitId} ${row.table} ${row.address} ${row.type}`;
    const value =
      'value' in row ? `${row.value} ${row.unit} (${row.quality})` : 'why' in row ? `bad: ${row.why}` : '';
    output.out(
      `  ${row.name.padEnd(30)} ${row.direction.padEnd(5)} ${where.padEnd(28)} ${row.unit.padEnd(4)} ${value}`,
    );
  }
};

const readOnce = async (
  rig: RigDescription,
  serial: string | undefined,
  output: Output,
): Promise<Readings | null> => {
  const settings = serial === undefined ? rig.serial : { ...rig.serial, path: serial };
  if (rig.simulated && settings.path === null) {
    output.error(
      'The built-in rig has no port of its own. Serve it with `foldback simulate --port PATH` and give that line with --serial PATH.',
    );
    return null;
  }
  const link = createRigLink({ ...rig, serial: settings }, serialPortOpener(settings), systemClock);
  try {
    const deadline = systemClock.now() + 3;
    while (link.status().state === 'opening' && systemClock.now() < deadline)
      await new Promise((done) => systemClock.after(0.02, () => done(null)));
    const readings = await link.read(systemClock.now());
    const status = link.status();
    if (status.state === 'open') return readings;
    output.error(
      status.state === 'lost'
        ? `${status.text} ${status.remedy}`
        : `The line to ${status.port} did not open.`,
    );
    return null;
  } finally {
    await link.close();
  }
};

const siPerUnit = (unit: string): number => (unit === 'kPa' ? 1000 : unit === 'deg' ? Math.PI / 180 : 1);
const tidy = (value: number): number => Number(value.toPrecision(9));
