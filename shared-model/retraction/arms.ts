import { type GravityLoad, gravityMoment } from '../mechanics/gravity-moment.ts';
import { farthestFromLine } from '../shape/farthest.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';

/** How a body is held: where the tail guide is, and what hangs on the body. */
export interface Holding {
  /** a, distance of the guide behind the base on the base tangent [m]. */
  readonly setback: number;
  readonly gravity: GravityLoad;
}

/**
 * What bends the body, for every body length s_j: the largest distance [m] of any section 0…j from the line through
 * station j along its tangent, the one from the straight line between station j and the guide, and the largest bending
 * moment of gravity [N·m]. Kept between ticks; only what changed is worked out again.
 */
export interface Arms {
  count: number;
  tangent: Float64Array;
  chord: Float64Array;
  moment: Float64Array;
  readonly holding: Holding;
}

export const createArms = (room: number, holding: Holding): Arms => ({
  count: 0,
  tangent: new Float64Array(room),
  chord: new Float64Array(room),
  moment: new Float64Array(room),
  holding,
});

/** Brings `arms` up to date with `shape`, of which the stations below `from` are as they were. O(n) a changed station. */
export const updateArms = (arms: Arms, shape: SampledShape, from: number): void => {
  if (arms.tangent.length < shape.count) {
    const room = Math.max(shape.count, 2 * arms.tangent.length);
    arms.tangent = grown(arms.tangent, room);
    arms.chord = grown(arms.chord, room);
    arms.moment = grown(arms.moment, room);
  }
  for (let j = Math.min(from, arms.count); j < shape.count; j++) updateStation(arms, shape, j);
  arms.count = shape.count;
};

/** Works out one body length, whose station must have room. */
export const updateStation = (arms: Arms, shape: SampledShape, j: number): void => {
  arms.tangent[j] = tangentArm(shape, j);
  arms.chord[j] = chordArm(shape, j, arms.holding.setback);
  arms.moment[j] = gravityMoment(shape, j, arms.holding.gravity);
};

/** Largest distance of sections 0…tip from the line through the tip along its tangent [m]. */
export const tangentArm = (shape: SampledShape, tip: number): number => {
  const { tangent: t } = shape;
  return farthestFromLine(shape, tip, [t[3 * tip]!, t[3 * tip + 1]!, t[3 * tip + 2]!]);
};

/** Largest distance of sections 0…tip from the line between tip and guide [m]. */
export const chordArm = (shape: SampledShape, tip: number, setback: number): number => {
  const { position: p, tangent: t } = shape;
  const x = p[0]! - setback * t[0]! - p[3 * tip]!;
  const y = p[1]! - setback * t[1]! - p[3 * tip + 1]!;
  const z = p[2]! - setback * t[2]! - p[3 * tip + 2]!;
  const d = Math.sqrt(x * x + y * y + z * z);
  // A tip that lies on the guide has no chord: every direction is one, and the farthest section is the arm.
  return farthestFromLine(shape, tip, d < 1e-12 ? [0, 0, 0] : [x / d, y / d, z / d]);
};

const grown = (old: Float64Array, room: number): Float64Array => {
  const next = new Float64Array(room);
  next.set(old);
  return next;
};
