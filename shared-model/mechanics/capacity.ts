/**
 * Compressive load at which column and bending together fold the body [N]: the smallest positive root F of
 * F·e/(1 − F/F_c) + M_g = η(PA − F)·R. The column magnifies the arm; the wall has what is left of its pretension.
 * With M_g = 0 and η = 1 this is the Perry–Robertson form. Zero when gravity alone folds the body.
 * @param F_c column load [N], Infinity for a rigid column  @param PA pressure × area [N]  @param R radius [m]
 * @param e arm [m]  @param M_g bending moment of gravity [N·m]  @param eta fraction of full collapse relied on
 */
export const capacity = (F_c: number, PA: number, R: number, e: number, M_g: number, eta: number): number => {
  const K = eta * PA * R - M_g;
  if (K <= 0) return 0;
  const etaR = eta * R;
  if (F_c === Number.POSITIVE_INFINITY) return Math.min(K / (etaR + e), PA);
  const b = K + F_c * (etaR + e);
  // (K − ηRF_c)² + 2eF_c(K + ηRF_c) + e²F_c² = b² − 4ηRKF_c, as a sum that cannot go negative by rounding.
  const root = Math.sqrt((K - etaR * F_c) ** 2 + 2 * e * F_c * (K + etaR * F_c) + (e * F_c) ** 2);
  return Math.min((2 * K * F_c) / (b + root), F_c, PA);
};
