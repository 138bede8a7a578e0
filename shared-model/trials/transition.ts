import type { BodyDescription } from '../body/body.ts';
import { WEIGHTLESS } from '../mechanics/gravity-moment.ts';
import { createArms, updateStation } from '../retraction/arms.ts';
import { capacityAt } from '../retraction/outlook.ts';
import { sampleSegments } from '../shape/segments.ts';
import { leastSquares, studentT95 } from './least-squares.ts';
import { inRange, type PointsOf, type TrialFit, VALUE_RANGES } from './trial.ts';

type Point = PointsOf<'transition'>[number];

const LEAST_POINTS = 6;
const LEAST_BENDS = 3;

/**
 * η and ε₀ from the tensions at which the body just folded, straight and in bends: the capacity of the verdict equals
 * them. The margin that the scatter justifies: with capacity over tension c scattering by s around 1 in n trials, a further
 * one lies above 1 − t·s·√(1 + 1/n) (95 %, Student), so the margin is one over that, and at least 1.25.
 */
export const fitTransition = (points: PointsOf<'transition'>, body: BodyDescription): TrialFit => {
  if (points.length < LEAST_POINTS)
    return { ok: false, why: `Needs ${LEAST_POINTS} folds; there are ${points.length}.` };
  if (new Set(points.map((point) => point.bend.toFixed(2))).size < LEAST_BENDS)
    return {
      ok: false,
      why: 'Fold it straight and in two different bends: one shape alone does not tell the values apart.',
    };
  if (points.some((point) => !(point.tension > 0 && point.pressure > 0 && point.length > 0)))
    return { ok: false, why: 'Every fold needs a length, a pressure and a tension above zero.' };
  const bears = points.map((point) => capacityOf(point, body));
  const ratios = (eta: number, floor: number) =>
    points.map((point, i) => bears[i]!(eta, floor) / point.tension);
  const fit = leastSquares(
    // Logarithms keep both above zero.
    ([eta, floor]) => ratios(Math.exp(eta!), Math.exp(floor!)).map((ratio) => ratio - 1),
    [Math.log(body.collapseFraction), Math.log(Math.max(0.02, body.eccentricityFloor))],
  );
  if (fit === null)
    return { ok: false, why: 'The folds do not determine both values: vary length and bend.' };
  const [eta, floor] = fit.parameters.map(Math.exp) as [number, number];
  if (!(eta <= 1.05))
    return {
      ok: false,
      why: `The body bore ${eta.toFixed(2)} of the full collapse; more than 1 is not possible. Check tension and pressure.`,
    };
  if (!inRange('collapseFraction', Math.min(1, eta)) || !inRange('eccentricityFloor', floor))
    return {
      ok: false,
      why: `The body bore ${eta.toFixed(2)} of the full collapse with an arm of ${floor.toFixed(2)} radii; allowed are ${VALUE_RANGES.collapseFraction.join(' to ')} and ${VALUE_RANGES.eccentricityFloor.join(' to ')}. Check tensions and bends.`,
    };
  const t = studentT95(fit.degreesOfFreedom);
  const lowest = 1 - t * fit.deviation * Math.sqrt(1 + 1 / points.length);
  const margin = Math.max(VALUE_RANGES.margin[0], lowest > 0 ? 1 / lowest : Number.POSITIVE_INFINITY);
  if (!inRange('margin', margin))
    return {
      ok: false,
      why: `The folds scatter by ${(100 * fit.deviation).toFixed(0)} %: no margin below 2 is justified. Repeat the trial.`,
    };
  const fitted = ratios(eta, floor).map((ratio, i) => ratio * points[i]!.tension);
  const most = Math.max(...fitted, ...points.map((point) => point.tension));
  return {
    ok: true,
    values: [
      { name: 'collapseFraction', value: Math.min(1, eta), halfWidth: eta * t * fit.standardErrors[0]! },
      { name: 'eccentricityFloor', value: floor, halfWidth: floor * t * fit.standardErrors[1]! },
      { name: 'margin', value: margin, halfWidth: 0 },
    ],
    deviation: fit.deviation,
    plot: {
      x: 'Tension at which it should fold, N',
      y: 'Tension at which it folded, N',
      points: points.map((point, i) => [fitted[i]!, point.tension]),
      line: [0, most].map((x) => ({ x, y: x, band: x * t * fit.deviation })),
    },
  };
};

/** Capacity [N] of a body in one even bend, over η and ε₀. */
export const capacityOf = ({ length, bend, pressure }: Omit<Point, 'tension'>, body: BodyDescription) => {
  const shape = sampleSegments([{ length, curvature: bend, plane: 0 }], length / 100);
  const arms = createArms(shape.count, { setback: body.guideSetback, gravity: WEIGHTLESS });
  const tip = shape.count - 1;
  updateStation(arms, shape, tip);
  return (eta: number, floor: number): number =>
    capacityAt(
      shape,
      arms,
      {
        body: { ...body, collapseFraction: eta, eccentricityFloor: floor },
        pressure,
        tipSpeed: 0,
        excess: 0,
        shortest: 0,
      },
      tip,
    );
};
