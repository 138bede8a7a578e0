import { type ChordTree, LEAF, LEAF_BITS } from './chord-tree.ts';
import type { SampledShape } from './sampled-shape.ts';

// The distance of a section from the line through station `tip` along the unit vector u is |(p − p_tip) × u|.

/**
 * Largest distance [m] of the sections 0…tip of a body from the line through station `tip` along the unit vector
 * (ux, uy, uz). Met also where it lies between two stations. One pass over the stations: the plain way.
 */
export const farthestFromLine = (
  shape: SampledShape,
  tip: number,
  ux: number,
  uy: number,
  uz: number,
): number => {
  const { position: p } = shape;
  const px = p[3 * tip]!;
  const py = p[3 * tip + 1]!;
  const pz = p[3 * tip + 2]!;
  let largest = 0;
  let at = tip;
  for (let i = 0; i < tip; i++) {
    const square = squareAt(p, i, px, py, pz, ux, uy, uz);
    // Written so that a NaN station makes the answer NaN, which refuses, and is never passed over.
    if (square <= largest) continue;
    largest = square;
    at = i;
    if (Number.isNaN(square)) break;
  }
  return Math.sqrt(crestBeside(shape, tip, ux, uy, uz, at, largest));
};

/** Largest distance [m] of the sections 0…tip from station `tip` itself. */
export const farthestFromTip = ({ position: p }: SampledShape, tip: number): number => {
  let largest = 0;
  for (let i = 0; i < tip; i++) {
    const x = p[3 * i]! - p[3 * tip]!;
    const y = p[3 * i + 1]! - p[3 * tip + 1]!;
    const z = p[3 * i + 2]! - p[3 * tip + 2]!;
    const square = x * x + y * y + z * z;
    if (!(square <= largest)) largest = square;
    if (Number.isNaN(square)) break;
  }
  return Math.sqrt(largest);
};

/** A search over a hierarchy, with its working space and the station it last found. Not to be shared by two at once. */
export interface FarthestSearch {
  readonly tree: ChordTree;
  /** The farthest station of the last search: where the next, of a tip nearby, does best to begin. */
  at: number;
  readonly level: Int32Array;
  readonly node: Int32Array;
  readonly squareAtStart: Float64Array;
  readonly squareAtEnd: Float64Array;
}

/** Two nodes a level may wait; 2⁵⁰ stations are enough. */
const STACK = 100;

export const createFarthestSearch = (tree: ChordTree): FarthestSearch => ({
  tree,
  at: 0,
  level: new Int32Array(STACK),
  node: new Int32Array(STACK),
  squareAtStart: new Float64Array(STACK),
  squareAtEnd: new Float64Array(STACK),
});

/** A node that could raise the answer by less than this is not opened [m]. */
const TOLERANCE = 1e-12;

/**
 * The same as `farthestFromLine`, over the tree of the shape's positions: branch and bound, begun at the crest that the
 * last search found. O(log n) where one crest stands out; O(n) where all are alike, as on a helix.
 */
