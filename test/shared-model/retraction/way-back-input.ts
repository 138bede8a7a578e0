import type { BodyDescription } from '../../../shared-model/body/body.ts';
import { WEIGHTLESS } from '../../../shared-model/mechanics/gravity-moment.ts';
import { createArms, type Holding, updateArms } from '../../../shared-model/retraction/arms.ts';
import type { WayBackInput } from '../../../shared-model/retraction/way-back-input.ts';
import { sampleSegments } from '../../../shared-model/shape/segments.ts';
import type { Segment } from '../../../shared-model/shape/vector.ts';
import { BODY_B, PRESSURE_B, YIELD_B } from '../../reference/body-b.ts';

const loss = { yield: YIELD_B, rateCoefficient: Number.POSITIVE_INFINITY, rateExponent: 1 };

export const bodyB: BodyDescription = {
  ...BODY_B,
  growth: loss,
  inversion: loss,
  friction: 0.3,
  tailWeight: 0.3,
  weight: 0,
  payload: 0,
  guideSetback: 0,
  collapseFraction: 0.8,
  eccentricityFloor: 0.1,
  hoopStrength: null,
  justifiedMargin: null,
  measured: ['E', 'G', 'inversionYield', 'friction'],
  freeEnd: Number.POSITIVE_INFINITY,
  onGround: true,
};

/** A sound pull of body B on a taut tail, sampled every centimetre as the console does. */
export const wayBackInput = (
  segments: readonly Segment[],
  changes: Partial<WayBackInput> = {},
  holding: Partial<Holding> = {},
): WayBackInput => {
  const shape = sampleSegments(segments, 0.01);
  const body = changes.body ?? bodyB;
  const arms = createArms(shape.count, { setback: body.guideSetback, gravity: WEIGHTLESS, ...holding });
  updateArms(arms, shape, 0);
  return {
    shape,
    arms,
    body,
    margin: 1.25,
    pressure: PRESSURE_B,
    pressureBand: 0,
    payout: 2 * shape.s[shape.count - 1]!,
    tipSpeed: 0,
    target: 0,
    retractor: null,
    ...changes,
  };
};

export const straight = (length: number): Segment[] => [{ length, curvature: 0, plane: 0 }];
