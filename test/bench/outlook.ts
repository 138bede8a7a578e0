import { createWayBackJudge, followShape, growthPressureOf, judgeTo } from '../../main/console/way-back.ts';
import { createRandom } from '../../main/simulator/random.ts';
import type { Readings } from '../../shared-model/contract/reading.ts';
import {
  type Arms,
  chordArm,
  createArms,
  type Holding,
  tangentArm,
  updateArms,
} from '../../shared-model/retraction/arms.ts';
import { computeOutlook, createOutlook } from '../../shared-model/retraction/outlook.ts';
import { createEstimate, stepEstimate } from '../../shared-model/shape/estimate.ts';
import type { SampledShape } from '../../shared-model/shape/sampled-shape.ts';
import { builtInRig } from '../main/rig/built-in-rig.ts';
import { WINDINGS } from '../shared-model/shape/windings.ts';
import { type Figure, median } from './figure.ts';

const rig = builtInRig();
const HOLDING: Holding = {
  setback: rig.body.guideSetback,
  gravity: { weight: 0, payload: 0, direction: [0, 1, 0], supported: Number.POSITIVE_INFINITY },
};
const PULL = { body: rig.body, pressure: 9000, tipSpeed: 0.25, excess: 0, shortest: 0 };
/** One tick at 20 Hz [ms]. */
const TICK = 50;

/** Arms by one pass over all stations for each: all pairs. */
const bruteArms = (arms: Arms, shape: SampledShape): void => {
  for (let j = 0; j < shape.count; j++) {
    arms.tangent[j] = tangentArm(shape, j);
    arms.chord[j] = chordArm(shape, j, arms.holding.setback);
  }
  arms.count = shape.count;
};

/** The verdict's forces at every length of a body, all of it worked out anew in arrays that are there. */
const wholeOutlook = (shape: SampledShape, bring: (arms: Arms) => void): number => {
  const arms = createArms(shape.count, HOLDING);
  const out = createOutlook(shape.count);
  const once = (): void => {
    arms.count = 0;
    out.filled = null;
    bring(arms);
    computeOutlook(shape, arms, PULL, out);
  };
  // The compiler has seen it twice before it is timed.
  once();
  once();
  return median(7, once);
};

const everyLength = (name: string): Figure[] => {
  const [shape, twice] = [WINDINGS[name]!(100, 0.01), WINDINGS[name]!(100, 0.005)];
  const searched = wholeOutlook(shape, (arms) => updateArms(arms, shape, 0));
  const brute = wholeOutlook(shape, (arms) => bruteArms(arms, shape));
  const twiceSearched = wholeOutlook(twice, (arms) => updateArms(arms, twice, 0));
  return [
    {
      name: `the outlook at every length of 100 m at 1 cm, ${name}`,
      milliseconds: searched,
      ratio: searched / brute,
      of: `of all pairs (${(brute / searched).toFixed(0)} × faster; at most 6.7 %)`,
    },
    {
      name: `the same at 0.5 cm, ${name}`,
      milliseconds: twiceSearched,
      ratio: twiceSearched / searched,
      of: 'of once (at most 230 %)',
    },
  ];
};

/** Estimate and verdict of one tick while growing, with the noise of the built-in rig's sensors. */
const growingTick = (length: number): Figure => {
  const random = createRandom(1);
  const judge = createWayBackJudge(rig);
  let estimate = createEstimate();
  let now = 0;
  const tick = (body: number): void => {
    now += 0.05;
    const good = (value: number) => ({ quality: 'good', value, at: now }) as const;
    const readings: Readings = {
      body_pressure: good(9000 + 8 * random.normal()),
      tail_payout: good(2 * body),
      muscle_1_pressure: good(0),
      muscle_2_pressure: good(15_000 + 8000 * Math.sin(body / 3) + 25 * random.normal()),
      muscle_3_pressure: good(15_000 - 8000 * Math.sin(body / 3) + 25 * random.normal()),
    };
    estimate = stepEstimate(estimate, readings, false, { ...rig, gravity: rig.place.gravity }, now);
    followShape(judge, estimate);
    judgeTo(judge, rig, { estimate, readings, retractorAttached: false, foldSuspected: null, now }, 0);
    growthPressureOf(estimate, rig);
  };
  let grown = 0;
  for (; grown < length; grown += 0.0125) tick(grown);
  // The mean, so that the remedies of every tenth tick are in it.
  const from = performance.now();
  for (let i = 0; i < 100; i++, grown += 0.0125) tick(grown);
  const milliseconds = (performance.now() - from) / 100;
  return {
    name: `estimate, verdict, remedies and growth of a tick while growing, ${length} m`,
    milliseconds,
    ratio: milliseconds / TICK,
    of: 'of the tick (at most 5 %)',
  };
};

export const outlookFigures = (): Figure[] => [
  ...Object.keys(WINDINGS).flatMap(everyLength),
  growingTick(10),
  growingTick(100),
];
