import type { RigDescription } from '../rig/signal.ts';
import type { Random } from './random.ts';

/** What the simulated machine really is: the rig file's nominal values, each off by a seeded few per cent. */
export interface PlantParameters {
  readonly radius: number;
  readonly E: number;
  readonly G: number;
  readonly growthYield: number;
  readonly inversionYield: number;
  /** Speed per pressure beyond the yield [m/s/Pa]. */
  readonly growthMobility: number;
  readonly inversionMobility: number;
  readonly friction: number;
  readonly tailWeight: number;
  readonly setback: number;
  /** True collapse over the theoretical one, and built-in crookedness over R. */
  readonly collapse: number;
  readonly crookedness: number;
  readonly encoderScale: number;
  readonly travelScale: number;
  readonly freeEnd: number;
  /** Pressure [Pa] against contraction, and bend per contraction of one muscle [1/m]. */
  readonly contraction: readonly (readonly [number, number])[];
  readonly bendPerContraction: number;
  readonly muscleAngles: readonly number[];
}

export const plantParameters = (rig: RigDescription, random: Random): PlantParameters => {
  const off = (nominal: number, share: number) =>
    nominal * (1 + share * Math.max(-2, Math.min(2, random.normal())));
  const mobility = (coefficient: number) => (Number.isFinite(coefficient) ? coefficient : 1);
  const { body } = rig;
  return {
    radius: body.radius,
    E: off(body.E * body.wall, 0.02),
    G: off(body.G * body.wall, 0.03),
    growthYield: off(body.growth.yield, 0.03),
    inversionYield: off(body.inversion.yield, 0.03),
    growthMobility: off(mobility(body.growth.rateCoefficient), 0.04),
    inversionMobility: off(mobility(body.inversion.rateCoefficient), 0.04),
    friction: off(body.friction, 0.03),
    tailWeight: off(body.tailWeight, 0.01),
    setback: body.guideSetback,
    collapse: 0.95 + 0.04 * random.uniform(),
    crookedness: 0.02 + 0.06 * random.uniform(),
    encoderScale: 1 + 0.0015 * Math.max(-2, Math.min(2, random.normal())),
    travelScale: 1 + 0.0015 * Math.max(-2, Math.min(2, random.normal())),
    freeEnd: Number.isFinite(body.freeEnd) ? body.freeEnd : 1e9,
    contraction: rig.muscles.contraction,
    bendPerContraction: off(
      (2 * rig.muscles.bendGain) / (Math.max(1, rig.muscles.muscles.length) * rig.muscles.radius),
      0.03,
    ),
    muscleAngles: rig.muscles.muscles.map((muscle) => muscle.angle),
  };
};
