import type { Passage } from '../../shared-model/contract/frame.ts';

/**
 * The north leat of Tarrow Mill, invented: a brick culvert with its base at the outfall and a fork 9.5 m in. The left
 * arm runs to a collapsed screen chamber, the right arm past a side drain to a silted sump, 38 m from the outfall.
 */
interface Stretch {
  readonly name: string;
  /** x right, z ahead [m] */
  readonly plan: readonly (readonly [x: number, z: number])[];
  readonly width: readonly number[];
  readonly height: readonly number[];
}

const FORK: readonly [number, number] = [0.04, 9.5];

const STRETCHES: readonly Stretch[] = [
  {
    name: 'leat',
    plan: [[0, -0.6], [0, 0], [0, 2.5], [0.02, 5], [0.04, 7.5], FORK],
    width: [0.7, 0.7, 0.66, 0.6, 0.72, 0.9],
    height: [1, 1, 0.95, 0.9, 0.95, 1.05],
  },
  {
    name: 'left arm',
    plan: [
      FORK,
      [-0.38, 10.25],
      [-0.98, 11.0],
      [-1.74, 11.6],
      [-2.6, 12.1],
      [-3.5, 12.55],
      [-4.6, 13.0],
      [-5.6, 13.5],
    ],
    width: [0.9, 0.74, 0.7, 0.68, 0.66, 0.7, 0.8, 0.9],
    height: [1.05, 0.95, 0.9, 0.9, 0.85, 0.9, 1, 1.1],
  },
  {
    name: 'right arm',
    plan: [
      FORK,
      [0.42, 10.28],
      [1.0, 11.05],
      [1.75, 11.75],
      [2.6, 12.35],
      [3.6, 12.9],
      [6, 14.1],
      [9, 15.4],
      [12.5, 17.2],
      [16, 19.6],
      [18.8, 22.6],
      [20.6, 26.2],
      [21.6, 30],
      [21.8, 32.6],
    ],
    width: [0.9, 0.72, 0.68, 0.66, 0.66, 0.66, 0.62, 0.6, 0.64, 0.6, 0.62, 0.66, 0.7, 0.8],
    height: [1.05, 0.95, 0.9, 0.9, 0.9, 0.88, 0.85, 0.85, 0.85, 0.8, 0.8, 0.75, 0.7, 0.65],
  },
  {
    name: 'side drain',
    plan: [
      [9, 15.4],
      [9.7, 14.7],
      [10.9, 14.2],
      [12.2, 14.0],
    ],
    width: [0.62, 0.52, 0.5, 0.5],
    height: [0.85, 0.7, 0.6, 0.6],
  },
];

/** The leat for a body of `radius`: its floor lies that far below the body's axis. */
export const leatPassages = (radius: number): Passage[] =>
  STRETCHES.map(({ name, plan, width, height }) => ({
    name,
    centreline: plan.map(([x, z]) => [x, radius, z] as const),
    width,
    height,
  }));
