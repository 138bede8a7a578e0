import type { BodyDescription, Limits, Muscles } from '../body/body.ts';
import type { EstimateFrame } from '../contract/frame.ts';
import { goodValue, muscleSignals, type Readings } from '../contract/reading.ts';
import type { Reason } from '../retraction/verdict.ts';
import { bendOfPressures, STRAIGHT } from '../steering/muscle-bend.ts';
import { createLaidPath, type LaidPath, layTo } from './laid-path.ts';
import type { Vec3 } from './vector.ts';

/** What the estimate needs to know of the machine. */
export interface EstimateRig {
  readonly body: BodyDescription;
  readonly muscles: Muscles;
  readonly limits: Limits;
  readonly gravity: Vec3;
}

/** Where the body is believed to lie, carried from tick to tick; the path inside is updated in place. */
export interface Estimate {
  readonly path: LaidPath;
  /** First station that changed in the last step. */
  readonly changedFrom: number;
  /** Null while the estimate must not be relied on; then `reasons` says why. */
  readonly frame: EstimateFrame | null;
  readonly reasons: readonly Reason[];
  readonly payout: number | null;
  readonly at: number;
  readonly grip: Grip | null;
}

/** Where the retractor was when it took hold, so that its travel tells the length from then on. */
interface Grip {
  readonly length: number;
  readonly travel: number;
}

export const createEstimate = (): Estimate => ({
  path: createLaidPath(),
  changedFrom: 0,
  frame: null,
  reasons: [
    { code: 'starting', text: 'No reading has come yet.', remedy: 'Wait for the link, or see Link.' },
  ],
  payout: null,
  at: Number.NaN,
  grip: null,
});

/** Half-width of what the length may be off by: the encoder's scale error, common to all of the body, and its zero. */
const SCALE_ERROR = 0.005;
const ZERO_ERROR = 0.01;
/** Noise that an encoder may show below its zero [m of tail]. */
const BELOW_ZERO = 0.05;

/**
 * One step of the estimate from fresh readings. Anything missing, late or not finite leaves the path as it is and the
 * frame null: no guessed number ever reaches the interlock.
 */
export const stepEstimate = (
  before: Estimate,
  readings: Readings,
  gripping: boolean,
  rig: EstimateRig,
  now: number,
): Estimate => {
  const age = rig.limits.readingAge;
  const payout = goodValue(readings.tail_payout, now, age);
  const pressures = muscleSignals(rig.muscles.muscles.length).map(({ pressure }) =>
    goodValue(readings[pressure], now, age),
  );
  const reasons = [
    ...missing(payout, 'tail payout'),
    ...pressures.flatMap((pressure, i) => missing(pressure, `muscle ${i + 1} pressure`)),
    ...jumped(before, payout, rig.limits.tipSpeed, now),
  ];
  if (reasons.length > 0 || payout === undefined)
    return { ...before, changedFrom: before.path.count, frame: null, reasons };

  const travel = goodValue(readings.tip_retractor_travel, now, age);
  const taut = Math.max(0, payout) / 2;
  const grip = gripping && travel !== undefined ? (before.grip ?? { length: taut, travel }) : null;
  // The tail cannot be shorter than twice the body, so λ/2 bounds the length from above.
  const length =
    grip === null || travel === undefined ? taut : clamp(grip.length - (travel - grip.travel), 0, taut);
  const bend =
    pressures.length === 0
      ? { ...STRAIGHT, centreline: 1 }
      : bendOfPressures(rig.muscles, pressures as number[]);
  const changedFrom = layTo(before.path, length, bend, { ...rig.body, gravity: rig.gravity });
  const roll = readings.tip_roll === undefined ? undefined : goodValue(readings.tip_roll, now, age);
  const frame: EstimateFrame = {
    length,
    lengthBand: SCALE_ERROR * length + ZERO_ERROR,
    tailSlack: Math.max(0, payout - 2 * length),
    tipSpeed: smoothedSpeed(before, length, now),
    tip: before.path.tip,
    bend: { right: bend.right, down: bend.down },
    roll: roll ?? null,
  };
  return { path: before.path, changedFrom, frame, reasons: [], payout, at: now, grip };
};

const missing = (value: number | undefined, name: string): Reason[] =>
  value !== undefined
    ? []
    : [
        {
          code: `reading:${name.replaceAll(' ', '_')}`,
          text: `There is no good reading of ${name}.`,
          remedy: 'Check the sensor and its line on the Rig tab.',
        },
      ];

/** A payout that no spool could have reached in the time, or one below zero, means a wrong count. */
const jumped = (before: Estimate, payout: number | undefined, tipSpeed: number, now: number): Reason[] => {
  if (payout === undefined) return [];
  const remedy =
    'Check the spool encoder, then press Reconnect on the Rig tab to start from its present count.';
  if (!(payout >= -BELOW_ZERO))
    return [
      { code: 'payout-negative', text: `Tail payout reads ${payout.toFixed(2)} m, below zero.`, remedy },
    ];
  if (before.payout === null) return [];
  const most = 4 * tipSpeed * Math.max(0, now - before.at) + BELOW_ZERO;
  const jump = Math.abs(payout - before.payout);
  if (jump <= most) return [];
  return [{ code: 'payout-jump', text: `Tail payout jumped by ${jump.toFixed(2)} m.`, remedy }];
};

/** First-order filter over about a quarter of a second. */
const smoothedSpeed = (before: Estimate, length: number, now: number): number => {
  const dt = now - before.at;
  if (before.frame === null || !(dt > 0)) return 0;
  const share = Math.min(1, dt / 0.25);
  const speed = (length - before.frame.length) / dt;
  return before.frame.tipSpeed + share * (speed - before.frame.tipSpeed);
};

const clamp = (value: number, low: number, high: number): number => Math.min(high, Math.max(low, value));
