import type { SampledShape } from '../shape/sampled-shape.ts';
import type { Vec3 } from '../shape/vector.ts';

/** What hangs on a body, and where down is. SI. */
export interface GravityLoad {
  /** Weight per metre of what hangs on an unsupported span [N/m]. */
  readonly weight: number;
  /** Weight at the tip [N]. */
  readonly payload: number;
  /** Unit vector of gravity in the base frame; the zero vector where nothing is known of it. */
  readonly direction: Vec3;
  /** Arc length from the base up to which ground carries the body [m]; Infinity: all of it. */
  readonly supported: number;
}

/** No gravity: nothing hangs, nothing is lifted. */
export const WEIGHTLESS: GravityLoad = {
  weight: 0,
  payload: 0,
  direction: [0, 0, 0],
  supported: Number.POSITIVE_INFINITY,
};

/**
 * Largest bending moment of gravity on the unsupported span of a body cut at station `tip` [N·m]: over the sections
 * s ≥ supported, |M − (M·t)t| with M = (w·∫(p − p_s)dσ + payload·(p_tip − p_s)) × g. Torsion is dropped. O(n).
 */
export const gravityMoment = (shape: SampledShape, tip: number, load: GravityLoad): number => {
  if (load.supported >= shape.s[tip]! || (load.weight === 0 && load.payload === 0)) return 0;
  const { s, position: p, tangent: t } = shape;
  const { weight: w, payload, supported } = load;
  const [gx, gy, gz] = load.direction;
  // ∫p dσ from the section to the tip, and the payload's share of the lever.
  let [ix, iy, iz] = [0, 0, 0];
  let largest = 0;
  for (let i = tip; i >= 0; i--) {
    const k = 3 * i;
    let [x, y, z] = [p[k]!, p[k + 1]!, p[k + 2]!];
    let [tx, ty, tz] = [t[k]!, t[k + 1]!, t[k + 2]!];
    let at = s[i]!;
    if (i < tip) {
      const next = s[i + 1]!;
      if (at < supported) {
        // The span ends between two stations, and there the moment is mostly the largest.
        const share = (supported - at) / (next - at);
        x = onCurve(x, tx, p[k + 3]!, t[k + 3]!, next - at, share);
        y = onCurve(y, ty, p[k + 4]!, t[k + 4]!, next - at, share);
        z = onCurve(z, tz, p[k + 5]!, t[k + 5]!, next - at, share);
        tx += share * (t[k + 3]! - tx);
        ty += share * (t[k + 4]! - ty);
        tz += share * (t[k + 5]! - tz);
        at = supported;
      }
      const h = next - at;
      ix += overStep(x, tx, p[k + 3]!, t[k + 3]!, h);
      iy += overStep(y, ty, p[k + 4]!, t[k + 4]!, h);
      iz += overStep(z, tz, p[k + 5]!, t[k + 5]!, h);
    }
    const hanging = s[tip]! - at;
    const lx = w * (ix - hanging * x) + payload * (p[3 * tip]! - x);
    const ly = w * (iy - hanging * y) + payload * (p[3 * tip + 1]! - y);
    const lz = w * (iz - hanging * z) + payload * (p[3 * tip + 2]! - z);
    const mx = ly * gz - lz * gy;
    const my = lz * gx - lx * gz;
    const mz = lx * gy - ly * gx;
    const torsion = mx * tx + my * ty + mz * tz;
    const bending = mx * mx + my * my + mz * mz - torsion * torsion;
    if (!(bending <= largest)) largest = bending;
    if (s[i]! <= supported) break;
  }
  return Math.sqrt(Math.max(0, largest));
};

/** ∫ of a coordinate over a step of length h, from its values a, b and slopes p, q at both ends (Euler–Maclaurin). */
const overStep = (a: number, p: number, b: number, q: number, h: number): number =>
  (h * (a + b)) / 2 + (h * h * (p - q)) / 12;

/** A coordinate at `share` of a step of length h, from its values a, b and slopes p, q at both ends (Hermite's cubic). */
const onCurve = (a: number, p: number, b: number, q: number, h: number, share: number): number => {
  const rest = 1 - share;
  return (
    rest * rest * ((1 + 2 * share) * a + share * h * p) + share * share * ((1 + 2 * rest) * b - rest * h * q)
  );
};
