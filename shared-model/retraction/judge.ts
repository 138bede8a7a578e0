import { type BodyDescription, MEASURED_VALUES } from '../body/body.ts';
import type { GravityLoad } from '../mechanics/gravity-moment.ts';
import { area } from '../mechanics/section.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import type { Arms } from './arms.ts';
import { computeOutlook, createOutlook, forcesAt, type Outlook, worstStation } from './outlook.ts';
import type { ForcesAt, Reason, WayBack } from './verdict.ts';

/** Everything the verdict rests on, in SI. Null stands for what is missing, late or bad. */
export interface WayBackInput {
  readonly shape: SampledShape | null;
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
  readonly gravity: GravityLoad;
  /** Set when the tip retractor is attached, sensed fresh or declared; `heldTension` is what the spool still holds [N]. */
  readonly retractor: { readonly heldTension: number | null } | null;
}

/** Working space that a caller keeps between ticks; `nominal` is also what the chart shows. */
export interface JudgeSpace {
  readonly nominal: Outlook;
  readonly low: Outlook;
  readonly high: Outlook;
}
export const createJudgeSpace = (room = 256): JudgeSpace => ({
  nominal: createOutlook(room),
  low: createOutlook(room),
  high: createOutlook(room),
});

/** 1.25, or 1.5 while a value that decides the verdict is a catalogue value. */
export const defaultMargin = (body: BodyDescription): number =>
  MEASURED_VALUES.every((value) => body.measured.includes(value)) ? 1.25 : 1.5;

/**
 * Whether pulling the tail turns the tip, at every body length from here to the target and at both ends of the
 * pressure sensor's band. Refuses unless proven: anything missing or not finite is `cannot-judge` with its reasons.
 */
export const judgeWayBack = (input: WayBackInput, space: JudgeSpace): WayBack => {
  const reasons = inputReasons(input);
  const { shape, pressure, payout, margin } = input;
  if (reasons.length > 0 || shape === null || pressure === null || payout === null)
    return cannotJudge(reasons);
  const excess = Math.max(0, payout / 2 - shape.s[shape.count - 1]!);
  const pull = { body: input.body, tipSpeed: input.tipSpeed, excess, gravity: input.gravity };
  const outlookAt = (P: number, out: Outlook) =>
    computeOutlook(shape, input.arms, { ...pull, pressure: P }, out);
  const outlooks = [
    outlookAt(pressure, space.nominal),
    outlookAt(pressure - input.pressureBand, space.low),
    outlookAt(pressure + input.pressureBand, space.high),
  ];
  const worst = outlooks
    .map((outlook) => forcesAt(shape, input.arms, outlook, worstStation(shape, outlook, input.target)))
    .reduce((a, b) => (b.ratio >= a.ratio ? a : b));
  const here = forcesAt(shape, input.arms, outlooks[1]!, shape.count - 1);
  if ([worst.ratio, worst.baseTension, worst.capacity, here.capacity].some(Number.isNaN))
    return cannotJudge([
      {
        code: 'not-a-number',
        text: 'The forces could not be worked out.',
        remedy: 'Check the body values in the rig file.',
      },
    ]);
  if (input.retractor !== null) return judgeRetractor(input, outlooks, here, pressure);
  if (worst.ratio >= margin) return { kind: 'clear', here, worst, margin, text: clearText(worst, margin) };
  return { kind: 'would-buckle', here, worst, margin, text: buckleText(worst, here, margin), remedies: [] };
};

/**
 * With a tip retractor the inversion force stays at the tip. Two things remain: the tip must not crush (PA ≥ m·T_tip),
 * and what the spool still holds loads the whole length (F_b ≥ m·T_held).
 */
const judgeRetractor = (
  input: WayBackInput,
  outlooks: Outlook[],
  here: ForcesAt,
  pressure: number,
): WayBack => {
  const { margin, shape, body } = input;
  const held = input.retractor?.heldTension ?? Number.NaN;
  let heldMax = Number.POSITIVE_INFINITY;
  for (const outlook of outlooks)
    for (let j = 0; j < outlook.count; j++)
      if (shape!.s[j]! >= input.target) heldMax = Math.min(heldMax, outlook.capacity[j]! / margin);
  const crush = (pressure - input.pressureBand) * area(body);
  const tipTension = outlooks[2]!.tipTension;
  if (!(crush >= margin * tipTension))
    return cannotJudge([
      {
        code: 'tip-crush',
        text: `Inverting takes ${newtons(tipTension)} at the tip; the body presses with only ${newtons(crush)} (needs ${margin} times).`,
        remedy: 'Raise body pressure.',
      },
    ]);
  if (!(held <= heldMax))
    return cannotJudge([
      {
        code: 'held-tension',
        text: Number.isFinite(held)
          ? `The spool still holds ${newtons(held)}; the body bears ${newtons(heldMax)} over its whole length.`
          : 'The tension that the spool holds is not known.',
        remedy: 'Wait until the spool has eased off, or slacken the tail at the spool.',
      },
    ]);
  const text = `The tip retractor takes the pull; the spool may hold ${newtons(heldMax)} and holds ${newtons(held)}.`;
  return { kind: 'by-tip-retractor', here, held, heldMax, margin, text };
};

