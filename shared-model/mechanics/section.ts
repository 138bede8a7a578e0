import type { Body } from '../body/body.ts';

/** A = πR² [m²]. */
export const area = (body: Body): number => Math.PI * body.radius ** 2;

/** EI with I = πR³t of the thin wall [N·m²]. */
export const bendingStiffness = (body: Body): number => body.E * Math.PI * body.radius ** 3 * body.wall;

/** S = PA + GπRt [N]: pressure stiffens the tube against shear. Source: Fichter, NASA TN D-3466 (1966), from memory. */
export const shearStiffness = (body: Body, pressure: number): number =>
  pressure * area(body) + body.G * Math.PI * body.radius * body.wall;
