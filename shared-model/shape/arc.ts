import { add, multiply, type Pose, type Quaternion, rotate, type Segment, type Vec3 } from './vector.ts';

/** sin(x)/x, exact at 0. */
const sinc = (x: number): number => (Math.abs(x) < 1e-8 ? 1 - (x * x) / 6 : Math.sin(x) / x);

/** Where an arc of length ℓ [m], curvature κ [1/m] in plane φ [rad] leads from the origin along +z: the closed form. */
export const arcEnd = (segment: Segment): Pose => {
  const { length, curvature, plane } = segment;
  const angle = curvature * length;
  // (1 − cos x)/x = sin(x/2)·sinc(x/2) keeps its digits near x = 0.
  const across = length * Math.sin(angle / 2) * sinc(angle / 2);
  const c = Math.cos(plane);
  const s = Math.sin(plane);
  return {
    position: [across * c, across * s, length * sinc(angle)],
    quaternion: bendQuaternion(angle, c, s),
  };
};

/** Rz(φ)·Ry(angle)·Rz(−φ): a turn by `angle` of the tangent towards (cos φ, sin φ, 0). */
const bendQuaternion = (angle: number, c: number, s: number): Quaternion => {
  const half = Math.sin(angle / 2);
  return [Math.cos(angle / 2), -s * half, c * half, 0];
};

/** The pose reached from `from` by following `segment`. */
export const follow = (from: Pose, segment: Segment): Pose => {
  const end = arcEnd(segment);
  return {
    position: add(from.position, rotate(from.quaternion, end.position)),
    quaternion: multiply(from.quaternion, end.quaternion),
  };
};

/** The tangent (local z) of a pose. */
export const tangentOf = (pose: Pose): Vec3 => rotate(pose.quaternion, [0, 0, 1]);
