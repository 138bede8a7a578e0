import type { OutlookLine } from '../contract/frame.ts';
import type { SampledShape } from '../shape/sampled-shape.ts';
import type { JudgeSpace } from './judge.ts';

/** Points of the chart. */
const POINTS = 160;

/** A judgement as a chart, thinned: at each length the end of the pressure band that the verdict rests on. */
export const outlookLine = (shape: SampledShape, { low, high }: JudgeSpace, margin: number): OutlookLine => {
  // A judgement of another body, as after a reconnection, is none of this one.
  if (low.count !== shape.count) return { length: [], invert: [], buckle: [], margin };
  const stride = Math.max(1, Math.ceil(low.count / POINTS));
  const stations = Array.from({ length: low.count }, (_, i) => i).filter(
    (i) => i > 0 && (i % stride === 0 || i === low.count - 1),
  );
  const worse = (i: number) => (low.ratio[i]! <= high.ratio[i]! ? low : high);
  return {
    length: stations.map((i) => rounded(shape.s[i]!)),
    invert: stations.map((i) => rounded(worse(i).baseTension[i]!)),
    buckle: stations.map((i) => rounded(worse(i).capacity[i]!)),
    margin,
  };
};

/** Enough digits for a chart, few enough for a frame. */
const rounded = (value: number): number => Number(value.toPrecision(5));
