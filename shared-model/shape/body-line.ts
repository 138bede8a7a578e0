import type { BodyLine } from '../contract/frame.ts';
import type { LaidPath } from './laid-path.ts';

/** The body thinned to at most about `most` points for drawing, tip and joint of the free end kept; rounded to mm. */
export const bodyLine = (path: LaidPath, most = 400): BodyLine => {
  const stride = Math.max(1, Math.ceil(path.count / most));
  const points: number[] = [];
  let laid = 0;
  for (let i = 0; i < path.count; i++) {
    const joint = i === path.laid - 1;
    if (i % stride !== 0 && !joint && i !== path.count - 1) continue;
    if (i < path.laid) laid++;
    for (let axis = 0; axis < 3; axis++) points.push(Math.round(path.position[3 * i + axis]! * 1000) / 1000);
  }
  return { points, laid };
};
