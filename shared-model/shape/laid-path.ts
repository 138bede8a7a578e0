import type { Bend } from '../steering/muscle-bend.ts';
import { follow } from './arc.ts';
import { allocateShape, BASE_POSE, writeStation } from './segments.ts';
import { normalise, type Pose, type Quaternion, rotate, type Segment, type Vec3 } from './vector.ts';

/** Distance of two stations of a live body [m]. */
export const STATION = 0.01;
/** Changes below these are noise of the muscles' sensors and of the encoder, not a new shape. */
const BEND_NOISE = 2e-3;
const LENGTH_NOISE = 2e-4;

/**
 * The body as the console follows it: laid stations keep the bend they were laid with, the free end bends with the
 * present muscles. It is also the `SampledShape` of the whole body; its arrays grow by doubling.
 */
export interface LaidPath {
  count: number;
  s: Float64Array;
  position: Float64Array;
  tangent: Float64Array;
  bend: Float64Array;
  /** Attitude of each laid station, w x y z. */
  quaternion: Float64Array;
  /** Stations, from the base, that do not move with the muscles. */
  laid: number;
  tip: Pose;
  length: number;
  freeBend: Bend;
}

/** How a body lies. */
export interface LayRule {
  /** Length that bends with the present muscles [m]; Infinity: the whole body does. */
  readonly freeEnd: number;
  /** Laid parts keep only the part of their bend that lies in the level plane. */
  readonly onGround: boolean;
  readonly gravity: Vec3;
}

export const createLaidPath = (): LaidPath => {
  const shape = allocateShape(64);
  const path: LaidPath = {
    ...shape,
    count: 1,
    quaternion: new Float64Array(4 * 64),
    laid: 1,
    tip: BASE_POSE,
    length: 0,
    freeBend: { right: 0, down: 0 },
  };
  writeLaid(path, 0, BASE_POSE, 0, 0);
  return path;
};

/**
 * Brings the path to `length` [m] with the present bend: growth lays stations, retraction takes them back.
 * Returns the first station that differs from before; `path.count` when nothing does.
 */
export const layTo = (path: LaidPath, length: number, bend: Bend, rule: LayRule): number => {
  const still = Math.abs(length - path.length) < LENGTH_NOISE;
  const bendsTheSame =
    Math.hypot(bend.right - path.freeBend.right, bend.down - path.freeBend.down) < BEND_NOISE;
  if (still && bendsTheSame) return path.count;
  const laidBefore = path.laid;
  const wanted = 1 + Math.max(0, Math.floor((length - rule.freeEnd) / STATION));
  if (wanted < path.laid) path.laid = wanted;
  while (path.laid < wanted) layStation(path, bend, rule);
  path.length = length;
  path.freeBend = bend;
  drawFreeEnd(path, length, bend);
  return Math.min(laidBefore, path.laid);
};

const layStation = (path: LaidPath, bend: Bend, rule: LayRule): void => {
  const last = path.laid - 1;
  const pose = laidPose(path, last);
  const kept = rule.onGround ? levelPart(bend, pose.quaternion, rule.gravity) : bend;
  const next = follow(pose, arcOf(kept, STATION));
  makeRoom(path, path.laid + 1);
  const turned = Math.hypot(kept.right, kept.down) * STATION;
  writeLaid(
    path,
    path.laid,
    { ...next, quaternion: normalise(next.quaternion) },
    path.s[last]! + STATION,
    path.bend[last]! + turned,
  );
  path.laid++;
};

const drawFreeEnd = (path: LaidPath, length: number, bend: Bend): void => {
  const last = path.laid - 1;
  const joint = laidPose(path, last);
  const start = path.s[last]!;
  const free = Math.max(0, length - start);
  const steps = Math.ceil(free / STATION);
  const curvature = Math.hypot(bend.right, bend.down);
  makeRoom(path, path.laid + steps);
  path.tip = joint;
  for (let k = 1; k <= steps; k++) {
    const part = Math.min(free, k * STATION);
    path.tip = follow(joint, arcOf(bend, part));
    writeStation(path, last + k, path.tip, start + part, path.bend[last]! + curvature * part);
  }
  path.count = path.laid + steps;
};

/** The component of a bend in the level plane, in the local frame. */
const levelPart = (bend: Bend, attitude: Quaternion, gravity: Vec3): Bend => {
  const x = rotate(attitude, [1, 0, 0]);
  const y = rotate(attitude, [0, 1, 0]);
  const down = (v: Vec3) => v[0] * gravity[0] + v[1] * gravity[1] + v[2] * gravity[2];
  const [gx, gy] = [down(x), down(y)];
  const across = gx * gx + gy * gy;
  // Standing upright, every bend is level.
  if (across < 1e-9) return bend;
  const along = (bend.right * gx + bend.down * gy) / across;
  return { right: bend.right - along * gx, down: bend.down - along * gy };
};

const arcOf = (bend: Bend, length: number): Segment => ({
  length,
  curvature: Math.hypot(bend.right, bend.down),
  plane: Math.atan2(bend.down, bend.right),
});

const laidPose = (path: LaidPath, i: number): Pose => ({
  position: [path.position[3 * i]!, path.position[3 * i + 1]!, path.position[3 * i + 2]!],
  quaternion: [
    path.quaternion[4 * i]!,
    path.quaternion[4 * i + 1]!,
    path.quaternion[4 * i + 2]!,
    path.quaternion[4 * i + 3]!,
  ],
});

const writeLaid = (path: LaidPath, i: number, pose: Pose, s: number, bend: number): void => {
  writeStation(path, i, pose, s, bend);
  path.quaternion.set(pose.quaternion, 4 * i);
};

const makeRoom = (path: LaidPath, count: number): void => {
  if (path.s.length >= count) return;
  const room = Math.max(count, 2 * path.s.length);
  const grown = (old: Float64Array, width: number) => {
    const next = new Float64Array(width * room);
    next.set(old);
    return next;
  };
  path.s = grown(path.s, 1);
  path.bend = grown(path.bend, 1);
  path.position = grown(path.position, 3);
  path.tangent = grown(path.tangent, 3);
  path.quaternion = grown(path.quaternion, 4);
};
