import type { OutlookLine } from '../../shared-model/contract/frame.ts';
import { goodValue, type Readings } from '../../shared-model/contract/reading.ts';
import { growthReserve } from '../../shared-model/mechanics/growth-reserve.ts';
import { type Arms, createArms, type Holding, updateArms } from '../../shared-model/retraction/arms.ts';
import {
  createJudgeSpace,
  defaultMargin,
  type JudgeSpace,
  judgeWayBack,
} from '../../shared-model/retraction/judge.ts';
import { outlookLine } from '../../shared-model/retraction/outlook-line.ts';
import type { Trip } from '../../shared-model/retraction/pull-watch.ts';
import { findRemedies, remedied } from '../../shared-model/retraction/remedies.ts';
import { judgeStanding, type Standing } from '../../shared-model/retraction/standing.ts';
import type { Reason, Remedy, WayBack } from '../../shared-model/retraction/verdict.ts';
import type { WayBackInput } from '../../shared-model/retraction/way-back-input.ts';
import type { Estimate } from '../../shared-model/shape/estimate.ts';
import type { RigDescription } from '../rig/signal.ts';

/** Remedies take several judgements; twice a second is soon enough for a person [s]. */
const REMEDIES_EVERY = 0.5;

/** The judge of one rig with what it keeps from tick to tick. */
export interface WayBackJudge {
  readonly missing: Reason | null;
  readonly arms: Arms;
  readonly space: JudgeSpace;
  /** Held while the sensor's own band lies within it, so that noise asks for no new outlook. Pa. */
  band: { readonly low: number; readonly high: number };
  remedies: readonly Remedy[];
  remediesAt: number;
  /** The last preview, so that no screen can ask for more work than the remedies themselves are. */
  preview: { readonly kind: Remedy['kind']; readonly at: number; readonly line: OutlookLine | null } | null;
}

/** @param missing what the verdict would rest on and cannot be had for this machine; null where nothing is */
export const createWayBackJudge = (rig: RigDescription, missing: Reason | null = null): WayBackJudge => ({
  missing,
  arms: createArms(256, holdingOf(rig)),
  space: createJudgeSpace(),
  band: { low: Number.NaN, high: Number.NaN },
  remedies: [],
  remediesAt: Number.NEGATIVE_INFINITY,
  preview: null,
});

const holdingOf = ({ body, place }: RigDescription): Holding => ({
  setback: body.guideSetback,
  gravity: {
    weight: body.weight,
    payload: body.payload,
    direction: place.gravity,
    supported: body.onGround ? Number.POSITIVE_INFINITY : 0,
  },
});

export interface Surroundings {
  readonly estimate: Estimate;
  readonly readings: Readings;
  readonly retractorAttached: boolean;
  /** While a fold is suspected the shape is not to be relied on. */
  readonly foldSuspected: Trip | null;
  readonly now: number;
}

/** The verdict on coming back to `target` [m]; the one to the base (0) also carries remedies and feeds the chart. */
export const judgeTo = (
  judge: WayBackJudge,
  rig: RigDescription,
  around: Surroundings,
  target: number,
): WayBack => {
  const input = inputOf(judge, rig, around, target);
  const judged = judgeWayBack(input, judge.space);
  const unreliable = around.foldSuspected ?? judge.missing;
  const verdict: WayBack =
    unreliable === null ? judged : { kind: 'cannot-judge', reasons: [unreliable], text: unreliable.text };
  if (verdict.kind !== 'would-buckle') {
    if (target === 0) judge.remedies = [];
    return verdict;
  }
  if (around.now - judge.remediesAt >= REMEDIES_EVERY) {
    judge.remedies = findRemedies(
      { ...input, target: 0 },
      rig.limits,
      rig.writes.tip_retractor_speed_setpoint !== undefined,
    );
    judge.remediesAt = around.now;
  }
  return { ...verdict, remedies: judge.remedies };
};

/** To be called once a tick, before judging: only stations that changed are worked out again. */
export const followShape = (judge: WayBackJudge, estimate: Estimate): void =>
  updateArms(judge.arms, estimate.path, estimate.changedFrom);

