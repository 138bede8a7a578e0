import type { SampledShape } from '../shape/sampled-shape.ts';
import { allocateShape } from '../shape/segments.ts';
import { type Arms, createArms, updateArms } from './arms.ts';

/** A body that might be, with its arms. */
export interface OtherBody {
  readonly shape: SampledShape;
  readonly arms: Arms;
}

/** The same body with everything beyond station `from` lying straight ahead of it. O(n) a straightened station. */
export const straightenedTip = (body: OtherBody, from: number): OtherBody => {
  const { shape, arms } = pick(body, 1);
  const { s, position, tangent, bend, count } = shape;
  for (let i = from + 1; i < count; i++) {
    const beyond = s[i]! - s[from]!;
    bend[i] = bend[from]!;
    for (let axis = 0; axis < 3; axis++) {
      const along = tangent[3 * from + axis]!;
      tangent[3 * i + axis] = along;
      position[3 * i + axis] = position[3 * from + axis]! + beyond * along;
    }
  }
  updateArms(arms, shape, from + 1);
  return { shape, arms };
};

/** The same body by about `most` of its stations, base and tip among them: quick to search on, not to permit by. */
export const thinned = (body: OtherBody, most: number): OtherBody =>
  pick(body, Math.max(1, Math.ceil(body.shape.count / most)));

/** A copy of every `stride`th station, counted from the tip, and of the base. */
const pick = ({ shape, arms }: OtherBody, stride: number): OtherBody => {
  const tip = shape.count - 1;
  const count = Math.ceil(tip / stride) + 1;
  const picked = allocateShape(count);
  const pickedArms = createArms(count, arms.holding);
  pickedArms.count = count;
  for (let k = 0; k < count; k++) {
    const i = Math.max(0, tip - (count - 1 - k) * stride);
    picked.s[k] = shape.s[i]!;
    picked.bend[k] = shape.bend[i]!;
    for (let axis = 0; axis < 3; axis++) {
      picked.position[3 * k + axis] = shape.position[3 * i + axis]!;
      picked.tangent[3 * k + axis] = shape.tangent[3 * i + axis]!;
    }
    pickedArms.tangent[k] = arms.tangent[i]!;
    pickedArms.chord[k] = arms.chord[i]!;
    pickedArms.moment[k] = arms.moment[i]!;
  }
  return { shape: picked, arms: pickedArms };
};
