/**
 * How far the stretches of a curve leave their chords: a binary hierarchy over stations 0…last. Node m of level k runs from
 * station m·LEAF·2ᵏ to the start of the next one, or to the last station, and knows the most by which a point of it differs
 * from the point of its chord at the same arc length; NaN where one is not finite. A convex function on the stretch is then at most the larger of its
 * values at the two ends, and what the deviation adds. Kept from tick to tick.
 */
export interface ChordTree {
  /** Last station of the curve. */
  last: number;
  /** One array a level, from the leaves up, of deviations [the unit of the points]. */
  readonly levels: Float64Array[];
}

/** Steps of a leaf: enough that a leaf is worth a look, few enough that a look is short. */
export const LEAF_BITS = 4;
export const LEAF = 1 << LEAF_BITS;

export const createChordTree = (): ChordTree => ({ last: 0, levels: [] });

/**
 * Brings the tree up to date with the curve's stations 0…`last`, of which those below `from` are as they were.
 * @param s arc length of each station [m]  @param points x, y, z of each
 */
export const updateChordTree = (
  tree: ChordTree,
  s: Float64Array,
  points: Float64Array,
  last: number,
  from: number,
): void => {
  const before = tree.last;
  tree.last = last;
  for (let k = 0, size = LEAF; k === 0 || size < 2 * last; k++, size *= 2) {
    const nodes = Math.ceil(last / size);
    const level = roomFor(tree.levels, k, nodes);
    // A node that ended at the last station of before ends elsewhere now.
    const first = Math.max(0, Math.floor((Math.min(from, before) - 1) / size));
    for (let m = first; m < nodes; m++)
      level[m] =
        k === 0
          ? leafDeviation(s, points, m * size, Math.min((m + 1) * size, last))
          : nodeDeviation(tree.levels[k - 1]!, s, points, m, size, last);
  }
};

const leafDeviation = (s: Float64Array, points: Float64Array, a: number, b: number): number => {
  // Zero, or NaN where an end is not finite: that must reach the root.
  let most = 0 * (offChord(s, points, a, b, a) + offChord(s, points, a, b, b));
  for (let i = a + 1; i < b && !Number.isNaN(most); i++) {
    const off = offChord(s, points, a, b, i);
    if (!(off <= most)) most = off;
  }
  return most;
};

/** The middle leaves the chord by so much, and the halves leave theirs by no more than the larger of theirs. */
const nodeDeviation = (
  below: Float64Array,
  s: Float64Array,
  points: Float64Array,
  m: number,
  size: number,
  last: number,
): number => {
  const a = m * size;
  const middle = a + size / 2;
  const left = below[2 * m]!;
  if (middle >= last) return left;
  const right = below[2 * m + 1]!;
  const halves = left >= right ? left : right;
  // Written so that a NaN of either half stays.
  return offChord(s, points, a, Math.min(a + size, last), middle) + (Number.isNaN(left) ? left : halves);
};

/** Distance of station i from the point of the chord a–b at the same arc length. */
const offChord = (s: Float64Array, p: Float64Array, a: number, b: number, i: number): number => {
  const step = s[b]! - s[a]!;
  const t = step > 0 ? (s[i]! - s[a]!) / step : 0;
  const x = p[3 * i]! - p[3 * a]! - t * (p[3 * b]! - p[3 * a]!);
  const y = p[3 * i + 1]! - p[3 * a + 1]! - t * (p[3 * b + 1]! - p[3 * a + 1]!);
  const z = p[3 * i + 2]! - p[3 * a + 2]! - t * (p[3 * b + 2]! - p[3 * a + 2]!);
  return Math.sqrt(x * x + y * y + z * z);
};

const roomFor = (levels: Float64Array[], k: number, nodes: number): Float64Array => {
  const level = levels[k];
  if (level !== undefined && level.length >= nodes) return level;
  const next = new Float64Array(Math.max(nodes, 2 * (level?.length ?? 4)));
  if (level !== undefined) next.set(level);
  levels[k] = next;
  return next;
};
