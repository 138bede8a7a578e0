import type { SampledShape } from './sampled-shape.ts';
import type { Vec3 } from './vector.ts';

/**
 * Largest distance [m] of the sections 0…tip of a body from the line through station `tip` along the unit vector `u`;
 * from station `tip` itself for u = 0. Met also where it lies between two stations.
 */
export const farthestFromLine = (shape: SampledShape, tip: number, u: Vec3): number => {
  let largest = 0;
  let at = tip;
  for (let i = 0; i < tip; i++) {
    const square = squareAt(shape, tip, u, i);
    // Written so that a NaN station makes the answer NaN, which refuses, and is never passed over.
    if (square <= largest) continue;
    largest = square;
    at = i;
    if (Number.isNaN(square)) break;
  }
  return Math.sqrt(crestBeside(shape, tip, u, at, largest));
};

/** |(p_i − p_tip) × u|², or |p_i − p_tip|² for u = 0. */
const squareAt = (shape: SampledShape, tip: number, u: Vec3, i: number): number => {
  const { position: p } = shape;
  const x = p[3 * i]! - p[3 * tip]!;
  const y = p[3 * i + 1]! - p[3 * tip + 1]!;
  const z = p[3 * i + 2]! - p[3 * tip + 2]!;
  const along = x * u[0] + y * u[1] + z * u[2];
  return x * x + y * y + z * z - along * along;
};

/** Derivative of that square along the body. */
const slopeAt = (shape: SampledShape, tip: number, u: Vec3, i: number): number => {
  const { position: p, tangent: t } = shape;
  const x = p[3 * i]! - p[3 * tip]!;
  const y = p[3 * i + 1]! - p[3 * tip + 1]!;
  const z = p[3 * i + 2]! - p[3 * tip + 2]!;
  const along = x * u[0] + y * u[1] + z * u[2];
  return (
    2 *
    (t[3 * i]! * (x - along * u[0]) + t[3 * i + 1]! * (y - along * u[1]) + t[3 * i + 2]! * (z - along * u[2]))
  );
};

/** The square at the crest beside station `at`, whose own square is `largest`. */
const crestBeside = (shape: SampledShape, tip: number, u: Vec3, at: number, largest: number): number => {
  const low = slopeAt(shape, tip, u, at) > 0 ? at : at - 1;
  if (low < 0 || low >= tip) return largest;
  const h = shape.s[low + 1]! - shape.s[low]!;
  const [a, b] = [squareAt(shape, tip, u, low), squareAt(shape, tip, u, low + 1)];
  const [p, q] = [h * slopeAt(shape, tip, u, low), h * slopeAt(shape, tip, u, low + 1)];
  return Math.max(largest, crestOfCubic(a, p, b, q));
};

/** Largest value on 0…1 of the cubic with values a, b and slopes p, q at the ends, where it rises at 0 and falls at 1. */
const crestOfCubic = (a: number, p: number, b: number, q: number): number => {
  if (!(p > 0 && q < 0)) return Math.max(a, b);
  const c = 3 * (b - a) - 2 * p - q;
  const d = 2 * (a - b) + p + q;
  const x = p / (Math.sqrt(c * c - 3 * d * p) - c);
  return a + x * (p + x * (c + x * d));
};
