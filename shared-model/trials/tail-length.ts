import { bandOf, leastSquares } from './least-squares.ts';
import { inRange, type PointsOf, type TrialFit, VALUE_RANGES } from './trial.ts';

/** Points and span of body length that a straight line needs [m]. */
const LEAST_POINTS = 4;
const LEAST_SPAN = 1;

/**
 * Scale and zero of the payout: twice the body length by tape is scale × payout as read + offset, while the tail is taut.
 */
export const fitTailLength = (points: PointsOf<'tail-length'>): TrialFit => {
  const tapes = points.map((point) => point.tape);
  if (points.length < LEAST_POINTS)
    return { ok: false, why: `Needs ${LEAST_POINTS} lengths; there are ${points.length}.` };
  if (!(Math.max(...tapes) - Math.min(...tapes) >= LEAST_SPAN))
    return { ok: false, why: `The lengths must span at least ${LEAST_SPAN} m.` };
  const fit = leastSquares(
    ([scale, offset]) => points.map(({ payout, tape }) => scale! * payout + offset! - 2 * tape),
    [1, 0],
  );
  if (fit === null)
    return { ok: false, why: 'The lengths do not determine a line: take them at different payouts.' };
  const [scale, offset] = fit.parameters as [number, number];
  if (!inRange('payoutScale', scale))
    return {
      ok: false,
      why: `The scale comes to ${scale.toFixed(3)}; allowed is ${VALUE_RANGES.payoutScale.join(' to ')}. Check tape and encoder.`,
    };
  if (!inRange('payoutOffset', offset))
    return {
      ok: false,
      why: `The zero is off by ${offset.toFixed(2)} m of tail; ${VALUE_RANGES.payoutOffset.join(' to ')} m is allowed. Set it at the rig.`,
    };
  const payouts = points.map((point) => point.payout);
  const [low, high] = [Math.min(...payouts), Math.max(...payouts)];
  return {
    ok: true,
    values: [
      { name: 'payoutScale', value: scale, halfWidth: bandOf(fit, [1, 0]) },
      { name: 'payoutOffset', value: offset, halfWidth: bandOf(fit, [0, 1]) },
    ],
    deviation: fit.deviation,
    plot: {
      x: 'Payout as read, m',
      y: 'Body length by tape, m',
      points: points.map(({ payout, tape }) => [payout, tape]),
      line: along(low, high).map((x) => ({ x, y: (scale * x + offset) / 2, band: bandOf(fit, [x, 1]) / 2 })),
    },
  };
};

/** Evenly spaced places of a line to draw. */
export const along = (low: number, high: number, count = 24): number[] =>
  Array.from({ length: count + 1 }, (_, i) => low + ((high - low) * i) / count);
