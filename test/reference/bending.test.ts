import { describe, expect, it } from 'vitest';
import { capacity } from '../../shared-model/mechanics/capacity.ts';
import { collapseMoment, wrinkledMoment, wrinkleMoment } from '../../shared-model/mechanics/collapse.ts';
import { columnLoad } from '../../shared-model/mechanics/column.ts';
import { gravityMoment } from '../../shared-model/mechanics/gravity-moment.ts';
import { hoopStress, insideBendFactor } from '../../shared-model/mechanics/growth.ts';
import { area, bendingStiffness, shearStiffness } from '../../shared-model/mechanics/section.ts';
import { sampleSegments } from '../../shared-model/shape/segments.ts';
import { BODY_B, PRESSURE_B } from './body-b.ts';

const R = BODY_B.radius;
const PA = PRESSURE_B * area(BODY_B);
const STIFF = Number.POSITIVE_INFINITY;

describe('a tube bent by a moment', () => {
  // Leonard, Brooks & McComb, NASA TN D-457 (1960) and Comer & Levy, AIAA J. 1 (1963), both from memory.
  it('wrinkles at ½πPR³ and collapses at πPR³', () => {
    expect(collapseMoment(PRESSURE_B, R)).toBeCloseTo(Math.PI * 10e3 * 6.4e-5, 10);
    expect(wrinkleMoment(PRESSURE_B, R)).toBeCloseTo((Math.PI * 10e3 * 6.4e-5) / 2, 10);
  });

  // Comer & Levy, from memory: the slack grows from nothing (½π) to all around (π).
  it('goes from the one to the other as its wall goes slack', () => {
    expect(wrinkledMoment(0)).toBeCloseTo(Math.PI / 2, 12);
    expect(wrinkledMoment(Math.PI - 1e-3)).toBeCloseTo(Math.PI, 2);
    // Half slack, by hand: tension σt·cos α over |α| < π/2 holds πR²P, so σt = ½πRP, and its moment is ½π·σt·R².
    expect(wrinkledMoment(Math.PI / 2)).toBeCloseTo(Math.PI ** 2 / 4, 12);
  });
});

describe('a body under an offset pull', () => {
  // Equilibrium of a wall that bears no compression: F·e = (PA − F)·R.
  it.each([
    [0, 1],
    [1, 1 / 2],
    [3, 1 / 4],
  ])('on a stiff column, offset by %s radii, folds at %s of PA', (radii, share) => {
    expect(capacity(STIFF, PA, R, radii * R, 0, 1)).toBeCloseTo(share * PA, 12);
    expect(capacity(1e15, PA, R, radii * R, 0, 1)).toBeCloseTo(share * PA, 9);
  });

  // The interaction's own limits: no arm, or a column that does not give.
  it('without an arm folds at the weaker of column and wall', () => {
    expect(capacity(0.3 * PA, PA, R, 0, 0, 1)).toBeCloseTo(0.3 * PA, 12);
    expect(capacity(3 * PA, PA, R, 0, 0, 1)).toBeCloseTo(PA, 12);
  });

  // Computed independently of this code: body B, L = 0.5 m, η = 1.
  it.each([
    [0.1, 40.386],
    [0.25, 33.668],
    [0.5, 27.396],
    [1, 20.656],
  ])('body B at half a metre, offset by %s radii, folds at %s N', (radii, load) => {
    const F_c = columnLoad(bendingStiffness(BODY_B), shearStiffness(BODY_B, PRESSURE_B), 0.5, 0);
    expect(capacity(F_c, PA, R, radii * R, 0, 1)).toBeCloseTo(load, 3);
  });
});

describe('a level body that hangs free', () => {
  // Derived: wall and tail of density ρ and thickness t weigh 4πRtρg a metre; wL²/2 = PA·R gives L = R√(P/(2ρgt)).
  // g: standard gravity, 3rd CGPM (1901). 920 kg/m³: LDPE film, material data sheets.
  it('of body B folds under its own weight at 4.21 m, and at √2 of that with twice the pressure', () => {
    const weight = 4 * Math.PI * R * BODY_B.wall * 920 * 9.80665;
    const foldsAt = (length: number, pressure: number): boolean => {
      const shape = sampleSegments([{ length, curvature: 0, plane: 0 }], length / 50);
      const load = { weight, payload: 0, direction: [0, 1, 0], supported: 0 } as const;
      return (
        capacity(STIFF, pressure * area(BODY_B), R, 0, gravityMoment(shape, shape.count - 1, load), 1) === 0
      );
    };
    expect(foldsAt(4.2111, PRESSURE_B)).toBe(false);
    expect(foldsAt(4.2113, PRESSURE_B)).toBe(true);
    expect(foldsAt(4.2111 * Math.SQRT2, 2 * PRESSURE_B)).toBe(false);
    expect(foldsAt(4.2113 * Math.SQRT2, 2 * PRESSURE_B)).toBe(true);
  });
});

describe('the wall under pressure', () => {
  // Thin shell PR/t; torus factor (2ρ − R)/(2(ρ − R)).
  it('carries 10 MPa at 10 kPa in a 50 mm radius of 50 µm film, an eighth more inside a bend of five radii', () => {
    expect(hoopStress(10e3, 0.05, 50e-6)).toBeCloseTo(10e6, 3);
    expect(insideBendFactor(0.25, 0.05)).toBeCloseTo(1.125, 12);
  });
});
