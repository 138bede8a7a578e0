import { z } from 'zod';
import { READ_SIGNALS, WRITE_SIGNALS } from '../../shared-model/contract/reading.ts';

const positive = z.number().positive();
const notNegative = z.number().min(0);

/** One number on the wire. Scale and offset give the value in the signal's own unit; so does the valid range. */
const wireSchema = z.strictObject({
  unit: z.int().min(1).max(247),
  table: z.enum(['holding', 'input', 'coil', 'discrete']),
  address: z.int().min(0).max(65535),
  type: z.enum(['u16', 'i16', 'u32', 'i32', 'f32']).default('u16'),
  word_order: z.enum(['high-first', 'low-first']).default('high-first'),
  scale: z
    .number()
    .refine((x) => x !== 0, 'must not be 0')
    .default(1),
  offset: z.number().default(0),
  range: z.tuple([z.number(), z.number()]).refine(([low, high]) => low < high, 'must rise, such as [0, 20]'),
  no_reading: z.array(z.number()).default([]),
  /** A pressure sensor that reports absolute pressure is declared so and corrected by the ambient pressure. */
  absolute: z.strictObject({ ambient_kPa: z.number().min(50).max(120) }).optional(),
});
export type WireEntry = z.output<typeof wireSchema>;

const tipLoss = z.strictObject({
  yield_kPa: notNegative,
  /** Speed [m/s] at which the rate term takes 1 kPa. */
  speed_at_1_kPa_m_per_s: positive.optional(),
  rate_exponent: positive.default(1),
});

const optionalSignals = <Name extends string>(names: readonly Name[]) =>
  z.strictObject(
    Object.fromEntries(names.map((name) => [name, wireSchema.optional()])) as Record<
      Name,
      z.ZodOptional<typeof wireSchema>
    >,
  );

export const rigSchema = z.strictObject({
  name: z.string().min(1).max(80),
  simulated: z.boolean().default(false),
  place: z.strictObject({
    name: z.string().min(1).max(80),
    gravity: z
      .tuple([z.number(), z.number(), z.number()])
      .refine((g) => Math.abs(Math.hypot(...g) - 1) < 0.01, 'must have length 1, such as [0, 1, 0]')
      .default([0, 1, 0]),
  }),
  serial: z.strictObject({
    path: z.string().min(1).optional(),
    usb: z
      .strictObject({ vendor_id: z.string(), product_id: z.string(), serial_number: z.string().optional() })
      .optional(),
    baud: z.int().min(1200).max(1_000_000),
    parity: z.enum(['none', 'even', 'odd']).default('none'),
    stop_bits: z.union([z.literal(1), z.literal(2)]).default(1),
    reply_timeout_ms: z.number().min(1).max(2000),
    link_timeout_ms: z.number().min(50).max(10_000),
  }),
  units: z
    .array(
      z.strictObject({
        id: z.int().min(1).max(247),
        name: z.string().min(1),
        watchdog_ms: z.number().min(50).max(10_000),
        heartbeat: wireSchema.optional(),
        identity: z.strictObject({ signal: wireSchema, expected: z.number() }).optional(),
        fault_word: wireSchema.optional(),
      }),
    )
    .min(1),
  signals: z.strictObject({
    read: optionalSignals(READ_SIGNALS),
    write: optionalSignals(WRITE_SIGNALS),
  }),
  body: z.strictObject({
    diameter_mm: positive,
    /** A film is described by thickness and moduli, a fabric by membrane stiffnesses. */
    film: z.strictObject({ thickness_um: positive, E_MPa: positive, G_MPa: notNegative }).optional(),
    fabric: z.strictObject({ Et_kN_per_m: positive, Gt_kN_per_m: notNegative }).optional(),
    growth: tipLoss,
    inversion: tipLoss,
    friction: notNegative,
    tail_weight_N_per_m: notNegative,
    hanging_weight_N_per_m: notNegative,
    tip_payload_N: notNegative,
    guide_setback_mm: notNegative,
    collapse_fraction: z.number().gt(0).max(1).default(0.8),
    eccentricity_floor: notNegative.default(0.1),
    hoop_strength_kN_per_m: positive.optional(),
    measured: z.array(z.enum(['E', 'G', 'inversionYield', 'friction'])).default([]),
    free_end_m: positive.optional(),
    on_ground: z.boolean(),
  }),
  muscles: z.strictObject({
    radius_mm: positive,
    angles_deg: z.array(z.number()).max(6),
    contraction: z
      .array(z.tuple([notNegative, z.number().min(0).lt(0.6)]))
      .min(2)
      .refine(
        (points) => points.every((p, i) => i === 0 || (p[0] > points[i - 1]![0] && p[1] > points[i - 1]![1])),
        'both columns must rise: [kPa, ratio]',
      )
      .refine((points) => points[0]![0] === 0 && points[0]![1] === 0, 'must start at [0, 0]'),
    bend_gain: positive.default(1),
  }),
  limits: z.strictObject({
    tip_speed_m_per_s: positive,
    body_pressure_min_kPa: notNegative,
    body_pressure_max_kPa: positive,
    body_pressure_rate_kPa_per_s: positive,
    muscle_pressure_max_kPa: positive,
    bend_rate_per_m_s: positive,
    body_length_max_m: positive,
    tail_tension_max_N: positive,
    pressure_accuracy_kPa: notNegative,
    reading_age_ms: z.number().min(20).max(2000),
    tail_slack_max_m: positive,
  }),
  emergency_stop_wired: z.boolean(),
  camera: z.discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('drawn'), world: z.string() }),
    z.strictObject({ kind: z.literal('video'), label: z.string().optional() }),
    z.strictObject({ kind: z.literal('none') }),
  ]),
});
export type RigEntry = z.output<typeof rigSchema>;
