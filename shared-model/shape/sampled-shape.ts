/**
 * A body sampled at stations from the base (station 0) to the tip (station count − 1). Structure of arrays; the arrays
 * may be longer than the stations in use, so that a growing body appends in place.
 */
export interface SampledShape {
  /** Stations in use, ≥ 1. */
  readonly count: number;
  /** Arc length from the base [m], rising; s[0] = 0. */
  readonly s: Float64Array;
  /** x, y, z of each station [m]. */
  readonly position: Float64Array;
  /** Unit tangent of each station, towards the tip. */
  readonly tangent: Float64Array;
  /** Θ, ∫|κ|ds from the base to the station [rad]. */
  readonly bend: Float64Array;
}
