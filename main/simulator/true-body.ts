import { nearestPassage, type PlanPose, stepAlong, type Walls } from './walls.ts';

/** Distance of two points of the true body [m]. */
const STEP = 0.02;

/** How the body truly lies: a laid part on the floor plan and a free end that bends, both within the walls. */
export interface TrueBody {
  readonly laid: PlanPose[];
  free: PlanPose[];
  /** The free end stands against a wall before its full length. */
  blocked: boolean;
  /** Lift of the tip above the floor [m] and its pitch, up positive [rad]. */
  lift: number;
  pitch: number;
}

export const createTrueBody = (): TrueBody => ({
  laid: [{ x: 0, z: 0, heading: 0 }],
  free: [],
  blocked: false,
  lift: 0,
  pitch: 0,
});

/** Lies the body out to `length` [m] with the present bend of its free end (right and up) [1/m]. */
export const layOut = (
  body: TrueBody,
  walls: Walls,
  length: number,
  freeEnd: number,
  bend: { readonly right: number; readonly up: number },
  radius: number,
): void => {
  const wanted = 1 + Math.max(0, Math.floor((length - freeEnd) / STEP));
  while (body.laid.length > wanted) body.laid.pop();
  while (body.laid.length < wanted) {
    const next = stepAlong(walls, body.laid.at(-1)!, bend.right, STEP, radius);
    if (next === null) break;
    body.laid.push(next);
  }
  const free = Math.max(0, length - (body.laid.length - 1) * STEP);
  body.free = [];
  body.blocked = false;
  let pose = body.laid.at(-1)!;
  for (let done = 0; done < free - 1e-9; done += STEP) {
    const next = stepAlong(walls, pose, bend.right, Math.min(STEP, free - done), radius);
    if (next === null) {
      body.blocked = true;
      break;
    }
    body.free.push(next);
    pose = next;
  }
  const span = Math.min(free, freeEnd);
  const ceiling = Math.max(0, nearestPassage(walls, pose.x, pose.z).height - 2 * radius);
  const rise = 0.5 * bend.up * span * span;
  body.lift = Math.min(ceiling, Math.max(0, rise));
  body.pitch = rise > 0 && rise < ceiling ? bend.up * span : 0;
};

export const tipOf = (body: TrueBody): PlanPose => body.free.at(-1) ?? body.laid.at(-1)!;

/** Total bend ∫|dθ| from base to tip [rad]. */
export const totalBend = (body: TrueBody): number => {
  let sum = 0;
  let before = body.laid[0]!;
  for (const points of [body.laid, body.free])
    for (const point of points) {
      sum += Math.abs(point.heading - before.heading);
      before = point;
    }
  return sum;
};

/** Farthest any point lies from the line through the tip along its heading, or from the line tip to base [m]. */
export const largestArm = (body: TrueBody): number => {
  const tip = tipOf(body);
  const chord = Math.atan2(tip.x, tip.z);
  let arm = 0;
  for (const points of [body.laid, body.free])
    for (const { x, z } of points)
      for (const direction of [tip.heading, chord])
        arm = Math.max(arm, Math.abs((x - tip.x) * Math.cos(direction) - (z - tip.z) * Math.sin(direction)));
  return arm;
};
