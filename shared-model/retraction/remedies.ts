import type { Limits } from '../body/body.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import { createJudgeSpace, type JudgeSpace, judgeWayBack } from './judge.ts';
import { type OtherBody, straightenedTip, thinned } from './other-body.ts';
import { HOOP_FACTOR } from './standing.ts';
import type { Remedy } from './verdict.ts';
import type { WayBackInput } from './way-back-input.ts';

/**
 * What would make a refused pull safe, worked out with the same judgement; what clears the pull comes first. Nothing is
 * offered that the limits forbid or that does not help. Searched on a thinned body, and offered only after a judgement of
 * the whole one: several times the work of a verdict, so for a person's pace, not for every tick.
 * @param hasRetractor whether the rig can have a tip retractor at all
 */
export const findRemedies = (
  input: WayBackInput,
  limits: Limits,
  hasRetractor: boolean,
  space: JudgeSpace = createJudgeSpace(),
): Remedy[] => {
  const verdict = judgeWayBack(input, space);
  if (verdict.kind !== 'would-buckle' || input.shape === null) return [];
  const body: OtherBody = { shape: input.shape, arms: input.arms };
  const found = [
    hasRetractor ? TIP_RETRACTOR : null,
    shorterRemedy(body.shape, input.margin, space),
    pressureRemedy(input, body, limits, verdict.worst.ratio),
    straightenRemedy(input, body),
  ].filter((remedy) => remedy !== null);
  return found.sort((a, b) => rank(a, input.margin) - rank(b, input.margin));
};

/** What a person can do now and is sure to help, then what only comes nearer, then what would have helped before. */
const rank = ({ kind, ratio }: Remedy, margin: number): number => {
  if (kind === 'tip-retractor') return 0;
  if (kind === 'shorter') return 3;
  return ratio !== null && ratio >= margin ? 1 : 2;
};

/** Stations of the body that is searched on. */
const SEARCHED = 150;

const TIP_RETRACTOR: Remedy = {
  kind: 'tip-retractor',
  text: 'Engage the tip retractor: it takes the pull at the tip, so nothing of it can fold the body.',
  label: 'Tip retractor',
  effect: 'no pull on the body',
  ratio: null,
  value: null,
};

/** Smallest ratio on the way of a body that might be, or −1 where it cannot be judged. */
const worstRatio = (input: WayBackInput, { shape, arms }: OtherBody, space?: JudgeSpace): number => {
  const verdict = judgeWayBack({ ...input, shape, arms }, space);
  return verdict.kind === 'clear' || verdict.kind === 'would-buckle' ? verdict.worst.ratio : -1;
};

/** A change of the ratio that a person would see in two decimals and find worth the while. */
const WORTHWHILE = 0.05;

/** The pressure within limits with the best ratio, if it clears the pull or comes nearer to that. */
const pressureRemedy = (
  input: WayBackInput,
  body: OtherBody,
  limits: Limits,
  present: number,
): Remedy | null => {
  const rough = thinned(body, SEARCHED);
  const space = createJudgeSpace(rough.shape.count);
  const ratioAt = (pressure: number) => worstRatio({ ...input, pressure }, rough, space);
  const { hoopStrength, radius } = input.body;
  const hoopMax = hoopStrength === null ? Number.POSITIVE_INFINITY : hoopStrength / (HOOP_FACTOR * radius);
  const most = Math.min(limits.bodyPressureMax, hoopMax);
  if (!(most >= limits.bodyPressureMin)) return null;
  const value = bestPressure(ratioAt, limits.bodyPressureMin, most);
  const ratio = worstRatio({ ...input, pressure: value }, body);
  const clears = ratio >= input.margin;
  if (!clears && !(ratio >= present + WORTHWHILE)) return null;
  const way = value < (input.pressure ?? 0) ? 'Lower' : 'Raise';
  const still = clears ? '' : `, nearer to ${input.margin} but not enough by itself`;
  const text = `${way} body pressure to ${(value / 1000).toFixed(2)} kPa: ratio ${ratio.toFixed(2)}${still}.`;
  return {
    kind: 'body-pressure',
    text,
    label: `${way} to ${(value / 1000).toFixed(2)} kPa`,
    effect: effectOf(ratio, input.margin),
    ratio,
    value,
  };
};

/** Pressures that a person sets in [Pa]. */
const PRESSURE_STEP = 50;
const PRESSURES_SCANNED = 12;

