import { follow, tangentOf } from './arc.ts';
import type { SampledShape } from './sampled-shape.ts';
import { IDENTITY, normalise, type Pose, type Segment } from './vector.ts';

export const BASE_POSE: Pose = { position: [0, 0, 0], quaternion: IDENTITY };

/** Pose of the tip of a body made of arcs of constant curvature, frames by parallel transport. */
export const tipPose = (segments: readonly Segment[]): Pose => {
  const tip = segments.reduce(follow, BASE_POSE);
  return { position: tip.position, quaternion: normalise(tip.quaternion) };
};

/**
 * Samples a body of arcs: stations at every joint, no two further apart than `spacing` [m] nor with a sagitta above
 * `sagitta` [m], so that the largest distance between any point and a line is met to within `sagitta`.
 */
export const sampleSegments = (
  segments: readonly Segment[],
  spacing: number,
  sagitta = Number.POSITIVE_INFINITY,
): SampledShape => {
  const steps = segments.map((segment) => stepsOf(segment, spacing, sagitta));
  const shape = allocateShape(steps.reduce((sum, n) => sum + n, 1));
  let joint = BASE_POSE;
  let [s, bend, station] = [0, 0, 0];
  writeStation(shape, station++, joint, s, bend);
  segments.forEach((segment, i) => {
    const n = steps[i] as number;
    for (let k = 1; k <= n; k++) {
      const part = { ...segment, length: (segment.length * k) / n };
      const pose = follow(joint, part);
      writeStation(shape, station++, pose, s + part.length, bend + Math.abs(part.curvature) * part.length);
    }
    if (n === 0) return;
    joint = follow(joint, segment);
    s += segment.length;
    bend += Math.abs(segment.curvature) * segment.length;
  });
  return shape;
};

/** The first `length` metres of a chain of arcs. */
export const cutSegments = (segments: readonly Segment[], length: number): Segment[] => {
  const cut: Segment[] = [];
  let left = length;
  for (const one of segments) {
    if (!(left > 0)) break;
    cut.push({ ...one, length: Math.min(one.length, left) });
    left -= one.length;
  }
  return cut;
};

/** A sampled body of arcs cut at `length` [m]: its stations below that, and one where its tip then is. */
export const cutShape = (shape: SampledShape, segments: readonly Segment[], length: number): SampledShape => {
  let kept = 1;
  while (kept < shape.count && shape.s[kept]! < length) kept++;
  const cut = allocateShape(length > 0 ? kept + 1 : 1);
  cut.s.set(shape.s.subarray(0, kept));
  cut.bend.set(shape.bend.subarray(0, kept));
  cut.position.set(shape.position.subarray(0, 3 * kept));
  cut.tangent.set(shape.tangent.subarray(0, 3 * kept));
  if (!(length > 0)) return cut;
  const last = cutSegments(segments, length).at(-1);
  const curvature = Math.abs(last?.curvature ?? 0);
  const bend = shape.bend[kept - 1]! + curvature * (length - shape.s[kept - 1]!);
  writeStation(cut, kept, tipPose(cutSegments(segments, length)), length, bend);
  return cut;
};

/** Room for `count` stations. */
export const allocateShape = (count: number): SampledShape => ({
  count,
  s: new Float64Array(count),
  position: new Float64Array(3 * count),
  tangent: new Float64Array(3 * count),
  bend: new Float64Array(count),
});

/** Writes one station in place. */
export const writeStation = (
  shape: SampledShape,
  station: number,
  pose: Pose,
  s: number,
  bend: number,
): void => {
  shape.s[station] = s;
  shape.bend[station] = bend;
  shape.position.set(pose.position, 3 * station);
  shape.tangent.set(tangentOf(pose), 3 * station);
};

/** Steps of one arc; a length or curvature that is not a number gets one station, which then is not a number either. */
const stepsOf = ({ length, curvature }: Segment, spacing: number, sagitta: number): number => {
  if (length === 0) return 0;
  const bySagitta = Math.sqrt((8 * sagitta) / Math.abs(curvature));
  const steps = Math.ceil(length / (bySagitta < spacing ? bySagitta : spacing));
  return Number.isNaN(steps) ? 1 : steps;
};
