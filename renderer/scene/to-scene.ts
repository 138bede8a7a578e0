/** Base frame (x right, y down, z ahead) to the scene's (x right, y up, z towards the viewer): half a turn about x. */
export const toScene = (points: readonly number[]): number[] =>
  points.map((value, i) => (i % 3 === 0 ? value : -value));

export interface Bounds {
  readonly centre: readonly [number, number, number];
  readonly size: number;
}

/** Middle and largest extent of points in the scene; at least a metre, so that a body of no length can be looked at. */
export const boundsOf = (points: readonly number[]): Bounds => {
  const low = [0, 0, 0];
  const high = [0, 0, 0];
  points.forEach((value, i) => {
    low[i % 3] = Math.min(low[i % 3]!, value);
    high[i % 3] = Math.max(high[i % 3]!, value);
  });
  const centre = low.map((value, i) => (value + high[i]!) / 2) as [number, number, number];
  return { centre, size: Math.max(1.2, ...high.map((value, i) => value - low[i]!)) };
};