/** Where the ratio is largest: a scan, since the limits may cut it anywhere, then a golden-section search. */
const bestPressure = (ratioAt: (pressure: number) => number, min: number, max: number): number => {
  const grid = Array.from(
    { length: PRESSURES_SCANNED + 1 },
    (_, i) => min + ((max - min) * i) / PRESSURES_SCANNED,
  );
  const ratios = grid.map(ratioAt);
  const top = ratios.indexOf(Math.max(...ratios));
  let low = grid[Math.max(0, top - 1)] as number;
  let high = grid[Math.min(PRESSURES_SCANNED, top + 1)] as number;
  const golden = (Math.sqrt(5) - 1) / 2;
  while (high - low > PRESSURE_STEP) {
    const a = high - golden * (high - low);
    const b = low + golden * (high - low);
    if (ratioAt(a) >= ratioAt(b)) high = b;
    else low = a;
  }
  const rounded = PRESSURE_STEP * Math.round((low + high) / 2 / PRESSURE_STEP);
  const fine = Math.min(max, Math.max(min, rounded));
  return ratioAt(fine) >= (ratios[top] as number) ? fine : (grid[top] as number);
};

/** The search asks for a little more than the margin, since the judgement of the whole body may come out lower. */
const SEARCH_MARGIN = 1.01;

/** The least length at the tip that has to lie straight, of what can still be steered, when that clears the pull. */
const straightenRemedy = (input: WayBackInput, body: OtherBody): Remedy | null => {
  const rough = thinned(body, SEARCHED);
  const space = createJudgeSpace(rough.shape.count);
  const clears = (station: number) =>
    worstRatio(input, straightenedTip(rough, station), space) >= SEARCH_MARGIN * input.margin;
  let enough = firstStationFrom(rough.shape, tipLength(rough.shape) - input.body.freeEnd);
  if (!clears(enough)) return null;
  let tooLittle = rough.shape.count - 1;
  while (tooLittle - enough > 1) {
    const middle = (enough + tooLittle) >> 1;
    if (clears(middle)) enough = middle;
    else tooLittle = middle;
  }
  const station = firstStationFrom(body.shape, rough.shape.s[enough]!);
  const ratio = worstRatio(input, straightenedTip(body, station));
  if (!(ratio >= input.margin)) return null;
  const value = tipLength(body.shape) - body.shape.s[station]!;
  const what = station === 0 ? `all ${value.toFixed(2)} m` : `the last ${value.toFixed(2)} m to the tip`;
  return {
    kind: 'straighten',
    text: `Straighten ${what}: ratio ${ratio.toFixed(2)}.`,
    label: `Straighten ${value.toFixed(1)} m`,
    effect: effectOf(ratio, input.margin),
    ratio,
    value,
  };
};

const effectOf = (ratio: number, margin: number): string =>
  ratio >= margin ? `ratio ${ratio.toFixed(2)}` : `ratio ${ratio.toFixed(2)}, not enough`;

/**
 * The body and the outlooks that a remedy would give, for showing them beside the present ones. Null where the remedy
 * cannot be worked out for this input any more.
 */
export const remedied = (
  input: WayBackInput,
  remedy: Remedy,
): { readonly shape: SampledShape; readonly space: JudgeSpace } | null => {
  if (input.shape === null || remedy.value === null) return null;
  const space = createJudgeSpace(input.shape.count);
  const judged = (changes: Partial<WayBackInput>) => {
    const verdict = judgeWayBack({ ...input, ...changes }, space);
    const shape = changes.shape ?? input.shape;
    return verdict.kind === 'cannot-judge' || shape === null ? null : { shape, space };
  };
  if (remedy.kind === 'body-pressure') return judged({ pressure: remedy.value });
  if (remedy.kind !== 'straighten') return null;
  const body = { shape: input.shape, arms: input.arms };
  const from = firstStationFrom(input.shape, tipLength(input.shape) - remedy.value - 1e-9);
  return judged(straightenedTip(body, from));
};

const tipLength = (shape: SampledShape): number => shape.s[shape.count - 1]!;

const firstStationFrom = (shape: SampledShape, length: number): number => {
  let station = 0;
  while (station < shape.count - 1 && !(shape.s[station]! >= length)) station++;
  return station;
};

/** The longest body length up to which this shape can be pulled all the way to the base, by the outlooks just made. */
const shorterRemedy = (shape: SampledShape, margin: number, space: JudgeSpace): Remedy | null => {
  const outlooks = [space.low, space.high];
  let value = 0;
  for (let j = 0; j < shape.count && outlooks.every((outlook) => outlook.ratio[j]! >= margin); j++)
    value = shape.s[j]!;
  if (!(value > 0)) return null;
  const text = `The longest this shape can be pulled from the base is ${value.toFixed(2)} m.`;
  return {
    kind: 'shorter',
    text,
    label: `At most ${value.toFixed(2)} m`,
    effect: 'of this shape',
    ratio: margin,
    value,
  };
};
