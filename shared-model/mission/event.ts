import { z } from 'zod';

const vec3 = z.tuple([z.number(), z.number(), z.number()]);
const pose = z.strictObject({
  position: vec3,
  quaternion: z.tuple([z.number(), z.number(), z.number(), z.number()]),
});
const id = z.string().min(1).max(64);
const forces = z.strictObject({
  length: z.number(),
  tipTension: z.number(),
  baseTension: z.number(),
  columnLoad: z.number(),
  arm: z.number(),
  capacity: z.number(),
  ratio: z.number(),
});
const reason = z.strictObject({ code: z.string(), text: z.string(), remedy: z.string() });

/** What every event carries. `at`: monotonic [s] of the console; `time`: RFC 3339 UTC. Order is by `seq`. */
const stamp = { seq: z.int().min(0), at: z.number(), time: z.string() };

/** Everything that happened in a mission, in SI, base frame. The mission's state is the fold of these. */
export const missionEventSchema = z.discriminatedUnion('kind', [
  z.strictObject({
    ...stamp,
    kind: z.literal('mission-started'),
    mission: id,
    place: z.string(),
    rig: z.string(),
    simulated: z.boolean(),
    software: z.string(),
  }),
  z.strictObject({ ...stamp, kind: z.literal('mission-ended'), reason: z.string() }),
  /** The tip has come this far along the present path; sent every so often, so that a path can be drawn. */
  z.strictObject({ ...stamp, kind: z.literal('extended'), length: z.number(), tip: pose }),
  z.strictObject({ ...stamp, kind: z.literal('retracted'), length: z.number(), tip: pose }),
  z.strictObject({
    ...stamp,
    kind: z.literal('branch-point-marked'),
    id,
    label: z.string(),
    length: z.number(),
    tip: pose,
    arms: z.array(z.string()),
  }),
  /** From now on, growth beyond the branch point is in this arm. */
  z.strictObject({ ...stamp, kind: z.literal('arm-entered'), branchPoint: id, arm: z.string() }),
  z.strictObject({
    ...stamp,
    kind: z.literal('waypoint-logged'),
    id,
    note: z.string(),
    length: z.number(),
    tip: pose,
    /** File name in the mission folder, or null. */
    picture: z.string().nullable(),
    readings: z.record(z.string(), z.number()),
  }),
  z.strictObject({
    ...stamp,
    kind: z.literal('pull-refused'),
    motion: z.string(),
    length: z.number().nullable(),
    forces: forces.nullable(),
    margin: z.number().nullable(),
    reasons: z.array(reason),
  }),
  z.strictObject({
    ...stamp,
    kind: z.literal('tip-retractor'),
    state: z.enum(['attached', 'absent']),
    source: z.enum(['sensed', 'declared']),
  }),
  /** A trial of the bench was kept, in force from the console's next start. */
  z.strictObject({
    ...stamp,
    kind: z.literal('trial-saved'),
    trial: z.string(),
    initials: z.string(),
    values: z.array(z.strictObject({ name: z.string(), value: z.number(), halfWidth: z.number() })),
  }),
  /** A person asked for it to be engaged or released, or declared that it is. */
  z.strictObject({ ...stamp, kind: z.literal('tip-retractor-asked'), attached: z.boolean() }),
  /** Something went wrong under way: a fold of the body is suspected, or a drive does not follow. */
  z.strictObject({
    ...stamp,
    kind: z.literal('tripped'),
    code: z.string(),
    text: z.string(),
    length: z.number().nullable(),
  }),
  /** A person looked after a suspected fold and says that the body lies as before. */
  z.strictObject({ ...stamp, kind: z.literal('fold-cleared') }),
  z.strictObject({
    ...stamp,
    kind: z.literal('backtrack-started'),
    target: id,
    from: z.number(),
    to: z.number(),
  }),
  z.strictObject({ ...stamp, kind: z.literal('backtrack-arrived'), target: id, length: z.number() }),
  z.strictObject({ ...stamp, kind: z.literal('stopped'), by: z.string() }),
  z.strictObject({ ...stamp, kind: z.literal('link'), state: z.string(), text: z.string() }),
  z.strictObject({
    ...stamp,
    kind: z.literal('alarm'),
    id,
    change: z.enum(['raised', 'acknowledged', 'returned', 'cleared']),
    priority: z.string(),
    cause: z.string(),
  }),
  z.strictObject({
    ...stamp,
    kind: z.literal('driver'),
    client: z.string(),
    change: z.enum(['took-over', 'left']),
  }),
]);
export type MissionEvent = z.infer<typeof missionEventSchema>;
export type MissionEventKind = MissionEvent['kind'];

/** An event before it is stamped. */
export type UnstampedEvent = MissionEvent extends infer E
  ? E extends MissionEvent
    ? Omit<E, 'seq' | 'at' | 'time'>
    : never
  : never;
