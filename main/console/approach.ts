/** Deceleration that every rig must follow on the way to a target [m/s²]. */
const DECELERATION = 0.08;
/** From a reading to the motor's answer: one tick, the line and the drive's ramp [s]. */
const LATENCY = 0.15;
/** Nearer than this is arrived [m]; a fourth of the 2 cm that is promised. */
export const ARRIVED = 0.005;

/**
 * Most the tip may do at `remaining` metres before a target so that it stops there [m/s]: v with v·latency + v²/(2a) =
 * remaining. Zero at the target and beyond; NaN stays NaN, which the interlock refuses.
 */
export const approachSpeed = (remaining: number): number => {
  if (remaining <= ARRIVED) return 0;
  const lag = DECELERATION * LATENCY;
  return -lag + Math.sqrt(lag * lag + 2 * DECELERATION * remaining);
};
