/**
 * The tube, in SI. For fabrics `E` and `G` are membrane stiffnesses Et, Gt [N/m] and `wall` is 1, so that every
 * formula reads the same.
 */
export interface Body {
  /** R, inflated radius to the middle of the wall [m]. */
  readonly radius: number;
  /** t, wall thickness [m], or 1 with membrane stiffnesses. */
  readonly wall: number;
  /** E, axial modulus [Pa] (or Et [N/m]). */
  readonly E: number;
  /** G, shear modulus [Pa] (or Gt [N/m]). */
  readonly G: number;
}

/** Pressure that the tip takes beyond the lossless balance: yield + (v / rateCoefficient)^(1 / rateExponent) [Pa]. */
export interface TipLoss {
  /** Y [Pa] at zero speed. */
  readonly yield: number;
  /** φ, such that v = φ·ΔP^n; Infinity for no rate term. */
  readonly rateCoefficient: number;
  /** n, dimensionless, > 0. */
  readonly rateExponent: number;
}

/** All the interlock needs to know of one machine's tube, tail and guide. SI. */
export interface BodyDescription extends Body {
  readonly growth: TipLoss;
  readonly inversion: TipLoss;
  /** μ, tail on wall. */
  readonly friction: number;
  /** w, weight of the tail per metre [N/m]. */
  readonly tailWeight: number;
  /** Weight per metre of everything that hangs on an unsupported span [N/m]. */
  readonly weight: number;
  /** Weight of what the tip carries [N]. */
  readonly payload: number;
  /** a, distance of the tail guide behind the clamp plane [m]. */
  readonly guideSetback: number;
  /** η, fraction of the full bending collapse that is relied on, 0 < η ≤ 1. */
  readonly collapseFraction: number;
  /** ε₀, smallest eccentricity as a fraction of R. */
  readonly eccentricityFloor: number;
  /** Strength of wall or seam as hoop force [N/m]; null where it is not known. */
  readonly hoopStrength: number | null;
  /** Margin that the scatter of transition trials justifies; null before any. */
  readonly justifiedMargin: number | null;
  /** Which of the values that decide a verdict were measured on this machine; the others are catalogue values. */
  readonly measured: readonly MeasuredValue[];
  /** Length of the free end that bends with the present muscles [m]; Infinity: the whole body does. */
  readonly freeEnd: number;
  /** Whether ground holds what is laid, so that laid parts keep only their bend in the level plane. */
  readonly onGround: boolean;
}

export type MeasuredValue = 'E' | 'G' | 'inversionYield' | 'friction';
export const MEASURED_VALUES: readonly MeasuredValue[] = ['E', 'G', 'inversionYield', 'friction'];

/** One steering muscle on the wall. */
export interface Muscle {
  /** Direction around the body as the plane angle φ of a bend towards it [rad]. */
  readonly angle: number;
}

/** All steering muscles of a body. SI. */
export interface Muscles {
  readonly muscles: readonly Muscle[];
  /** r_m, distance of the muscle axes from the body axis [m]. */
  readonly radius: number;
  /** Bench curve: pressure [Pa] against contraction ratio, both rising, first point (0, 0). */
  readonly contraction: readonly (readonly [pressure: number, contraction: number])[];
  /** Measured bend over the closed form's bend; absorbs a wall that cannot stretch. */
  readonly bendGain: number;
}

/** What the machine is allowed to do. SI. */
export interface Limits {
  readonly tipSpeed: number;
  readonly bodyPressureMin: number;
  readonly bodyPressureMax: number;
  /** Largest change of the body pressure setpoint [Pa/s]. */
  readonly bodyPressureRate: number;
  readonly musclePressureMax: number;
  /** Largest bend rate a steering wish may ask for [1/m/s]. */
  readonly bendRate: number;
  readonly bodyLengthMax: number;
  readonly tailTensionMax: number;
  /** Half-width of the body pressure sensor's band [Pa]. */
  readonly pressureAccuracy: number;
  /** Oldest reading that may still permit motion [s]. */
  readonly readingAge: number;
  /** Slack above which a retractor's spool must take up faster than the tip comes back [m of tail]. */
  readonly tailSlackMax: number;
}

/** A where and a north, when the base has been surveyed. */
export interface Place {
  readonly name: string;
  /** Unit vector of gravity in the base frame. */
  readonly gravity: readonly [number, number, number];
}
