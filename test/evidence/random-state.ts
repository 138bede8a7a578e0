import type { RigDescription } from '../../main/rig/signal.ts';
import { type PlantParameters, plantParameters } from '../../main/simulator/parameters.ts';
import { createRandom, type Random } from '../../main/simulator/random.ts';
import { createTrueBody, largestArm, type TrueBody, totalBend } from '../../main/simulator/true-body.ts';
import { trueFoldingLoad, trueInversionTension } from '../../main/simulator/true-strength.ts';
import { WEIGHTLESS } from '../../shared-model/mechanics/gravity-moment.ts';
import { createArms, updateArms } from '../../shared-model/retraction/arms.ts';
import { defaultMargin } from '../../shared-model/retraction/judge.ts';
import type { WayBackInput } from '../../shared-model/retraction/way-back-input.ts';
import { sampleSegments } from '../../shared-model/shape/segments.ts';
import type { Segment } from '../../shared-model/shape/vector.ts';

/** A machine as it truly is in a random state, and what the console believes of it. */
export interface RandomState {
  readonly plant: PlantParameters;
  readonly body: TrueBody;
  readonly length: number;
  readonly pressure: number;
  readonly tipSpeed: number;
  readonly input: WayBackInput;
}

/** Distance of the true body's points [m]. */
const STEP = 0.02;

/**
 * One random state: parameters off the rig file's by its stated few per cent, up to four arcs that lie on the ground, any
 * pressure within the limits; the readings carry the errors of encoder, pressure sensor and bend.
 */
export const randomState = (rig: RigDescription, seed: number): RandomState => {
  const random = createRandom(seed);
  const between = (low: number, high: number): number => low + (high - low) * random.uniform();
  const plant = {
    ...plantParameters(rig, random),
    // As weak and as crooked as the rig file says that it may be.
    collapse: between(rig.body.collapseFraction, 1),
    crookedness: between(0, rig.body.eccentricityFloor),
  };
  const { limits } = rig;
  const segments = randomArcs(random, between);
  const pressure = between(limits.bodyPressureMin, limits.bodyPressureMax);
  const believed = segments.map((one) => ({
    ...one,
    length: one.length * plant.encoderScale,
    // Bends are known by their muscles, as well as the rig file knows those.
    curvature: one.curvature * (1 + 0.03 * Math.max(-2, Math.min(2, random.normal()))),
  }));
  const shape = sampleSegments(believed, 0.01);
  const arms = createArms(shape.count, { setback: rig.body.guideSetback, gravity: WEIGHTLESS });
  updateArms(arms, shape, 0);
  const length = segments.reduce((sum, one) => sum + one.length, 0);
  return {
    plant,
    body: layArcs(segments),
    length,
    pressure,
    tipSpeed: limits.tipSpeed * Math.sqrt(random.uniform()),
    input: {
      shape,
      arms,
      body: rig.body,
      margin: defaultMargin(rig.body),
      pressure: pressure + between(-0.9, 0.9) * limits.pressureAccuracy,
      pressureBand: limits.pressureAccuracy,
      payout: 2 * length * plant.encoderScale,
      tipSpeed: limits.tipSpeed,
      target: 0,
      retractor: null,
    },
  };
};

const randomArcs = (random: Random, between: (low: number, high: number) => number): Segment[] =>
  Array.from({ length: 1 + Math.floor(4 * random.uniform()) }, () => ({
    length: between(0.05, 0.7) * (random.uniform() < 0.15 ? 4 : 1),
    curvature: random.uniform() < 0.5 ? 0 : between(-0.5, 0.5),
    plane: 0,
  }));

/** The arcs as the simulator lays a body, point by point on the floor. */
const layArcs = (segments: readonly Segment[]): TrueBody => {
  const body = createTrueBody();
  let pose = body.laid[0]!;
  for (const { length, curvature } of segments) {
    const steps = Math.max(1, Math.round(length / STEP));
    for (let i = 0; i < steps; i++) {
      const turn = (curvature * length) / steps;
      const heading = pose.heading + turn;
      const mean = pose.heading + turn / 2;
      const step = length / steps;
      pose = { x: pose.x + step * Math.sin(mean), z: pose.z + step * Math.cos(mean), heading };
      body.laid.push(pose);
    }
  }
  return body;
};

/**
 * Load that folds the true body over the pull it takes, at its smallest on the way back to the base; by the simulator
 * alone. Below 1 the body folds.
 */
export const trueRatio = ({ plant, body, length, pressure, tipSpeed }: RandomState): number => {
  const points = body.laid.length;
  const cut = { ...body, laid: [...body.laid] };
  let least = Number.POSITIVE_INFINITY;
  for (let left = points; left >= 2; left -= 5) {
    cut.laid.length = left;
    const state = {
      length: (length * (left - 1)) / (points - 1),
      pressure,
      bend: totalBend(cut),
      arm: largestArm(cut),
    };
    least = Math.min(least, trueFoldingLoad(plant, state) / trueInversionTension(plant, state, tipSpeed));
  }
  return least;
};
