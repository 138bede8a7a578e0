import { createArms, type Holding, updateArms } from '../../shared-model/retraction/arms.ts';
import { computeOutlook, createOutlook } from '../../shared-model/retraction/outlook.ts';
import { createLaidPath, layTo } from '../../shared-model/shape/laid-path.ts';
import { builtInRig } from '../main/rig/built-in-rig.ts';
import { type Figure, median } from './figure.ts';

const rig = builtInRig();
const RULE = { freeEnd: 0.6, onGround: true, gravity: [0, 1, 0] as const };
const HOLDING: Holding = {
  setback: rig.body.guideSetback,
  gravity: { weight: 0, payload: 0, direction: [0, 1, 0], supported: Number.POSITIVE_INFINITY },
};
/** One tick at 20 Hz [ms]. */
const TICK = 50;

/** A body that winds left and right, laid at the stations of a live one. */
const windingPath = (length: number) => {
  const path = createLaidPath();
  for (let s = 0.01; s <= length; s += 0.01) layTo(path, s, { right: 0.25 * Math.sin(s / 3), down: 0 }, RULE);
  return path;
};

/** What one tick of growing costs at a length: shape, arms of what changed, forces of every length. */
const growingTick = (length: number): number => {
  const path = windingPath(length);
  const arms = createArms(path.count + 200, HOLDING);
  updateArms(arms, path, 0);
  const out = createOutlook(path.count + 200);
  let grown = length;
  return median(40, () => {
    grown += 0.0125;
    const from = layTo(path, grown, { right: 0.25 * Math.sin(grown / 3), down: 0 }, RULE);
    updateArms(arms, path, from);
    computeOutlook(path, arms, { body: rig.body, pressure: 9000, tipSpeed: 0.25, excess: 0 }, out);
  });
};

export const outlookFigures = (): Figure[] => {
  const [short, long] = [growingTick(10), growingTick(40)];
  return [
    {
      name: 'judging a tick while growing, 10 m body',
      milliseconds: short,
      ratio: short / TICK,
      of: 'of the tick',
    },
    {
      name: 'judging a tick while growing, 40 m body',
      milliseconds: long,
      ratio: long / TICK,
      of: 'of the tick',
    },
  ];
};
