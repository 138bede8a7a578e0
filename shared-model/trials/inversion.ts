import type { BodyDescription } from '../body/body.ts';
import { amplifiedLength, capstan, inversionTension } from '../mechanics/inversion.ts';
import { area } from '../mechanics/section.ts';
import { bandOf, leastSquares } from './least-squares.ts';
import { along } from './tail-length.ts';
import { inRange, type PointsOf, type TrialFit, VALUE_RANGES } from './trial.ts';

const LEAST_POINTS = 5;
/** Friction shows only where the tail is turned: at least this much apart [rad]. */
const LEAST_TURN = 0.7;

/**
 * Y_r and μ from the tension at the base while the tip turns slowly: T = (A/2)(P + Y_r)·e^{μΘ} + the drag of the tail's own
 * weight, bend taken as even along the body. Quasi-static: the rate term is left out, so pull at fine speed.
 */
export const fitInversion = (points: PointsOf<'inversion'>, body: BodyDescription): TrialFit => {
  if (points.length < LEAST_POINTS)
    return { ok: false, why: `Needs ${LEAST_POINTS} pulls; there are ${points.length}.` };
  const turns = points.map((point) => point.turn);
  if (!(Math.max(...turns) - Math.min(...turns) >= LEAST_TURN))
    return {
      ok: false,
      why: `Friction shows only in bends: pull straight, and with the body turned by ${LEAST_TURN} rad or more.`,
    };
  const tensionAt = (
    Y: number,
    mu: number,
    { pressure, length, turn }: Omit<PointsOf<'inversion'>[number], 'tension'>,
  ) =>
    inversionTension(area(body), pressure, { ...body.inversion, yield: Y }, 0) * capstan(mu, turn) +
    mu * body.tailWeight * amplifiedLength(mu, 0, turn, length);
  const fit = leastSquares(
    ([Y, mu]) => points.map((point) => tensionAt(Y!, mu!, point) - point.tension),
    [body.inversion.yield, Math.max(0.05, body.friction)],
  );
  if (fit === null)
    return { ok: false, why: 'The pulls do not determine both values: vary pressure and bend.' };
  const [Y, mu] = fit.parameters as [number, number];
  if (!(Y >= 0))
    return {
      ok: false,
      why: `The yield comes to ${(Y / 1000).toFixed(2)} kPa, below zero. Check the load cell’s zero.`,
    };
  if (!inRange('inversionYield', Y))
    return {
      ok: false,
      why: `The yield comes to ${(Y / 1000).toFixed(0)} kPa; up to ${VALUE_RANGES.inversionYield[1] / 1000} kPa is allowed. Check the units of the tension.`,
    };
  if (!inRange('friction', mu))
    return {
      ok: false,
      why: `The friction comes to ${mu.toFixed(2)}; allowed is ${VALUE_RANGES.friction.join(' to ')}. Check the bends.`,
    };
  const pressures = points.map((point) => point.pressure);
  const length = points.reduce((sum, point) => sum + point.length, 0) / points.length;
  const gradient = (place: { pressure: number; length: number; turn: number }) => {
    const [dY, dmu] = [1e-3 * (Y + 1), 1e-4];
    return [
      (tensionAt(Y + dY, mu, place) - tensionAt(Y - dY, mu, place)) / (2 * dY),
      (tensionAt(Y, mu + dmu, place) - tensionAt(Y, mu - dmu, place)) / (2 * dmu),
    ];
  };
  return {
    ok: true,
    values: [
      { name: 'inversionYield', value: Y, halfWidth: bandOf(fit, [1, 0]) },
      { name: 'friction', value: mu, halfWidth: bandOf(fit, [0, 1]) },
    ],
    deviation: fit.deviation,
    plot: {
      x: 'Body pressure, kPa',
      y: 'Tension, less what bends add, N',
      // Each tension taken back to a straight body of mean length, so that all lie on one line.
      points: points.map((point) => {
        const straight = { ...point, length, turn: 0 };
        return [point.pressure / 1000, point.tension - tensionAt(Y, mu, point) + tensionAt(Y, mu, straight)];
      }),
      line: along(Math.min(...pressures), Math.max(...pressures)).map((pressure) => {
        const place = { pressure, length, turn: 0 };
        return { x: pressure / 1000, y: tensionAt(Y, mu, place), band: bandOf(fit, gradient(place)) };
      }),
    },
  };
};
