import type { SampledShape } from '../shape/sampled-shape.ts';

/**
 * For every body length s_j: the largest distance [m] of any section 0…j from the line through station j along its
 * tangent, and from the straight line between station j and the guide. Kept between ticks; only what changed is redone.
 */
export interface Arms {
  count: number;
  tangent: Float64Array;
  chord: Float64Array;
}

export const createArms = (capacity: number): Arms => ({
  count: 0,
  tangent: new Float64Array(capacity),
  chord: new Float64Array(capacity),
});

/**
 * Brings `arms` up to date with `shape`, of which the stations below `from` are as they were. O(n) a changed station.
 * @param setback distance of the guide behind the base on the base tangent [m]
 */
export const updateArms = (arms: Arms, shape: SampledShape, from: number, setback: number): void => {
  if (arms.tangent.length < shape.count) {
    const room = Math.max(shape.count, 2 * arms.tangent.length);
    arms.tangent = grown(arms.tangent, room);
    arms.chord = grown(arms.chord, room);
  }
  for (let j = Math.min(from, arms.count); j < shape.count; j++) {
    arms.tangent[j] = tangentArm(shape, j);
    arms.chord[j] = chordArm(shape, j, setback);
  }
  arms.count = shape.count;
};

/** Largest distance of stations 0…tip from the line through the tip along its tangent [m]. */
export const tangentArm = (shape: SampledShape, tip: number): number => {
  const { tangent: t } = shape;
  return largestDistance(shape, tip, t[3 * tip]!, t[3 * tip + 1]!, t[3 * tip + 2]!);
};

/** Largest distance of stations 0…tip from the line between tip and guide [m]; zero where the two coincide. */
export const chordArm = (shape: SampledShape, tip: number, setback: number): number => {
  const { position: p, tangent: t } = shape;
  const x = p[0]! - setback * t[0]! - p[3 * tip]!;
  const y = p[1]! - setback * t[1]! - p[3 * tip + 1]!;
  const z = p[2]! - setback * t[2]! - p[3 * tip + 2]!;
  const d = Math.sqrt(x * x + y * y + z * z);
  // A tip that lies on the guide has no chord: every direction is one, and the farthest section is the arm.
  if (d < 1e-12) return largestDistance(shape, tip, 0, 0, 0);
  return largestDistance(shape, tip, x / d, y / d, z / d);
};

/** Largest |(p_i − p_tip) × u|, or |p_i − p_tip| for u = 0. */
const largestDistance = (shape: SampledShape, tip: number, ux: number, uy: number, uz: number): number => {
  const { position: p } = shape;
  const px = p[3 * tip]!;
  const py = p[3 * tip + 1]!;
  const pz = p[3 * tip + 2]!;
  let largest = 0;
  for (let i = 0; i < 3 * tip; i += 3) {
    const x = p[i]! - px;
    const y = p[i + 1]! - py;
    const z = p[i + 2]! - pz;
    const along = x * ux + y * uy + z * uz;
    const across = x * x + y * y + z * z - along * along;
    // Written so that a NaN station makes the arm NaN, which refuses, and is never passed over.
    if (!(across <= largest)) largest = across;
  }
  return Math.sqrt(Math.max(0, largest));
};

const grown = (old: Float64Array, room: number): Float64Array => {
  const next = new Float64Array(room);
  next.set(old);
  return next;
};
