import type { CurvePoints } from './monotone-curve.ts';

/** A braided muscle at rest. */
export interface McKibben {
  /** r₀ [m] */
  readonly radius: number;
  /** α₀, braid angle to the muscle's axis [rad]. */
  readonly braidAngle: number;
}

/**
 * Static pull F = πr₀²p[a(1−ε)² − b] [N], a = 3/tan²α₀, b = 1/sin²α₀, at pressure p [Pa] and contraction ε.
 * Source: Tondu & Lopez, IEEE Control Systems Magazine (2000), from memory.
 */
export const mckibbenForce = (muscle: McKibben, pressure: number, contraction: number): number => {
  const { a, b } = coefficients(muscle.braidAngle);
  return Math.PI * muscle.radius ** 2 * pressure * (a * (1 - contraction) ** 2 - b);
};

/** ε at which the pull vanishes, whatever the pressure: 1 − √(b/a). */
export const maximumContraction = (braidAngle: number): number => {
  const { a, b } = coefficients(braidAngle);
  return 1 - Math.sqrt(b / a);
};

/**
 * Contraction against pressure of a muscle that works against a wall of stiffness `load` [N per unit contraction]:
 * F(p, ε) = load·ε, solved for ε. The starting curve until the bench has measured one.
 */
export const mckibbenCurve = (muscle: McKibben, load: number, pressureMax: number, points = 9): CurvePoints =>
  Array.from({ length: points }, (_, i) => {
    const pressure = (pressureMax * i) / (points - 1);
    return [pressure, contractionUnder(muscle, load, pressure)] as const;
  });

const contractionUnder = (muscle: McKibben, load: number, pressure: number): number => {
  const { a, b } = coefficients(muscle.braidAngle);
  const force = Math.PI * muscle.radius ** 2 * pressure;
  if (force === 0) return 0;
  // a·ε² − (2a + load/force)·ε + (a − b) = 0, the smaller root in the form that does not cancel.
  const half = a + load / (2 * force);
  return (a - b) / (half + Math.sqrt(half * half - a * (a - b)));
};

const coefficients = (braidAngle: number) => ({
  a: 3 / Math.tan(braidAngle) ** 2,
  b: 1 / Math.sin(braidAngle) ** 2,
});