const inputReasons = (input: WayBackInput): Reason[] => {
  const reasons: Reason[] = [];
  const need = (ok: boolean, code: string, text: string, remedy: string): void => {
    if (!ok) reasons.push({ code, text, remedy });
  };
  const { shape, pressure, payout, margin, body } = input;
  const tip = shape === null ? Number.NaN : shape.s[shape.count - 1]!;
  need(
    shape !== null && tip >= 0 && Number.isFinite(tip),
    'shape',
    'The shape of the body is not known.',
    'Check tail payout on the Rig tab.',
  );
  need(
    pressure !== null && pressure > 0 && Number.isFinite(pressure),
    'pressure',
    'There is no good reading of body pressure above zero.',
    'Check the body pressure sensor and supply.',
  );
  need(
    input.pressureBand >= 0 && (pressure === null || input.pressureBand < pressure),
    'pressure-band',
    'Body pressure is within the error of its sensor.',
    'Raise body pressure, or check pressure_accuracy in the rig file.',
  );
  need(
    payout !== null && Number.isFinite(payout) && payout >= 0,
    'payout',
    'There is no good reading of tail payout.',
    'Check the spool encoder.',
  );
  need(
    margin >= 1 && margin < 2,
    'margin',
    `The margin ${margin} is outside 1 to below 2.`,
    'Correct the margin.',
  );
  need(
    input.target >= 0 && Number.isFinite(input.target),
    'target',
    'The target is not a body length.',
    'Choose the target again.',
  );
  need(
    input.tipSpeed >= 0 && Number.isFinite(input.tipSpeed),
    'speed',
    'The tip speed is not a number of 0 or more.',
    'Choose a speed.',
  );
  need(
    bodyIsSound(body),
    'body',
    'A value of the body is missing or out of range.',
    'Run check-rig on the rig file.',
  );
  const g = input.gravity;
  need(
    [g.weight, g.payload, g.supported].every((x) => x >= 0) &&
      Math.abs(Math.hypot(...g.direction) - 1) < 1e-3,
    'gravity',
    'The gravity load is not complete.',
    'Check weight, payload and gravity in the rig file.',
  );
  return reasons;
};

const bodyIsSound = (body: BodyDescription): boolean =>
  [body.radius, body.wall, body.E].every((x) => x > 0 && Number.isFinite(x)) &&
  [
    body.G,
    body.friction,
    body.tailWeight,
    body.guideSetback,
    body.eccentricityFloor,
    body.inversion.yield,
  ].every((x) => x >= 0 && Number.isFinite(x)) &&
  body.inversion.rateCoefficient > 0 &&
  body.inversion.rateExponent > 0 &&
  body.collapseFraction > 0 &&
  body.collapseFraction <= 1;

const cannotJudge = (reasons: readonly Reason[]): WayBack => ({
  kind: 'cannot-judge',
  reasons,
  text: reasons.map((reason) => reason.text).join(' '),
});

const clearText = (worst: ForcesAt, margin: number): string =>
  worst.ratio === Number.POSITIVE_INFINITY
    ? 'There is no body out that could fold.'
    : `Pulling takes ${newtons(worst.baseTension)} at the base; the body folds at ${newtons(worst.capacity)} (ratio ${worst.ratio.toFixed(2)}, needs ${margin}).`;

const buckleText = (worst: ForcesAt, here: ForcesAt, margin: number): string => {
  const where = worst.length === here.length ? '' : ` at ${worst.length.toFixed(2)} m on the way back`;
  return `Pulling takes ${newtons(worst.baseTension)} at the base, but the body folds at ${newtons(worst.capacity)}${where} (ratio ${worst.ratio.toFixed(2)}, needs ${margin}).`;
};

const newtons = (force: number): string => `${force < 10 ? force.toFixed(1) : force.toFixed(0)} N`;
