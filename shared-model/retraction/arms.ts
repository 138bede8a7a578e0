import { type GravityLoad, gravityMoment } from '../mechanics/gravity-moment.ts';
import { createChordTree, updateChordTree } from '../shape/chord-tree.ts';
import {
  createFarthestSearch,
  type FarthestSearch,
  farthestFromLine,
  farthestFromTip,
  searchFarthest,
} from '../shape/farthest.ts';
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
  /** Rises with every update; the first station that the last one worked out again. */
  revision: number;
  changedFrom: number;
  readonly tangentSearch: FarthestSearch;
  readonly chordSearch: FarthestSearch;
}

export const createArms = (room: number, holding: Holding): Arms => {
  const tree = createChordTree();
  return {
    count: 0,
    tangent: new Float64Array(room),
    chord: new Float64Array(room),
    moment: new Float64Array(room),
    holding,
    revision: 0,
    changedFrom: 0,
    tangentSearch: createFarthestSearch(tree),
    chordSearch: createFarthestSearch(tree),
  };
};

/**
 * Brings `arms` up to date with `shape`, of which the stations below `from` are as they were. About O(log n) a changed
 * station for the arms, O(n) for gravity where a span hangs free.
 */
export const updateArms = (arms: Arms, shape: SampledShape, from: number): void => {
  if (arms.tangent.length < shape.count) {
    const room = Math.max(shape.count, 2 * arms.tangent.length);
    arms.tangent = grown(arms.tangent, room);
    arms.chord = grown(arms.chord, room);
    arms.moment = grown(arms.moment, room);
  }
  const first = Math.min(from, arms.count);
  updateChordTree(arms.tangentSearch.tree, shape.s, shape.position, shape.count - 1, first);
  for (let j = first; j < shape.count; j++) {
    arms.tangent[j] = tangentArm(shape, j, arms.tangentSearch);
    arms.chord[j] = chordArm(shape, j, arms.holding.setback, arms.chordSearch);
    arms.moment[j] = gravityMoment(shape, j, arms.holding.gravity);
  }
  arms.count = shape.count;
  arms.changedFrom = first;
  arms.revision++;
};

/** Works out one body length, whose station must have room, by one pass over the stations. */
export const updateStation = (arms: Arms, shape: SampledShape, j: number): void => {
  arms.tangent[j] = tangentArm(shape, j);
  arms.chord[j] = chordArm(shape, j, arms.holding.setback);
  arms.moment[j] = gravityMoment(shape, j, arms.holding.gravity);
  arms.changedFrom = Math.min(j, arms.changedFrom);
  arms.revision++;
};

/**
 * Largest distance of sections 0…tip from the line through the tip along its tangent [m].
 * @param search over the tree of this shape; without one, by one pass over the stations
 */
export const tangentArm = (shape: SampledShape, tip: number, search?: FarthestSearch): number => {
  const { tangent: t } = shape;
  return farthest(shape, tip, t[3 * tip]!, t[3 * tip + 1]!, t[3 * tip + 2]!, search);
};

/** Nearer than this the tip lies on the guide [m]. */
const ON_GUIDE = 1e-12;

/** Largest distance of sections 0…tip from the line between tip and guide [m]; `search` as above. */
export const chordArm = (
  shape: SampledShape,
  tip: number,
  setback: number,
  search?: FarthestSearch,
): number => {
  const { position: p, tangent: t } = shape;
  const x = p[0]! - setback * t[0]! - p[3 * tip]!;
  const y = p[1]! - setback * t[1]! - p[3 * tip + 1]!;
  const z = p[2]! - setback * t[2]! - p[3 * tip + 2]!;
  const d = Math.sqrt(x * x + y * y + z * z);
  // A tip that lies on the guide has no chord: every direction is one, and the farthest section is the arm.
  return d < ON_GUIDE ? farthestFromTip(shape, tip) : farthest(shape, tip, x / d, y / d, z / d, search);
};

const farthest = (
  shape: SampledShape,
  tip: number,
  ux: number,
  uy: number,
  uz: number,
  search: FarthestSearch | undefined,
): number =>
  search === undefined
    ? farthestFromLine(shape, tip, ux, uy, uz)
    : searchFarthest(search, shape, tip, ux, uy, uz);

const grown = (old: Float64Array, room: number): Float64Array => {
  const next = new Float64Array(room);
  next.set(old);
  return next;
};