const inputOf = (
  judge: WayBackJudge,
  rig: RigDescription,
  around: Surroundings,
  target: number,
): WayBackInput => {
  const { estimate, readings, now } = around;
  const age = rig.limits.readingAge;
  const pressure = heldBand(judge, goodValue(readings.body_pressure, now, age), rig.limits.pressureAccuracy);
  return {
    shape: estimate.frame === null ? null : estimate.path,
    arms: judge.arms,
    body: rig.body,
    margin: defaultMargin(rig.body),
    ...pressure,
    payout: payoutOf(readings, now, age),
    // Faster takes more tension; judged at the fastest that may be asked for.
    tipSpeed: rig.limits.tipSpeed,
    target,
    retractor: around.retractorAttached ? { heldTension: heldTension(readings, now, age) } : null,
  };
};

/**
 * The pressure's band to judge at: the sensor's and half as much on either side, kept until the sensor's leaves it. A
 * wider band only makes the verdict more careful.
 */
const heldBand = (
  judge: WayBackJudge,
  pressure: number | undefined,
  accuracy: number,
): { readonly pressure: number | null; readonly pressureBand: number } => {
  if (pressure === undefined) return { pressure: null, pressureBand: accuracy };
  const within = judge.band.low <= pressure - accuracy && pressure + accuracy <= judge.band.high;
  if (!within) judge.band = { low: pressure - 1.5 * accuracy, high: pressure + 1.5 * accuracy };
  const { low, high } = judge.band;
  return { pressure: (low + high) / 2, pressureBand: (high - low) / 2 };
};

/** λ [m]; just below zero, where the estimate still takes it for an encoder's noise, none is out. */
const payoutOf = (readings: Readings, now: number, age: number): number | null => {
  const payout = goodValue(readings.tail_payout, now, age);
  return payout === undefined ? null : Math.max(0, payout);
};

const heldTension = (readings: Readings, now: number, age: number): number | null => {
  const tension = goodValue(readings.tail_tension, now, age);
  return tension === undefined ? null : Math.max(0, tension);
};

/** How the body is loaded while it is held or grown; null while shape or pressure is not known. */
export const standingOf = (
  judge: WayBackJudge,
  rig: RigDescription,
  around: Surroundings,
): Standing | null => {
  const { shape, pressure, pressureBand } = inputOf(judge, rig, around, 0);
  if (shape === null || pressure === null) return null;
  return finiteStanding(
    judgeStanding({
      shape,
      arms: judge.arms,
      body: rig.body,
      pressure,
      pressureBand,
      pressureMin: rig.limits.bodyPressureMin,
      pressureMax: rig.limits.bodyPressureMax,
      tipSpeed: rig.limits.tipSpeed,
      margin: defaultMargin(rig.body),
      tension: goodValue(around.readings.tail_tension, around.now, rig.limits.readingAge),
    }),
  );
};

/** JSON has no infinity: the largest number stands for it. */
const finiteStanding = ({ hold, growth, hoop }: Standing): Standing => ({
  hold: { ...hold, ratio: Math.min(hold.ratio, Number.MAX_VALUE) },
  growth: { ...growth, stallLength: Math.min(growth.stallLength, Number.MAX_VALUE) },
  hoop: hoop === null ? null : Math.min(hoop, Number.MAX_VALUE),
});

/** Body pressure that growth takes at rest, at this length and shape [Pa]; null while the shape is not known. */
export const growthPressureOf = (estimate: Estimate, rig: RigDescription): number | null =>
  estimate.frame === null
    ? null
    : growthReserve(estimate.path, {
        body: rig.body,
        supply: rig.limits.bodyPressureMax,
        tipSpeed: 0,
        holdBack: 0,
      }).needed;

/** What one of the remedies last offered would give, as a chart; null when it is offered no more. */
export const remedyLine = (
  judge: WayBackJudge,
  rig: RigDescription,
  around: Surroundings,
  kind: Remedy['kind'],
): OutlookLine | null => {
  const remedy = judge.remedies.find((one) => one.kind === kind);
  if (remedy === undefined) return null;
  if (judge.preview?.kind === kind && judge.preview.at === judge.remediesAt) return judge.preview.line;
  const found = remedied(inputOf(judge, rig, around, 0), remedy);
  const line = found === null ? null : outlookLine(found.shape, found.space, defaultMargin(rig.body));
  judge.preview = { kind, at: judge.remediesAt, line };
  return line;
};

/** The last judgement to the base as a chart. */
export const presentLine = (
  judge: WayBackJudge,
  rig: RigDescription,
  { estimate }: Surroundings,
): OutlookLine => outlookLine(estimate.path, judge.space, defaultMargin(rig.body));
