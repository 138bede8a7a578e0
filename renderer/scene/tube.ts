/** Corners around the tube. */
export const SIDES = 10;

/** Buffers of a tube of at most `points` rings, written in place. */
export interface TubeBuffers {
  readonly points: number;
  readonly position: Float32Array;
  readonly normal: Float32Array;
  readonly index: Uint32Array;
}

export const createTube = (points: number): TubeBuffers => {
  const index = new Uint32Array(6 * SIDES * Math.max(0, points - 1));
  let k = 0;
  for (let ring = 0; ring < points - 1; ring++)
    for (let side = 0; side < SIDES; side++) {
      const a = ring * SIDES + side;
      const b = ring * SIDES + ((side + 1) % SIDES);
      index.set([a, a + SIDES, b, b, a + SIDES, b + SIDES], k);
      k += 6;
    }
  return {
    points,
    position: new Float32Array(3 * SIDES * points),
    normal: new Float32Array(3 * SIDES * points),
    index,
  };
};

/**
 * Lays the tube along `line` (flat x, y, z) and returns how many indices to draw. Rings are carried along by parallel
 * transport; repeated points keep the ring before them, so that nothing is ever not a number.
 */
export const layTube = (tube: TubeBuffers, line: readonly number[], radius: number): number => {
  const count = Math.min(tube.points, Math.floor(line.length / 3));
  if (count < 2) return 0;
  let tangent: V = [0, 0, 1];
  let across: V = [1, 0, 0];
  for (let i = 0; i < count; i++) {
    tangent = tangentAt(line, i, count) ?? tangent;
    across =
      unit(reject(across, tangent)) ??
      unit(reject(Math.abs(tangent[0]) < 0.9 ? [1, 0, 0] : [0, 1, 0], tangent)) ??
      across;
    const up = cross(tangent, across);
    for (let side = 0; side < SIDES; side++) {
      const angle = (2 * Math.PI * side) / SIDES;
      const [c, s] = [Math.cos(angle), Math.sin(angle)];
      const at = 3 * (i * SIDES + side);
      for (let axis = 0; axis < 3; axis++) {
        const normal = c * across[axis]! + s * up[axis]!;
        tube.normal[at + axis] = normal;
        tube.position[at + axis] = line[3 * i + axis]! + radius * normal;
      }
    }
  }
  return 6 * SIDES * (count - 1);
};

type V = [number, number, number];

const tangentAt = (line: readonly number[], i: number, count: number): V | null => {
  const a = 3 * Math.max(0, i - 1);
  const b = 3 * Math.min(count - 1, i + 1);
  return unit([line[b]! - line[a]!, line[b + 1]! - line[a + 1]!, line[b + 2]! - line[a + 2]!]);
};
const unit = ([x, y, z]: V): V | null => {
  const n = Math.hypot(x, y, z);
  return n > 1e-9 ? [x / n, y / n, z / n] : null;
};
const reject = (v: V, along: V): V => {
  const d = v[0] * along[0] + v[1] * along[1] + v[2] * along[2];
  return [v[0] - d * along[0], v[1] - d * along[1], v[2] - d * along[2]];
};
const cross = (a: V, b: V): V => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
