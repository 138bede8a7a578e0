/** M = πPR³ [N·m], bending moment at which a pressurised tube collapses. Source: Leonard, Brooks & McComb, NASA TN D-457 (1960), from memory. */
export const collapseMoment = (pressure: number, radius: number): number => Math.PI * pressure * radius ** 3;

/** M = ½πPR³ [N·m], at which it first wrinkles. Source: Comer & Levy, AIAA J. 1 (1963), from memory. */
export const wrinkleMoment = (pressure: number, radius: number): number =>
  collapseMoment(pressure, radius) / 2;

/**
 * Moment over PR³ that a wrinkled tube carries with the slack part of the wall spanning ±θ₀ [rad], 0 ≤ θ₀ < π: from
 * wrinkling (θ₀ = 0, π/2) to collapse (θ₀ → π, π). Source: Comer & Levy, AIAA J. 1 (1963), from memory.
 */
export const wrinkledMoment = (slackHalfAngle: number): number => {
  const t = slackHalfAngle;
  return (
    (Math.PI * (2 * Math.PI - 2 * t + Math.sin(2 * t))) / (4 * ((Math.PI - t) * Math.cos(t) + Math.sin(t)))
  );
};
