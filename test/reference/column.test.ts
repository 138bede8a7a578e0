import { describe, expect, it } from 'vitest';
import { columnLoad, setbackRoot } from '../../shared-model/mechanics/column.ts';
import { bendingStiffness, shearStiffness } from '../../shared-model/mechanics/section.ts';
import { BODY_B, PRESSURE_B } from './body-b.ts';

const RIGID = 1e18;
const K_OF_ROOT = (u: number): number => Math.PI / u;

describe('the column', () => {
  const EI = bendingStiffness(BODY_B);
  const S = shearStiffness(BODY_B, PRESSURE_B);

  // Design note, body B: EI = 2.011 N·m², S = 490.1 N.
  it('of body B is as stiff as computed by hand', () => {
    expect(EI).toBeCloseTo(2.011, 3);
    expect(S).toBeCloseTo(490.1, 1);
  });

  // Timoshenko & Gere, load through a fixed point: tan u = −(a/L)u, from memory.
  it.each([
    [0, Math.PI],
    [0.1, 2.86277],
    [0.5, 2.28893],
    [1, 2.02876],
    [5, 1.68868],
  ])('pulled towards a guide %s lengths behind the clamp has the root %s', (setback, root) => {
    expect(setbackRoot(1, RIGID, 1, setback)).toBeCloseTo(root, 5);
  });

  // Column factors K (Timoshenko & Gere, from memory): pinned–pinned 1; the pull to a guide infinitely far behind keeps its
  // direction, which is the fixed–free column of K = 2.
  it('lies between the pinned column and the one fixed at one end', () => {
    expect(K_OF_ROOT(setbackRoot(1, RIGID, 1, 0))).toBeCloseTo(1, 12);
    expect(K_OF_ROOT(setbackRoot(1, RIGID, 1, 1e9))).toBeCloseTo(2, 6);
  });

  // Design note: a/L = 0.1 costs 17 % of the load.
  it('loses 17 % by a guide a tenth of the length behind', () => {
    expect(columnLoad(EI, RIGID, 1, 0.1) / columnLoad(EI, RIGID, 1, 0)).toBeCloseTo(0.83, 2);
  });

  // Fichter, NASA TN D-3466 (1966), limits of 1/F = 1/F_E + 1/S, from memory.
  it('bears S when short, the Euler load when long or stiff in shear, and half where both are equal', () => {
    expect(columnLoad(EI, S, 0, 0)).toBe(S);
    expect(columnLoad(EI, S, 1e-9, 0.05)).toBeCloseTo(S, 6);
    expect(columnLoad(EI, S, 1e4, 0) / ((Math.PI ** 2 * EI) / 1e8)).toBeCloseTo(1, 6);
    expect(columnLoad(EI, RIGID, 0.5, 0) / ((Math.PI ** 2 * EI) / 0.25)).toBeCloseTo(1, 12);
    const equal = Math.sqrt((Math.PI ** 2 * EI) / S);
    expect(columnLoad(EI, S, equal, 0)).toBeCloseTo(S / 2, 9);
  });

  // Computed independently of this code: body B at 0.5 m, F_E = 79.3761 N, F_c = 68.3121 N.
  it('of body B at half a metre bears 68.3 N', () => {
    expect(columnLoad(EI, RIGID, 0.5, 0)).toBeCloseTo(79.3761, 4);
    expect(columnLoad(EI, S, 0.5, 0)).toBeCloseTo(68.3121, 4);
  });
});