export const searchFarthest = (
  search: FarthestSearch,
  shape: SampledShape,
  tip: number,
  ux: number,
  uy: number,
  uz: number,
): number => {
  const { tree, level, node, squareAtStart, squareAtEnd } = search;
  const { levels, last } = tree;
  const { position: p } = shape;
  const px = p[3 * tip]!;
  const py = p[3 * tip + 1]!;
  const pz = p[3 * tip + 2]!;
  let largest = 0;
  let at = tip;
  if (search.at < tip) {
    at = search.at;
    largest = squareAt(p, at, px, py, pz, ux, uy, uz);
    for (let step = 1; step >= -1; step -= 2)
      for (let i = at + step; i >= 0 && i < tip; i += step) {
        const square = squareAt(p, i, px, py, pz, ux, uy, uz);
        if (!(square > largest)) break;
        largest = square;
        at = i;
      }
  }
  const leaves = (tip + LEAF - 1) >> LEAF_BITS;
  const top = leaves <= 1 ? 0 : 32 - Math.clz32(leaves - 1);
  // A station that is not finite makes the answer NaN, which refuses.
  if (tip > 0 && !(levels[top]![0]! < Number.POSITIVE_INFINITY)) return Number.NaN;
  let end = LEAF << top;
  if (end > last) end = last;
  // The node in hand: level, number, and the squares at its ends.
  let k = top;
  let m = 0;
  let atStart = squareAt(p, 0, px, py, pz, ux, uy, uz);
  let atEnd = squareAt(p, end, px, py, pz, ux, uy, uz);
  if (tip > 0 && !(atStart <= largest)) {
    largest = atStart;
    at = 0;
  }
  let bar = Math.sqrt(largest) + TOLERANCE;
  let waiting = 0;
  while (tip > 0) {
    const start = (m << LEAF_BITS) << k;
    // No station of the node reaches higher than the larger of its ends and the deviation.
    const left = bar - levels[k]![m]!;
    const low = left > 0 && atStart <= left * left && atEnd <= left * left;
    if (!low && k > 0) {
      k--;
      m *= 2;
      const middle = start + (LEAF << k);
      if (middle >= last) continue;
      const atMiddle = squareAt(p, middle, px, py, pz, ux, uy, uz);
      if (middle < tip) {
        if (!(atMiddle <= largest)) {
          largest = atMiddle;
          at = middle;
          bar = Math.sqrt(largest) + TOLERANCE;
        }
        level[waiting] = k;
        node[waiting] = m + 1;
        squareAtStart[waiting] = atMiddle;
        squareAtEnd[waiting] = atEnd;
        waiting++;
      }
      atEnd = atMiddle;
      continue;
    }
    if (!low) {
      let stop = start + LEAF;
      if (stop > last) stop = last;
      if (stop >= tip) stop = tip - 1;
      for (let i = start + 1; i <= stop; i++) {
        const square = squareAt(p, i, px, py, pz, ux, uy, uz);
        if (square <= largest) continue;
        largest = square;
        at = i;
      }
      bar = Math.sqrt(largest) + TOLERANCE;
    }
    if (waiting === 0) break;
    waiting--;
    k = level[waiting]!;
    m = node[waiting]!;
    atStart = squareAtStart[waiting]!;
    atEnd = squareAtEnd[waiting]!;
  }
  search.at = at;
  return Math.sqrt(crestBeside(shape, tip, ux, uy, uz, at, largest));
};

/** |(p_i − p_tip) × u|² */
const squareAt = (
  p: Float64Array,
  i: number,
  px: number,
  py: number,
  pz: number,
  ux: number,
  uy: number,
  uz: number,
): number => {
  const x = p[3 * i]! - px;
  const y = p[3 * i + 1]! - py;
  const z = p[3 * i + 2]! - pz;
  const a = y * uz - z * uy;
  const b = z * ux - x * uz;
  const c = x * uy - y * ux;
  return a * a + b * b + c * c;
};

/** Derivative of that square along the body. */
const slopeAt = (
  { position: p, tangent: t }: SampledShape,
  tip: number,
  ux: number,
  uy: number,
  uz: number,
  i: number,
): number => {
  const x = p[3 * i]! - p[3 * tip]!;
  const y = p[3 * i + 1]! - p[3 * tip + 1]!;
  const z = p[3 * i + 2]! - p[3 * tip + 2]!;
  const along = x * ux + y * uy + z * uz;
  return (
    2 * (t[3 * i]! * (x - along * ux) + t[3 * i + 1]! * (y - along * uy) + t[3 * i + 2]! * (z - along * uz))
  );
};

/** The square at the crest beside station `at`, whose own square is `largest`. */
const crestBeside = (
  shape: SampledShape,
  tip: number,
  ux: number,
  uy: number,
  uz: number,
  at: number,
  largest: number,
): number => {
  const slope = slopeAt(shape, tip, ux, uy, uz, at);
  const beside = slope > 0 ? at + 1 : at - 1;
  if (beside < 0 || beside > tip) return largest;
  const { position: p } = shape;
  const square = squareAt(p, beside, p[3 * tip]!, p[3 * tip + 1]!, p[3 * tip + 2]!, ux, uy, uz);
  const slopeBeside = slopeAt(shape, tip, ux, uy, uz, beside);
  const h = Math.abs(shape.s[beside]! - shape.s[at]!);
  const crest =
    beside > at
      ? crestOfCubic(largest, h * slope, square, h * slopeBeside)
      : crestOfCubic(square, h * slopeBeside, largest, h * slope);
  return Math.max(largest, crest);
};

/** Largest value on 0…1 of the cubic with values a, b and slopes p, q at the ends, where it rises at 0 and falls at 1. */
const crestOfCubic = (a: number, p: number, b: number, q: number): number => {
  if (!(p > 0 && q < 0)) return Math.max(a, b);
  const c = 3 * (b - a) - 2 * p - q;
  const d = 2 * (a - b) + p + q;
  const x = p / (Math.sqrt(c * c - 3 * d * p) - c);
  return a + x * (p + x * (c + x * d));
};
