import { type BodyDescription, MEASURED_VALUES } from '../body/body.ts';
import { area } from '../mechanics/section.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import {
  computeOutlook,
  createOutlook,
  forcesAt,
  leastCapacity,
  type Outlook,
  worstStation,
} from './outlook.ts';
import { carefulMargin, shortestColumn, validityNote } from './validity.ts';
import type { ForcesAt, Reason, WayBack } from './verdict.ts';
import { inputReasons, type WayBackInput } from './way-back-input.ts';

/** Outlooks at both ends of the pressure sensor's band, kept between ticks. */
export interface JudgeSpace {
  readonly low: Outlook;
  readonly high: Outlook;
}
export const createJudgeSpace = (room = 256): JudgeSpace => ({
  low: createOutlook(room),
  high: createOutlook(room),
});

/** 1.25, or 1.5 while a value that decides the verdict is a catalogue value; more where trials scattered more. */
export const defaultMargin = (body: BodyDescription): number =>
  Math.max(
    MEASURED_VALUES.every((value) => body.measured.includes(value)) ? 1.25 : 1.5,
    body.justifiedMargin ?? 1,
  );

/** Below an encoder's count nothing is loose, and above it whole millimetres are, rounded up: noise is no new outlook. */
const loosePart = (excess: number): number => (excess < 5e-4 ? 0 : Math.ceil(1000 * (excess - 1e-9)) / 1000);

/**
 * Whether pulling the tail turns the tip, at every body length from here to the target and at both ends of the
 * pressure sensor's band: capacity is concave in the pressure and the tension linear, so between the ends the ratio is
 * never smaller. Refuses unless proven: anything missing or not finite is `cannot-judge` with its reasons.
 */
export const judgeWayBack = (input: WayBackInput, space: JudgeSpace = createJudgeSpace()): WayBack => {
  const reasons = inputReasons(input);
  const { shape, pressure, payout } = input;
  if (reasons.length > 0 || shape === null || pressure === null || payout === null)
    return cannotJudge(reasons);
  const excess = loosePart(payout / 2 - shape.s[shape.count - 1]!);
  const { body } = input;
  const margin = carefulMargin(body, input.margin);
  const pull = { body, tipSpeed: input.tipSpeed, excess, shortest: shortestColumn(body) };
  const outlookAt = (P: number, out: Outlook) =>
    computeOutlook(shape, input.arms, { ...pull, pressure: P }, out);
  const outlooks = [
    outlookAt(pressure - input.pressureBand, space.low),
    outlookAt(pressure + input.pressureBand, space.high),
  ];
  const worst = outlooks
    .map((outlook) => forcesAt(shape, input.arms, outlook, worstStation(shape, outlook, input.target)))
    .reduce(worse);
  const here = forcesAt(shape, input.arms, space.low, shape.count - 1);
  if ([worst.ratio, worst.baseTension, worst.capacity, here.capacity].some(Number.isNaN))
    return cannotJudge([
      {
        code: 'not-a-number',
        text: 'The forces could not be worked out.',
        remedy: 'Check the body values in the rig file.',
      },
    ]);
  if (input.retractor !== null) return judgeRetractor({ ...input, margin }, shape, outlooks, here, pressure);
  const note = validityNote(body, here.length);
  if (worst.ratio >= margin)
    return { kind: 'clear', here, worst, margin, text: `${clearText(worst, margin)}${note}` };
  const text = `${buckleText(worst, here, margin)}${note}`;
  return { kind: 'would-buckle', here, worst, margin, text, remedies: [] };
};

/** The one with the smaller ratio; one that is not a number is worse than any. */
const worse = (a: ForcesAt, b: ForcesAt): ForcesAt => (Number.isNaN(a.ratio) || a.ratio <= b.ratio ? a : b);

/**
 * With a tip retractor the inversion force stays at the tip. Two things remain: the tip must not crush (PA ≥ m·T_tip),
 * and what the spool still holds loads the whole length (F_b ≥ m·T_held).
 */
const judgeRetractor = (
  input: WayBackInput,
  shape: SampledShape,
  outlooks: Outlook[],
  here: ForcesAt,
  pressure: number,
): WayBack => {
  const { margin, target, body } = input;
  const held = input.retractor?.heldTension ?? Number.NaN;
  const least = outlooks.map((outlook) => leastCapacity(shape, outlook, target));
  const heldMax = Math.min(...least) / margin;
  const crush = (pressure - input.pressureBand) * area(body);
  const tipTension = Math.max(...outlooks.map((outlook) => outlook.tipTension));
  if (!(crush >= margin * tipTension))
    return cannotJudge([
      {
        code: 'tip-crush',
        text: `Inverting takes ${newtons(tipTension)} at the tip; the body presses with only ${newtons(crush)} (needs ${margin} times).`,
        remedy: 'Raise body pressure.',
      },
    ]);
  if (!(held >= 0 && held <= heldMax))
    return cannotJudge([
      held > heldMax
        ? {
            code: 'held-tension',
            text: `The spool still holds ${newtons(held)}; the body bears ${newtons(heldMax)} over its whole length.`,
            remedy: 'Hold Grow: while the retractor grips it only eases the spool off. Then pull.',
          }
        : {
            code: 'held-unknown',
            text: 'The tension that the spool holds is not known.',
            remedy: 'Check the tail tension sensor on the Rig tab.',
          },
    ]);
  const text = `The tip retractor takes the pull; the spool may hold ${newtons(heldMax)} and holds ${newtons(held)}.`;
  return { kind: 'by-tip-retractor', here, held, heldMax, margin, text };
};

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
  if (worst.capacity === 0) return `Gravity alone folds the body${where || ' as it lies here'}.`;
  return `Pulling takes ${newtons(worst.baseTension)} at the base, but the body folds at ${newtons(worst.capacity)}${where} (ratio ${worst.ratio.toFixed(2)}, needs ${margin}).`;
};

const newtons = (force: number): string => `${force < 10 ? force.toFixed(1) : force.toFixed(0)} N`;
