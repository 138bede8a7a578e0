import { solveCase } from '../../shared-model/retraction/solve-case.ts';
import type { RigDescription } from '../rig/signal.ts';

/** Reads one JSON case a line and writes one JSON result a line; a line that is not JSON is refused, not fatal. */
export const runOutlook = async (
  lines: AsyncIterable<string>,
  write: (line: string) => void,
): Promise<void> => {
  for await (const line of lines) if (line.trim() !== '') write(JSON.stringify(solveLine(line)));
};

const solveLine = (line: string) => {
  try {
    return solveCase(JSON.parse(line));
  } catch (error) {
    if (!(error instanceof SyntaxError)) throw error;
    return { id: null, verdict: 'refuse', reason: `line: not JSON (${error.message})` };
  }
};

/** What a person may vary of a rig's own outlook. SI. */
export interface RigPlan {
  readonly length: number;
  readonly pressure: number;
  /** Total bend, spread evenly over the body [rad]. */
  readonly bend: number;
  readonly margin: number;
  readonly tipRetractor: boolean;
}

/** The outlook of a machine described by a rig file, for an evenly bent body of a given length. */
export const outlookForRig = (rig: RigDescription, plan: RigPlan) => {
  const { body } = rig;
  const { rateCoefficient } = body.inversion;
  return solveCase({
    id: rig.name,
    body: { radius: body.radius, wall: body.wall, E: body.E, G: body.G },
    pressure: plan.pressure,
    inversion: {
      yield: body.inversion.yield,
      ...(Number.isFinite(rateCoefficient)
        ? { rateCoefficient, rateExponent: body.inversion.rateExponent }
        : {}),
    },
    tipSpeed: rig.limits.tipSpeed,
    friction: body.friction,
    tailWeight: body.tailWeight,
    segments: [{ length: plan.length, curvature: plan.length > 0 ? plan.bend / plan.length : 0, plane: 0 }],
    margin: plan.margin,
    collapseFraction: body.collapseFraction,
    eccentricityFloor: body.eccentricityFloor,
    guideSetback: body.guideSetback,
    tipRetractor: plan.tipRetractor,
    gravity: {
      weight: body.weight,
      payload: body.payload,
      direction: [...rig.place.gravity],
      support: body.onGround ? 'ground' : 'none',
    },
  });
};
