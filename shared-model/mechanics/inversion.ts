import type { TipLoss } from '../body/body.ts';

/** Y + (v/φ)^(1/n) [Pa], what the tip takes beyond the lossless balance at tip speed v ≥ 0 [m/s]. */
export const tipLoss = (loss: TipLoss, speed: number): number =>
  loss.yield + (speed === 0 ? 0 : (speed / loss.rateCoefficient) ** (1 / loss.rateExponent));

/**
 * Tail tension at the tip that turns it outside in [N]: T = (A/2)·(P + Y_r + (v/φ_r)^(1/n)). The tail moves at 2v, so
 * half the pressure force balances it. Form: Blumenschein et al., Living Machines (2017), from memory.
 */
export const inversionTension = (area: number, pressure: number, loss: TipLoss, speed: number): number =>
  (area / 2) * (pressure + tipLoss(loss, speed));

/** e^{μΘ}: tension ratio of a tail dragged over a total bend Θ [rad]. Source: Euler–Eytelwein (capstan law). */
export const capstan = (friction: number, bend: number): number => Math.exp(friction * bend);

/**
 * ∫e^{μB(s)} ds over a stretch of length `ds` [m] whose bend from the base runs linearly from B₁ to B₂ [rad], exact.
 * Times μw it is the drag of the tail's own weight there, amplified by the bends nearer the base.
 */
export const amplifiedLength = (friction: number, B1: number, B2: number, ds: number): number => {
  const x = friction * (B2 - B1);
  const mean = Math.abs(x) < 1e-8 ? 1 + x / 2 : Math.expm1(x) / x;
  return ds * Math.exp(friction * B1) * mean;
};
