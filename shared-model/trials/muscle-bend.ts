import type { Muscles } from '../body/body.ts';
import { bendOfPressures } from '../steering/muscle-bend.ts';
import { bandOf, leastSquares } from './least-squares.ts';
import { along } from './tail-length.ts';
import { inRange, type PointsOf, type TrialFit, VALUE_RANGES } from './trial.ts';

const LEAST_POINTS = 4;

/** Gain of the bend: what is measured with one muscle at work, over what its contraction curve alone would give. */
export const fitMuscleBend = (points: PointsOf<'muscle-bend'>, muscles: Muscles): TrialFit => {
  if (muscles.muscles.length === 0) return { ok: false, why: 'This rig has no steering muscles.' };
  if (points.length < LEAST_POINTS)
    return { ok: false, why: `Needs ${LEAST_POINTS} pressures; there are ${points.length}.` };
  const fit = leastSquares(
    ([gain]) => points.map(({ pressure, bend }) => gain! * ungained(muscles, pressure) - bend),
    [muscles.bendGain],
  );
  if (fit === null)
    return {
      ok: false,
      why: 'The pressures do not determine a gain: take them where the muscle bends the body.',
    };
  const [gain] = fit.parameters as [number];
  if (!inRange('bendGain', gain))
    return {
      ok: false,
      why: `The gain comes to ${gain.toFixed(2)}; allowed is ${VALUE_RANGES.bendGain.join(' to ')}. Check units and muscle.`,
    };
  const most = Math.max(...points.map((point) => point.pressure));
  return {
    ok: true,
    values: [{ name: 'bendGain', value: gain, halfWidth: bandOf(fit, [1]) }],
    deviation: fit.deviation,
    plot: {
      x: 'Muscle pressure, kPa',
      y: 'Bend, 1/m',
      points: points.map(({ pressure, bend }) => [pressure / 1000, bend]),
      line: along(0, most).map((P) => ({
        x: P / 1000,
        y: gain * ungained(muscles, P),
        band: bandOf(fit, [ungained(muscles, P)]),
      })),
    },
  };
};

/** Bend of one muscle at a pressure with a gain of 1 [1/m]. */
const ungained = (muscles: Muscles, pressure: number): number => {
  const alone = muscles.muscles.map((_, i) => (i === 0 ? pressure : 0));
  const { right, down } = bendOfPressures({ ...muscles, bendGain: 1 }, alone);
  return Math.hypot(right, down);
};
