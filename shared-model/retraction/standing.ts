import type { BodyDescription } from '../body/body.ts';
import { hoopStress, insideBendFactor } from '../mechanics/growth.ts';
import { type GrowthReserve, growthReserve } from '../mechanics/growth-reserve.ts';
import { tipLoss } from '../mechanics/inversion.ts';
import { area } from '../mechanics/section.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import type { Arms } from './arms.ts';
import { capacityAt } from './outlook.ts';
import { shortestColumn } from './validity.ts';

/** How a body that is held still or grown is loaded. SI. */
export interface Standing {
  readonly hold: HoldLoad;
  readonly growth: GrowthReserve;
  /** Strength of wall or seam over the hoop load on it; null where no strength is known. At least `HOOP_FACTOR` is wanted. */
  readonly hoop: number | null;
}

/** What the tail loads the body with while it is held. */
export interface HoldLoad {
  /** Tension at the base and the load that folds the body as it lies [N], and the second over the first. */
  readonly tension: number;
  readonly capacity: number;
  readonly ratio: number;
  /** Whether the tension was measured; otherwise it is the one that holds growth back. */
  readonly measured: boolean;
  /** Highest pressure up to the present one at which the body bears with margin what the tail holds back [Pa]; null: none. */
  readonly easedPressure: number | null;
}

export interface StandingInput {
  readonly shape: SampledShape;
  /** Up to date with `shape`. */
  readonly arms: Arms;
  readonly body: BodyDescription;
  /** Body pressure and the half-width of its band, and the limits it may be set between [Pa]. */
  readonly pressure: number;
  readonly pressureBand: number;
  readonly pressureMin: number;
  readonly pressureMax: number;
  readonly tipSpeed: number;
  readonly margin: number;
  /** Measured tail tension [N]; undefined where it is not measured. */
  readonly tension: number | undefined;
}

/** Least strength of wall or seam over the hoop load (common practice). */
export const HOOP_FACTOR = 4;

/** Judges what loads a body between pulls: the held tail, the growth still possible, the wall. */
export const judgeStanding = (input: StandingInput): Standing => {
  const { shape, body, pressureMax, tipSpeed } = input;
  return {
    hold: holdLoad(input),
    growth: growthReserve(shape, { body, supply: pressureMax, tipSpeed, holdBack: 0 }),
    hoop: hoopFactor(shape, body, input.pressure + input.pressureBand),
  };
};

/**
 * A tail at rest holds between (A/2)(P − Y)e^{−μΘ}, when growth is held back, and (A/2)(P + Y_r)e^{+μΘ}, just before the
 * tip turns. What is measured counts; otherwise (A/2)(P − Y), without credit for the friction that helps the spool.
 */
const holdLoad = (input: StandingInput): HoldLoad => {
  const { tension: measured, pressure, pressureBand, pressureMin, margin } = input;
  const tension = Math.max(0, measured ?? heldBack(input, pressure));
  const capacity = Math.min(bears(input, pressure - pressureBand), bears(input, pressure + pressureBand));
  const ratio = tension > 0 ? capacity / tension : Number.POSITIVE_INFINITY;
  let eased = pressure;
  while (eased >= pressureMin && !(bears(input, eased) >= margin * heldBack(input, eased)))
    eased -= EASE_STEP;
  return {
    tension,
    capacity,
    ratio,
    measured: measured !== undefined,
    easedPressure: eased >= pressureMin ? eased : null,
  };
};

/** Pressures that a person sets in [Pa]. */
const EASE_STEP = 100;

const bears = ({ shape, arms, body, tipSpeed }: StandingInput, pressure: number): number =>
  capacityAt(
    shape,
    arms,
    { body, pressure, tipSpeed, excess: 0, shortest: shortestColumn(body) },
    shape.count - 1,
  );

const heldBack = ({ body, pressureBand }: StandingInput, pressure: number): number =>
  Math.max(0, (area(body) / 2) * (pressure + pressureBand - tipLoss(body.growth, 0)));

/** Strength over PR and the factor of the tightest bend's inside. */
const hoopFactor = (shape: SampledShape, body: BodyDescription, pressure: number): number | null => {
  const strength = bentHoopStrength(shape, body);
  if (strength === null) return null;
  const load = hoopStress(pressure, body.radius, 1);
  return load > 0 ? strength / load : Number.POSITIVE_INFINITY;
};

/** What wall or seam bear of the straight hoop load PR, for the inside of the tightest bend bears more [N/m]. */
export const bentHoopStrength = (
  shape: SampledShape,
  { hoopStrength, radius }: Pick<BodyDescription, 'hoopStrength' | 'radius'>,
): number | null => (hoopStrength === null ? null : hoopStrength / tightestFactor(shape, radius));

/** A bend tighter than the body is wide has no factor that could be relied on. */
const tightestFactor = ({ s, bend, count }: SampledShape, radius: number): number => {
  let curvature = 0;
  for (let j = 1; j < count; j++)
    curvature = Math.max(curvature, (bend[j]! - bend[j - 1]!) / (s[j]! - s[j - 1]!));
  if (curvature === 0) return 1;
  return curvature * radius < 1 ? insideBendFactor(1 / curvature, radius) : Number.POSITIVE_INFINITY;
};
