import type { Limits } from '../body/body.ts';
import { sampleSegments } from '../shape/segments.ts';
import { createArms, updateArms } from './arms.ts';
import { createJudgeSpace, type JudgeSpace, judgeWayBack, type WayBackInput } from './judge.ts';
import type { Remedy } from './verdict.ts';

/**
 * What would make a refused pull safe, worked out with the same judgement and sorted by how surely it helps. Nothing is
 * offered that the limits forbid or that leaves the pull refused, but for the pressure, which may also only come nearer.
 * @param hasRetractor whether the rig can have a tip retractor at all
 */
export const findRemedies = (
  input: WayBackInput,
  limits: Limits,
  hasRetractor: boolean,
  space: JudgeSpace = createJudgeSpace(),
): Remedy[] => {
  if (input.shape === null || input.pressure === null || input.payout === null) return [];
  const remedies: Remedy[] = [];
  if (hasRetractor)
    remedies.push({
      kind: 'tip-retractor',
      text: 'Engage the tip retractor: it takes the pull at the tip, so nothing of it can fold the body.',
      ratio: null,
      value: null,
    });
  const pressure = pressureRemedy(input, limits, space);
  if (pressure !== null) remedies.push(pressure);
  const straighten = straightenRemedy(input);
  if (straighten !== null) remedies.push(straighten);
  const shorter = longestLength(input, space);
  if (shorter !== null) remedies.push(shorter);
  return remedies;
};

const worstRatio = (input: WayBackInput, space: JudgeSpace): number => {
  const verdict = judgeWayBack(input, space);
  return verdict.kind === 'clear' || verdict.kind === 'would-buckle' ? verdict.worst.ratio : Number.NaN;
};

/** The pressure within limits with the best ratio (golden section; one interior optimum), when it clears the pull. */
const pressureRemedy = (input: WayBackInput, limits: Limits, space: JudgeSpace): Remedy | null => {
  const ratioAt = (pressure: number) => worstRatio({ ...input, pressure }, space);
  const golden = (Math.sqrt(5) - 1) / 2;
  let low = limits.bodyPressureMin;
  let high = limits.bodyPressureMax;
  while (high - low > 50) {
    const a = high - golden * (high - low);
    const b = low + golden * (high - low);
    if (ratioAt(a) >= ratioAt(b)) high = b;
    else low = a;
  }
  const value = Math.round((low + high) / 100) * 50;
  const ratio = ratioAt(value);
  if (!(ratio >= input.margin && value >= limits.bodyPressureMin && value <= limits.bodyPressureMax))
    return null;
  const way = value < (input.pressure ?? 0) ? 'Lower' : 'Raise';
  return {
    kind: 'body-pressure',
    text: `${way} body pressure to ${(value / 1000).toFixed(1)} kPa: ratio ${ratio.toFixed(2)}.`,
    ratio,
    value,
  };
};

/** What the same length would bear if all of it lay straight, when that clears the pull. */
const straightenRemedy = (input: WayBackInput): Remedy | null => {
  const shape = input.shape!;
  const length = shape.s[shape.count - 1]!;
  const straight = sampleSegments([{ length, curvature: 0, plane: 0 }], Math.max(0.01, length / 400));
  const arms = createArms(straight.count);
  updateArms(arms, straight, 0, input.body.guideSetback);
  const ratio = worstRatio({ ...input, shape: straight, arms }, createJudgeSpace());
  if (!(ratio >= input.margin)) return null;
  return {
    kind: 'straighten',
    text: `Straighten the body: lying straight, its ${length.toFixed(2)} m would have ratio ${ratio.toFixed(2)}.`,
    ratio,
    value: length,
  };
};

/** The longest body length up to which this shape can be pulled all the way. Uses the outlooks of the last judgement. */
const longestLength = (input: WayBackInput, space: JudgeSpace): Remedy | null => {
  judgeWayBack({ ...input, target: 0 }, space);
  const shape = input.shape!;
  let longest = 0;
  for (let j = 0; j < shape.count; j++) {
    const ratio = Math.min(space.nominal.ratio[j]!, space.low.ratio[j]!, space.high.ratio[j]!);
    if (!(ratio >= input.margin)) break;
    longest = shape.s[j]!;
  }
  if (!(longest > 0)) return null;
  return {
    kind: 'shorter',
    text: `The longest this shape can be pulled from the base is ${longest.toFixed(2)} m.`,
    ratio: input.margin,
    value: longest,
  };
};
