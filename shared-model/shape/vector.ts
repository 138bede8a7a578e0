/** A point or direction in metres or unitless: x right, y down, z ahead along the base tangent. */
export type Vec3 = readonly [x: number, y: number, z: number];

/** Unit quaternion, scalar part first. */
export type Quaternion = readonly [w: number, x: number, y: number, z: number];

/** Position [m] and attitude; the attitude's z axis is the body tangent. */
export interface Pose {
  readonly position: Vec3;
  readonly quaternion: Quaternion;
}

/**
 * An arc of constant curvature. `curvature` κ [1/m] ≥ 0 bends towards direction `plane` φ [rad] of the local
 * cross-section (φ = 0 towards local +x, φ = π/2 towards local +y); (κ, φ) ≡ (−κ, φ + π). `length` in metres.
 */
export interface Segment {
  readonly length: number;
  readonly curvature: number;
  readonly plane: number;
}

export const add = (a: Vec3, b: Vec3): Vec3 => [a[0] + b[0], a[1] + b[1], a[2] + b[2]];
export const subtract = (a: Vec3, b: Vec3): Vec3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
export const scale = (a: Vec3, factor: number): Vec3 => [a[0] * factor, a[1] * factor, a[2] * factor];
export const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
export const cross = (a: Vec3, b: Vec3): Vec3 => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
export const length = (a: Vec3): number => Math.hypot(a[0], a[1], a[2]);

export const IDENTITY: Quaternion = [1, 0, 0, 0];

/** Hamilton product: first `b`, then `a`. */
export const multiply = (a: Quaternion, b: Quaternion): Quaternion => [
  a[0] * b[0] - a[1] * b[1] - a[2] * b[2] - a[3] * b[3],
  a[0] * b[1] + a[1] * b[0] + a[2] * b[3] - a[3] * b[2],
  a[0] * b[2] - a[1] * b[3] + a[2] * b[0] + a[3] * b[1],
  a[0] * b[3] + a[1] * b[2] - a[2] * b[1] + a[3] * b[0],
];

/** Rotates `v` by the unit quaternion `q`. */
export const rotate = (q: Quaternion, v: Vec3): Vec3 => {
  const axis: Vec3 = [q[1], q[2], q[3]];
  const t = scale(cross(axis, v), 2);
  return add(add(v, scale(t, q[0])), cross(axis, t));
};

/** Unit quaternion nearest to `q`; drift of many products is taken out here. */
export const normalise = (q: Quaternion): Quaternion => {
  const n = Math.hypot(q[0], q[1], q[2], q[3]);
  return [q[0] / n, q[1] / n, q[2] / n, q[3] / n];
};
