/**
 * Axial load at which a straight pressurised tube buckles as a column between its base and the tip that the tail pulls
 * towards the guide [N]: 1/F = 1/F_E + 1/S.
 * @param EI bending stiffness [N·m²]  @param S shear stiffness PA + GπRt [N]  @param length L [m], 0 gives S
 * @param setback a [m], how far the tail guide lies behind the clamp plane; 0 is the pinned-pinned load
 * Sources: Fichter, NASA TN D-3466 (1966), from memory; set-back derived, for S → ∞ it is the load through a fixed
 * point of Timoshenko & Gere, from memory.
 */
export const columnLoad = (EI: number, S: number, length: number, setback: number): number =>
  columnLoadOf(setbackRoot(EI, S, length, setback), EI, S, length);

/** The same from the root u that belongs to it. */
export const columnLoadOf = (u: number, EI: number, S: number, length: number): number => {
  const euler = u * u * EI;
  return (euler * S) / (euler + S * length * length);
};

/**
 * u in (π/2, π] of tan u = −(a/L)·u / (1 + u²EI/(S·L²)); F_E = u²EI/L². Written without a pole and without dividing by
 * L: f(u) = sin u·(L² + u²EI/S) + a·L·u·cos u, positive at π/2 and ≤ 0 at π.
 * @param near a guess of the root; the one of a slightly shorter body saves most of the work
 */
export const setbackRoot = (EI: number, S: number, length: number, setback: number, near = 2.8): number => {
  if (setback === 0 || length === 0) return Math.PI;
  if (!(setback > 0)) return Number.NaN;
  const L2 = length * length;
  const k = EI / S;
  const aL = setback * length;
  let low = Math.PI / 2;
  let high = Math.PI;
  let u = near > low && near < high ? near : 2.8;
  for (let i = 0; i < 80; i++) {
    const sin = Math.sin(u);
    const cos = Math.cos(u);
    const f = sin * (L2 + k * u * u) + aL * u * cos;
    if (f > 0) low = u;
    else high = u;
    const slope = cos * (L2 + k * u * u) + 2 * k * u * sin + aL * (cos - u * sin);
    const newton = u - f / slope;
    if (Math.abs(newton - u) <= 1e-15 * u) return newton;
    // Newton where it stays between the brackets, halving where it does not.
    u = newton > low && newton < high ? newton : (low + high) / 2;
  }
  return u;
};
