import type { PlantParameters } from './parameters.ts';

/** Shape and load of the true body at this moment. SI. */
export interface TrueState {
  readonly length: number;
  readonly pressure: number;
  readonly bend: number;
  readonly arm: number;
}

/** Tension at the base that turns the true tip outside in at tip speed v [N]. */
export const trueInversionTension = (p: PlantParameters, state: TrueState, speed: number): number => {
  const A = Math.PI * p.radius ** 2;
  const atTip = 0.5 * A * (state.pressure + p.inversionYield + speed / p.inversionMobility);
  const amplified = Math.exp(p.friction * state.bend);
  return atTip * amplified + p.friction * p.tailWeight * state.length * (1 + amplified) * 0.5;
};

/**
 * Load that folds the true body [N], found by raising the load until the deflected wall goes slack: the beam's sideways
 * shape is carried as a half sine whose amplitude grows by the elastic and shear flexibility (a method of the
 * simulator's own, so that the console cannot be right by sharing its formula).
 */
export const trueFoldingLoad = (p: PlantParameters, state: TrueState): number => {
  if (state.length <= 0) return Number.POSITIVE_INFINITY;
  const A = Math.PI * p.radius ** 2;
  const axial = state.pressure * A;
  const wave = Math.PI / (state.length + 0.85 * p.setback);
  const elastic = p.E * Math.PI * p.radius ** 3 * wave * wave;
  const shear = axial + p.G * Math.PI * p.radius;
  const crooked = Math.max(state.arm, p.crookedness * p.radius);
  const folds = (F: number): boolean => {
    const flexibility = F / elastic + F / shear;
    if (flexibility >= 1) return true;
    return (F * crooked) / (1 - flexibility) >= p.collapse * (axial - F) * p.radius;
  };
  let low = 0;
  let high = axial;
  for (let i = 0; i < 50; i++) {
    const middle = (low + high) / 2;
    if (folds(middle)) high = middle;
    else low = middle;
  }
  return low;
};
