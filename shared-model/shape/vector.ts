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
