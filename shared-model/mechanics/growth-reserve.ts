import type { BodyDescription } from '../body/body.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import { growthPressure } from './growth.ts';
import { amplifiedLength, capstan } from './inversion.ts';
import { area } from './section.ts';

/** How far growth is from stalling. SI. */
export interface GrowthReserve {
  /** Body pressure that growth takes at this length and shape [Pa]. */
  readonly needed: number;
  /** Supply pressure less that [Pa]; below zero growth stalls. */
  readonly reserve: number;
  /** Body length at which growth stalls [m]: on this shape, or straight ahead of it; Infinity: never. */
  readonly stallLength: number;
}

/** What growth depends on. */
export interface GrowthConditions {
  readonly body: Pick<BodyDescription, 'radius' | 'wall' | 'E' | 'G' | 'growth' | 'friction' | 'tailWeight'>;
  /** Largest pressure that the supply gives the body [Pa]. */
  readonly supply: number;
  readonly tipSpeed: number;
  /** Tail tension that the spool holds back with [N]. */
  readonly holdBack: number;
}

/** Pressure that growth takes here, what is left of the supply, and where it runs out. Any NaN makes all of it NaN. */
export const growthReserve = (shape: SampledShape, conditions: GrowthConditions): GrowthReserve => {
  const { supply, body } = conditions;
  const tip = shape.count - 1;
  const needed = neededAlong(shape, conditions);
  const reserve = supply - needed[tip]!;
  // Straight ahead only the tail's weight adds to the tension at the tip, evenly.
  const ahead = (reserve * area(body)) / 2 / (body.friction * body.tailWeight);
  const stalled = needed.findIndex((pressure) => pressure > supply);
  if (stalled >= 0)
    return { needed: needed[tip]!, reserve, stallLength: crossing(shape, needed, stalled, supply) };
  return { needed: needed[tip]!, reserve, stallLength: shape.s[tip]! + ahead };
};

const neededAlong = (shape: SampledShape, { body, tipSpeed, holdBack }: GrowthConditions): Float64Array => {
  const A = area(body);
  const { friction, tailWeight, growth } = body;
  const needed = new Float64Array(shape.count);
  // ∫e^{−μB(s)}ds from the base; times e^{μB(tip)} it is the length that the bends nearer the tip have amplified.
  let dragged = 0;
  for (let j = 0; j < shape.count; j++) {
    if (j > 0) {
      const step = shape.s[j]! - shape.s[j - 1]!;
      dragged += amplifiedLength(-friction, shape.bend[j - 1]!, shape.bend[j]!, step);
    }
    const amplification = capstan(friction, shape.bend[j]!);
    const drag = friction * tailWeight * dragged * amplification;
    needed[j] = growthPressure(A, growth, tipSpeed, holdBack, amplification, drag);
  }
  return needed;
};

/** Length between stations at which the pressure needed passes the supply [m]. */
const crossing = (shape: SampledShape, needed: Float64Array, beyond: number, supply: number): number => {
  if (beyond === 0) return 0;
  const [a, b] = [needed[beyond - 1]!, needed[beyond]!];
  const [low, high] = [shape.s[beyond - 1]!, shape.s[beyond]!];
  return low + ((supply - a) / (b - a)) * (high - low);
};
