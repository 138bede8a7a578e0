import type { Muscles } from '../body/body.ts';
import { curveAt, inverseAt } from './monotone-curve.ts';

/** Bend of the free end [1/m]: towards local +x (right) and +y (down). */
export interface Bend {
  readonly right: number;
  readonly down: number;
}
export const STRAIGHT: Bend = { right: 0, down: 0 };

export interface MuscleBend extends Bend {
  /** Centreline length over body length, 1 − ε̄. */
  readonly centreline: number;
  /** Root mean square misfit of the contractions, a fault sign where there are more than three muscles. */
  readonly residual: number;
}

/**
 * Bend that the contractions ε_i come to. A muscle's length is l_i = L(1 − ε̄)(1 − r_m κ⃗·u_i); the three unknowns are
 * fitted by least squares. For n ≥ 3 equally spaced muscles that is κ⃗ = 2/(n·r_m·(1 − ε̄))·Σε_i·u_i, for n = 3 the
 * closed form of Webster & Jones, IJRR (2010).
 */
export const bendOfContractions = (muscles: Muscles, contractions: readonly number[]): MuscleBend => {
  const rows = muscles.muscles.map(({ angle }) => [1, Math.cos(angle), Math.sin(angle)] as const);
  const [mean, x, y] = leastSquares(rows, contractions);
  const centreline = 1 - mean;
  const perMetre = muscles.bendGain / (muscles.radius * centreline);
  const misfit = rows.reduce((sum, [, c, s], i) => sum + (mean + x * c + y * s - contractions[i]!) ** 2, 0);
  return { right: x * perMetre, down: y * perMetre, centreline, residual: Math.sqrt(misfit / rows.length) };
};

export const bendOfPressures = (muscles: Muscles, pressures: readonly number[]): MuscleBend =>
  bendOfContractions(
    muscles,
    pressures.map((pressure) => curveAt(muscles.contraction, pressure)),
  );

export interface SteeringPressures {
  /** One a muscle [Pa gauge], the least of them zero: no muscle works against another without need. */
  readonly pressures: readonly number[];
  /** The bend they come to; shorter than the wanted one where the muscles cannot reach it. */
  readonly reached: Bend;
}

/** Muscle pressures for a wanted bend, in its direction as far as the strongest muscle reaches at `pressureMax` [Pa]. */
export const pressuresForBend = (muscles: Muscles, wanted: Bend, pressureMax: number): SteeringPressures => {
  const strongest = curveAt(muscles.contraction, pressureMax);
  const largest = (share: number) => Math.max(...contractionsFor(muscles, scaled(wanted, share)));
  let share = 1;
  if (largest(1) > strongest) {
    let low = 0;
    for (let i = 0; i < 50; i++) {
      const middle = (low + share) / 2;
      if (largest(middle) > strongest) share = middle;
      else low = middle;
    }
    share = low;
  }
  const reached = scaled(wanted, share);
  const pressures = contractionsFor(muscles, reached).map((contraction) =>
    contraction <= 0 ? 0 : Math.min(pressureMax, inverseAt(muscles.contraction, contraction)),
  );
  return { pressures, reached };
};

/** ε_i = c + (1 − c)·r_m κ⃗·u_i with c = h/(1 + h), h = max(−r_m κ⃗·u_i), so that the slackest muscle has ε = 0. */
const contractionsFor = (muscles: Muscles, bend: Bend): number[] => {
  const lever = muscles.radius / muscles.bendGain;
  const pulls = muscles.muscles.map(
    ({ angle }) => lever * (bend.right * Math.cos(angle) + bend.down * Math.sin(angle)),
  );
  const h = Math.max(0, ...pulls.map((pull) => -pull));
  const c = h / (1 + h);
  return pulls.map((pull) => Math.max(0, c + (1 - c) * pull));
};

const scaled = (bend: Bend, share: number): Bend => ({ right: bend.right * share, down: bend.down * share });

type Row = readonly [number, number, number];

/** Least squares of three unknowns by Cramer's rule; the small ridge leaves out what two muscles cannot tell. */
const leastSquares = (rows: readonly Row[], values: readonly number[]): Row => {
  const sum = (f: (row: Row, i: number) => number) => rows.reduce((total, row, i) => total + f(row, i), 0);
  const m = [0, 1, 2].map((r) =>
    [0, 1, 2].map((c) => sum((row) => row[r]! * row[c]!) + (r === c ? 1e-12 : 0)),
  );
  const v = [0, 1, 2].map((r) => sum((row, i) => row[r]! * values[i]!));
  const determinant = det(m);
  const solve = (column: number) =>
    det(m.map((row, r) => row.map((x, c) => (c === column ? v[r]! : x)))) / determinant;
  return [solve(0), solve(1), solve(2)];
};

const det = (m: readonly (readonly number[])[]): number => {
  const [a, b, c] = m as [number[], number[], number[]];
  return (
    a[0]! * (b[1]! * c[2]! - b[2]! * c[1]!) -
    a[1]! * (b[0]! * c[2]! - b[2]! * c[0]!) +
    a[2]! * (b[0]! * c[1]! - b[1]! * c[0]!)
  );
};
