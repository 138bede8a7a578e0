import type { BodyDescription } from '../body/body.ts';
import type { GravityLoad } from '../mechanics/gravity-moment.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import type { Arms } from './arms.ts';
import type { Reason } from './verdict.ts';

/** Everything the verdict rests on, in SI. Null stands for what is missing, late or bad. */
export interface WayBackInput {
  readonly shape: SampledShape | null;
  /** Up to date with `shape`; they also know how the body is held. */
  readonly arms: Arms;
  readonly body: BodyDescription;
  readonly margin: number;
  /** Body pressure [Pa gauge] and the half-width of its sensor's band. */
  readonly pressure: number | null;
  readonly pressureBand: number;
  /** λ [m] */
  readonly payout: number | null;
  readonly tipSpeed: number;
  /** Body length to come back to [m]. */
  readonly target: number;
  /** Set when the tip retractor is attached, sensed fresh or declared; `heldTension` is what the spool still holds [N]. */
  readonly retractor: { readonly heldTension: number | null } | null;
}

/** All that stands against judging at all: whatever is missing, not finite or out of range, each with its remedy. */
export const inputReasons = (input: WayBackInput): Reason[] => [
  ...readingReasons(input),
  ...wishReasons(input),
  ...machineReasons(input),
];

const readingReasons = ({ shape, arms, pressure, pressureBand, payout }: WayBackInput): Reason[] => [
  ...unless(
    shape !== null && notNegative(shape.s[shape.count - 1]),
    'shape',
    'The shape of the body is not known.',
    'Check tail payout on the Rig tab.',
  ),
  ...unless(
    shape === null || arms.count === shape.count,
    'arms',
    'The arms were worked out for another shape.',
    'Hold still; if it stays, restart the console.',
  ),
  ...unless(
    positive(pressure),
    'pressure',
    'There is no good reading of body pressure above zero.',
    'Check the body pressure sensor and supply.',
  ),
  ...unless(
    notNegative(pressureBand) && (pressure === null || pressureBand < pressure),
    'pressure-band',
    'Body pressure is within the error of its sensor.',
    'Raise body pressure, or check pressure_accuracy_kPa in the rig file.',
  ),
  ...unless(
    notNegative(payout),
    'payout',
    'There is no good reading of tail payout.',
    'Check the spool encoder.',
  ),
];

const wishReasons = ({ margin, target, tipSpeed }: WayBackInput): Reason[] => [
  ...unless(
    margin >= 1 && margin < 2,
    'margin',
    `The margin is ${margin}; allowed is from 1 to below 2.`,
    'Correct the margin.',
  ),
  ...unless(notNegative(target), 'target', 'The target is not a body length.', 'Choose the target again.'),
  ...unless(notNegative(tipSpeed), 'speed', 'The tip speed is not a number of 0 or more.', 'Choose a speed.'),
];

const machineReasons = ({ body, arms }: WayBackInput): Reason[] => [
  ...unless(
    bodyIsSound(body),
    'body',
    'A value of the body is missing or out of range.',
    'Run check-rig on the rig file.',
  ),
  ...unless(
    notNegative(arms.holding.setback) && gravityIsSound(arms.holding.gravity),
    'gravity',
    'Gravity or what hangs on the body is not fully known.',
    'Check weight, payload and gravity in the rig file.',
  ),
];

const unless = (ok: boolean, code: string, text: string, remedy: string): Reason[] =>
  ok ? [] : [{ code, text, remedy }];

const bodyIsSound = (body: BodyDescription): boolean =>
  [body.radius, body.wall, body.E].every(positive) &&
  [body.G, body.friction, body.tailWeight, body.eccentricityFloor, body.inversion.yield].every(notNegative) &&
  body.inversion.rateCoefficient > 0 &&
  body.inversion.rateExponent > 0 &&
  body.collapseFraction > 0 &&
  body.collapseFraction <= 1;

/** Where down is may be left open only for a body on which nothing hangs. */
const gravityIsSound = ({ weight, payload, direction, supported }: GravityLoad): boolean => {
  const down = Math.hypot(...direction);
  const weightless = weight === 0 && payload === 0 && down === 0;
  return (
    notNegative(weight) &&
    notNegative(payload) &&
    (notNegative(supported) || supported === Number.POSITIVE_INFINITY) &&
    (weightless || Math.abs(down - 1) < 1e-3)
  );
};

// Number.isFinite first: in a comparison null would pass for 0.
const notNegative = (x: number | null | undefined): boolean => Number.isFinite(x) && (x as number) >= 0;
const positive = (x: number | null | undefined): boolean => Number.isFinite(x) && (x as number) > 0;
