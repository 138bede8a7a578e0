import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { isMap, LineCounter, parseDocument } from 'yaml';
import type { BodyDescription, TipLoss } from '../../shared-model/body/body.ts';
import type { RigEntry, WireEntry } from './rig-schema.ts';
import { rigSchema } from './rig-schema.ts';
import type { RigDescription, Slave, WireSignal } from './signal.ts';

export const BUILT_IN_RIG_FILE = fileURLToPath(new URL('./files/built-in.yaml', import.meta.url));

export type RigFileResult =
  | { readonly ok: true; readonly rig: RigDescription }
  /** One sentence a fault: file, line, key, what was found, what is allowed. */
  | { readonly ok: false; readonly errors: readonly string[] };

export const loadRigFile = (path: string): RigFileResult => {
  try {
    return parseRigText(readFileSync(path, 'utf8'), path);
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code;
    const why =
      code === 'ENOENT'
        ? 'there is no such file'
        : code === 'EACCES'
          ? 'it may not be read'
          : code === 'EISDIR'
            ? 'it is a folder'
            : String(error);
    return { ok: false, errors: [`${path}: cannot be read, ${why}. Give the path of a rig file (YAML).`] };
  }
};

/** Parses a rig file; all its faults at once. */
export const parseRigText = (text: string, file: string): RigFileResult => {
  const lines = new LineCounter();
  const document = parseDocument(text, { lineCounter: lines });
  if (document.errors.length > 0)
    return {
      ok: false,
      errors: document.errors.map(
        (error) => `${file}:${error.linePos?.[0].line ?? 1}: not valid YAML: ${firstLine(error.message)}`,
      ),
    };
  const parsed = rigSchema.safeParse(document.toJS());
  const faults = parsed.success ? contradictions(parsed.data) : parsed.error.issues.flatMap(faultsOf);
  if (!parsed.success || faults.length > 0)
    return {
      ok: false,
      errors: faults.map(
        ({ path, message }) =>
          `${file}:${lineOf(document, lines, path)}: ${path.join('.') || 'file'}: ${message}${foundText(document.getIn(path))}`,
      ),
    };
  return { ok: true, rig: describeRig(parsed.data, file) };
};

type Path = readonly (string | number)[];
interface Fault {
  readonly path: Path;
  readonly message: string;
}

const faultsOf = (issue: {
  path: PropertyKey[];
  message: string;
  code: string;
  keys?: string[];
}): Fault[] => {
  const path = issue.path as (string | number)[];
  if (issue.code === 'unrecognized_keys')
    return (issue.keys ?? []).map((key) => ({
      path: [...path, key],
      message: 'this key is not known here; see the commented example rig files for the keys',
    }));
  return [{ path, message: issue.message }];
};

/** What the schema cannot see: keys that must agree with each other. */
const contradictions = (entry: RigEntry): Fault[] => {
  const faults: Fault[] = [];
  const need = (ok: boolean, path: Path, message: string): void => {
    if (!ok) faults.push({ path, message });
  };
  need(
    (entry.body.film === undefined) !== (entry.body.fabric === undefined),
    ['body'],
    'give either film or fabric',
  );
  need(
    entry.limits.body_pressure_min_kPa < entry.limits.body_pressure_max_kPa,
    ['limits', 'body_pressure_min_kPa'],
    'must be below body_pressure_max_kPa',
  );
  const { read, write } = entry.signals;
  for (const name of ['body_pressure', 'tail_payout'] as const)
    need(read[name] !== undefined, ['signals', 'read'], `${name} is needed to judge a pull`);
  need(
    write.spool_speed_setpoint !== undefined,
    ['signals', 'write'],
    'spool_speed_setpoint is needed to move',
  );
  need(
    !entry.emergency_stop_wired || read.emergency_stop !== undefined,
    ['emergency_stop_wired'],
    'is true, so signals.read.emergency_stop must say where it is read',
  );
  entry.muscles.angles_deg.forEach((_, i) => {
    const pressure = `muscle_${i + 1}_pressure` as keyof typeof read;
    const setpoint = `muscle_${i + 1}_pressure_setpoint` as keyof typeof write;
    need(
      read[pressure] !== undefined,
      ['signals', 'read'],
      `${pressure} is needed for the muscle at ${entry.muscles.angles_deg[i]} deg`,
    );
    need(
      write[setpoint] !== undefined,
      ['signals', 'write'],
      `${setpoint} is needed for the muscle at ${entry.muscles.angles_deg[i]} deg`,
    );
  });
  const ids = new Set(entry.units.map((unit) => unit.id));
  for (const side of ['read', 'write'] as const)
    for (const [name, signal] of Object.entries(entry.signals[side])) {
      if (signal === undefined) continue;
      need(
        ids.has(signal.unit),
        ['signals', side, name, 'unit'],
        `no unit ${signal.unit} is listed under units`,
      );
      if (side === 'write')
        need(
          signal.table === 'holding' || signal.table === 'coil',
          ['signals', side, name, 'table'],
          'only holding registers and coils can be written',
        );
    }
  return faults;
};

