import type { SampledShape } from '../../../shared-model/shape/sampled-shape.ts';
import { sampleSegments } from '../../../shared-model/shape/segments.ts';

const winding =
  (curvature: (s: number) => number, plane: (s: number) => number) =>
  (length: number, step: number): SampledShape =>
    sampleSegments(
      Array.from({ length: Math.round(length / step) }, (_, i) => ({
        length: step,
        curvature: curvature(i * step),
        plane: plane(i * step),
      })),
      1,
    );

/** Long bodies of several kinds, of a length [m] and a distance of stations [m]. */
export const WINDINGS: Readonly<Record<string, (length: number, step: number) => SampledShape>> = {
  'winding left and right': winding(
    (s) => 0.25 * Math.sin(s / 3),
    (s) => 0.3 * Math.sin(s / 7),
  ),
  'one wide bend': winding(
    () => 0.02,
    () => 0,
  ),
  'a passage with two corners': winding(
    (s) => (s > 30 && s < 32 ? 0.6 : s > 60 && s < 61 ? -0.9 : 0.01 * Math.sin(s)),
    () => 0,
  ),
  straight: winding(
    () => 0,
    () => 0,
  ),
};
