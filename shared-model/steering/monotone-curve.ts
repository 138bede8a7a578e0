/** Points with both coordinates rising, at least two. */
export type CurvePoints = readonly (readonly [x: number, y: number])[];

/**
 * Value at x of the monotone piecewise cubic through the points, held flat beyond its ends. NaN for NaN.
 * Method: Fritsch & Carlson, SIAM J. Numer. Anal. 17 (1980), with the harmonic mean of Fritsch & Butland.
 */
export const curveAt = (points: CurvePoints, x: number): number => {
  const last = points.length - 1;
  if (x <= points[0]![0]) return points[0]![1];
  if (x >= points[last]![0]) return points[last]![1];
  let i = 0;
  while (i < last - 1 && x > points[i + 1]![0]) i++;
  const [x0, y0] = points[i]!;
  const [x1, y1] = points[i + 1]!;
  const h = x1 - x0;
  const t = (x - x0) / h;
  const u = 1 - t;
  return (
    u * u * (1 + 2 * t) * y0 +
    t * t * (1 + 2 * u) * y1 +
    t * u * h * (u * slopeAt(points, i) - t * slopeAt(points, i + 1))
  );
};

/** The x at which a rising curve reaches y, by halving; clamped to the ends. */
export const inverseAt = (points: CurvePoints, y: number): number => {
  let low = points[0]![0];
  let high = points[points.length - 1]![0];
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (curveAt(points, middle) < y) low = middle;
    else high = middle;
  }
  return high;
};

const slopeAt = (points: CurvePoints, i: number): number => {
  const secant = (k: number) => (points[k + 1]![1] - points[k]![1]) / (points[k + 1]![0] - points[k]![0]);
  if (i === 0) return secant(0);
  if (i === points.length - 1) return secant(i - 1);
  const [before, after] = [secant(i - 1), secant(i)];
  return before * after <= 0 ? 0 : (2 * before * after) / (before + after);
};