const lineOf = (document: ReturnType<typeof parseDocument>, lines: LineCounter, path: Path): number => {
  for (let depth = path.length; depth >= 0; depth--) {
    const parent = depth === 0 ? document.contents : document.getIn(path.slice(0, depth - 1), true);
    const key = path[depth - 1];
    const pair = isMap(parent) ? parent.items.find((item) => String(item.key) === String(key)) : undefined;
    const node = (pair?.key ??
      (depth === 0 ? document.contents : document.getIn(path.slice(0, depth), true))) as
      | { range?: [number, number, number] }
      | undefined;
    if (node?.range !== undefined) return lines.linePos(node.range[0]).line;
  }
  return 1;
};

const foundText = (found: unknown): string =>
  found === undefined || (typeof found === 'object' && found !== null)
    ? ''
    : ` (found ${JSON.stringify(found)})`;

/** SI per unit of the rig file, by what a signal measures. */
const unitOf = (name: string): { readonly unit: string; readonly factor: number } => {
  if (name.includes('pressure')) return { unit: 'kPa', factor: 1000 };
  if (name.includes('speed')) return { unit: 'm/s', factor: 1 };
  if (name === 'tail_tension') return { unit: 'N', factor: 1 };
  if (name === 'tip_roll') return { unit: 'deg', factor: Math.PI / 180 };
  if (name === 'tail_payout' || name === 'tip_retractor_travel' || /^camera_[xyz]$/.test(name))
    return { unit: 'm', factor: 1 };
  return { unit: '', factor: 1 };
};

const wireOf = (name: string, entry: WireEntry): WireSignal => {
  const { unit, factor } = unitOf(name);
  const ambient = entry.absolute === undefined ? 0 : entry.absolute.ambient_kPa * 1000;
  return {
    slave: entry.unit,
    table: entry.table,
    address: entry.address,
    type: entry.type,
    wordOrder: entry.word_order,
    scale: entry.scale * factor,
    offset: entry.offset * factor - ambient,
    min: entry.range[0] * factor - ambient,
    max: entry.range[1] * factor - ambient,
    sentinels: entry.no_reading,
    unit,
  };
};

const wiresOf = (entries: Record<string, WireEntry | undefined>): Record<string, WireSignal> =>
  Object.fromEntries(
    Object.entries(entries).flatMap(([name, entry]) =>
      entry === undefined ? [] : [[name, wireOf(name, entry)]],
    ),
  );

