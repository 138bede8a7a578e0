import type { TipLoss } from '../body/body.ts';
import { tipLoss } from './inversion.ts';

/**
 * Body pressure that growth at tip speed v needs [Pa]: Y + (v/φ)^(1/n) + 2·T_tip/A with T_tip = T_hold·e^{μΘ} + drag.
 * @param holdBack tail tension at the spool [N]  @param amplification e^{μΘ} from base to tip
 * @param drag ∫μw·e^{μΘ(s→tip)}ds [N]
 * Source: Blumenschein et al., Living Machines (2017), from memory; the 2T/A term from the work balance.
 */
export const growthPressure = (
  area: number,
  loss: TipLoss,
  speed: number,
  holdBack: number,
  amplification: number,
  drag: number,
): number => tipLoss(loss, speed) + (2 * (holdBack * amplification + drag)) / area;

/** Hoop stress PR/t of a thin straight tube [Pa] (thin-shell theory). */
export const hoopStress = (pressure: number, radius: number, wall: number): number =>
  (pressure * radius) / wall;

/** Factor on the hoop stress at the inside of a bend of radius ρ > R: (2ρ − R)/(2(ρ − R)) (torus, thin shell). */
export const insideBendFactor = (bendRadius: number, radius: number): number =>
  (2 * bendRadius - radius) / (2 * (bendRadius - radius));
