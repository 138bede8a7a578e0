/** What one signal says now, in SI. A number exists only where the quality allows one. `at`: monotonic [s]. */
export type Reading =
  | { readonly quality: 'good' | 'stale'; readonly value: number; readonly at: number }
  | { readonly quality: 'bad'; readonly why: string; readonly at: number };

export const MUSCLE_COUNT_MAX = 6;

/** Everything Foldback can read from a rig, in SI: Pa gauge, m, N, rad, m/s; flags are 0 or 1. */
export const READ_SIGNALS = [
  'body_pressure',
  'tail_payout',
  'tail_tension',
  'muscle_1_pressure',
  'muscle_2_pressure',
  'muscle_3_pressure',
  'muscle_4_pressure',
  'muscle_5_pressure',
  'muscle_6_pressure',
  'tip_retractor_attached',
  'tip_retractor_travel',
  'tip_roll',
  'emergency_stop',
  'camera_x',
  'camera_y',
  'camera_z',
  'camera_qw',
  'camera_qx',
  'camera_qy',
  'camera_qz',
] as const;
export type ReadSignal = (typeof READ_SIGNALS)[number];

/** Everything Foldback can write to a rig. Speeds are of tail (spool, + lets out) and of tip (retractor, + inverts). */
export const WRITE_SIGNALS = [
  'body_pressure_setpoint',
  'spool_speed_setpoint',
  'muscle_1_pressure_setpoint',
  'muscle_2_pressure_setpoint',
  'muscle_3_pressure_setpoint',
  'muscle_4_pressure_setpoint',
  'muscle_5_pressure_setpoint',
  'muscle_6_pressure_setpoint',
  'tip_retractor_grip',
  'tip_retractor_speed_setpoint',
] as const;
export type WriteSignal = (typeof WRITE_SIGNALS)[number];

/** The readings of one tick. A signal that the rig file does not describe is absent. */
export type Readings = Readonly<Partial<Record<ReadSignal, Reading>>>;

export const muscleSignals = (count: number) =>
  Array.from({ length: count }, (_, i) => ({
    pressure: `muscle_${i + 1}_pressure` as ReadSignal,
    setpoint: `muscle_${i + 1}_pressure_setpoint` as WriteSignal,
  }));

/** The number, if the reading is good and not older than `age` [s]; otherwise undefined. */
export const goodValue = (reading: Reading | undefined, now: number, age: number): number | undefined =>
  reading?.quality === 'good' && now - reading.at <= age && Number.isFinite(reading.value)
    ? reading.value
    : undefined;
