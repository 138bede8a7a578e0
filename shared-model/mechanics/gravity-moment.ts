import type { SampledShape } from '../shape/sampled-shape.ts';
import { cross, dot, type Vec3 } from '../shape/vector.ts';

/** What hangs on a body. SI; `direction` is the unit vector of gravity in the base frame. */
export interface GravityLoad {
  /** Weight per metre [N/m] and weight at the tip [N]. */
  readonly weight: number;
  readonly payload: number;
  readonly direction: Vec3;
  /** Arc length from the base up to which ground carries the body [m]; Infinity: all of it. */
  readonly supported: number;
}

/**
 * Largest bending moment of gravity on the unsupported span of a body cut at station `tip` [N·m], torsion dropped:
 * over sections s ≥ supported, |M − (M·t)t| with M = (w∫(p − p_s)dσ + payload·(p_tip − p_s)) × g.
 */
export const gravityMoment = (shape: SampledShape, tip: number, load: GravityLoad): number => {
  if (load.supported >= shape.s[tip]! || (load.weight === 0 && load.payload === 0)) return 0;
  let largest = 0;
  // First moment and length of what hangs beyond the section, gathered from the tip inwards.
  let first: Vec3 = [0, 0, 0];
  let hanging = 0;
  const end = pointAt(shape, tip);
  for (let i = tip; i >= 0; i--) {
    const p = pointAt(shape, i);
    if (i < tip) {
      const ds = shape.s[i + 1]! - shape.s[i]!;
      const q = pointAt(shape, i + 1);
      first = [
        first[0] + ((p[0] + q[0]) / 2) * ds,
        first[1] + ((p[1] + q[1]) / 2) * ds,
        first[2] + ((p[2] + q[2]) / 2) * ds,
      ];
      hanging += ds;
    }
    if (shape.s[i]! < load.supported) break;
    const force = load.weight;
    const lever: Vec3 = [
      force * (first[0] - hanging * p[0]) + load.payload * (end[0] - p[0]),
      force * (first[1] - hanging * p[1]) + load.payload * (end[1] - p[1]),
      force * (first[2] - hanging * p[2]) + load.payload * (end[2] - p[2]),
    ];
    const moment = cross(lever, load.direction);
    const torsion = dot(moment, tangentAt(shape, i));
    const bending = dot(moment, moment) - torsion * torsion;
    if (!(bending <= largest)) largest = bending;
  }
  return Math.sqrt(Math.max(0, largest));
};

const pointAt = (shape: SampledShape, i: number): Vec3 => [
  shape.position[3 * i]!,
  shape.position[3 * i + 1]!,
  shape.position[3 * i + 2]!,
];
const tangentAt = (shape: SampledShape, i: number): Vec3 => [
  shape.tangent[3 * i]!,
  shape.tangent[3 * i + 1]!,
  shape.tangent[3 * i + 2]!,
];