const describeRig = (entry: RigEntry, file: string): RigDescription => ({
  name: entry.name,
  file,
  simulated: entry.simulated,
  place: entry.place,
  serial: {
    path: entry.serial.path ?? null,
    usb:
      entry.serial.usb === undefined
        ? null
        : {
            vendorId: entry.serial.usb.vendor_id,
            productId: entry.serial.usb.product_id,
            serialNumber: entry.serial.usb.serial_number ?? null,
          },
    baudRate: entry.serial.baud,
    parity: entry.serial.parity,
    stopBits: entry.serial.stop_bits,
    replyTimeout: entry.serial.reply_timeout_ms / 1000,
    linkTimeout: entry.serial.link_timeout_ms / 1000,
  },
  slaves: entry.units.map(slaveOf),
  reads: wiresOf(entry.signals.read),
  writes: wiresOf(entry.signals.write),
  body: bodyOf(entry.body),
  muscles: {
    radius: entry.muscles.radius_mm / 1000,
    muscles: entry.muscles.angles_deg.map((angle) => ({ angle: (angle * Math.PI) / 180 })),
    contraction: entry.muscles.contraction.map(([kPa, ratio]) => [kPa * 1000, ratio] as const),
    bendGain: entry.muscles.bend_gain,
  },
  limits: {
    tipSpeed: entry.limits.tip_speed_m_per_s,
    bodyPressureMin: entry.limits.body_pressure_min_kPa * 1000,
    bodyPressureMax: entry.limits.body_pressure_max_kPa * 1000,
    bodyPressureRate: entry.limits.body_pressure_rate_kPa_per_s * 1000,
    musclePressureMax: entry.limits.muscle_pressure_max_kPa * 1000,
    bendRate: entry.limits.bend_rate_per_m_s,
    bodyLengthMax: entry.limits.body_length_max_m,
    tailTensionMax: entry.limits.tail_tension_max_N,
    pressureAccuracy: entry.limits.pressure_accuracy_kPa * 1000,
    readingAge: entry.limits.reading_age_ms / 1000,
    tailSlackMax: entry.limits.tail_slack_max_m,
  },
  emergencyStopWired: entry.emergency_stop_wired,
  camera: entry.camera.kind === 'video' ? { kind: 'video', label: entry.camera.label ?? null } : entry.camera,
});

const slaveOf = (unit: RigEntry['units'][number]): Slave => ({
  id: unit.id,
  name: unit.name,
  watchdog: unit.watchdog_ms / 1000,
  heartbeat: unit.heartbeat === undefined ? null : wireOf('heartbeat', unit.heartbeat),
  identity: unit.identity === undefined ? null : wireOf('identity', unit.identity.signal),
  identityExpected: unit.identity?.expected ?? null,
  faultWord: unit.fault_word === undefined ? null : wireOf('fault_word', unit.fault_word),
});

const bodyOf = (body: RigEntry['body']): BodyDescription => ({
  radius: body.diameter_mm / 2000,
  wall: body.film === undefined ? 1 : body.film.thickness_um * 1e-6,
  E: body.film === undefined ? (body.fabric?.Et_kN_per_m ?? Number.NaN) * 1000 : body.film.E_MPa * 1e6,
  G: body.film === undefined ? (body.fabric?.Gt_kN_per_m ?? Number.NaN) * 1000 : body.film.G_MPa * 1e6,
  growth: lossOf(body.growth),
  inversion: lossOf(body.inversion),
  friction: body.friction,
  tailWeight: body.tail_weight_N_per_m,
  weight: body.hanging_weight_N_per_m,
  payload: body.tip_payload_N,
  guideSetback: body.guide_setback_mm / 1000,
  collapseFraction: body.collapse_fraction,
  eccentricityFloor: body.eccentricity_floor,
  hoopStrength: body.hoop_strength_kN_per_m === undefined ? null : body.hoop_strength_kN_per_m * 1000,
  justifiedMargin: null,
  measured: body.measured,
  freeEnd: body.free_end_m ?? Number.POSITIVE_INFINITY,
  onGround: body.on_ground,
});

/** v = φ·ΔP^n with v₁ at 1 kPa gives φ = v₁/1000^n. */
const lossOf = (loss: RigEntry['body']['growth']): TipLoss => ({
  yield: loss.yield_kPa * 1000,
  rateCoefficient:
    loss.speed_at_1_kPa_m_per_s === undefined
      ? Number.POSITIVE_INFINITY
      : loss.speed_at_1_kPa_m_per_s / 1000 ** loss.rate_exponent,
  rateExponent: loss.rate_exponent,
});

const firstLine = (text: string): string => text.split('\n')[0] ?? text;
