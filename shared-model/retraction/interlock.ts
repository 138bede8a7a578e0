import { goodValue, type Readings } from '../contract/reading.ts';
import { coordinate, easeOff } from './coordination.ts';
import type { DriveRequest } from './drive-request.ts';
import {
  bodyReasons,
  commonReasons,
  growReasons,
  hoopReasons,
  kPa,
  pullReasons,
  rampReasons,
  requireGood,
} from './reasons.ts';
import type { Refusal } from './verdict.ts';

/** Setpoints for one tick. `null` leaves the rig's present setpoint as it is. SI. */
export interface Setpoints {
  /** Tail speed at the spool, + lets out [m/s]. */
  readonly spoolSpeed: number;
  /** Tip speed of the retractor, + inverts [m/s]; null when the rig has none. */
  readonly retractorSpeed: number | null;
  /** [Pa gauge] */
  readonly bodyPressure: number | null;
  /** [Pa gauge], one a muscle. */
  readonly musclePressures: readonly number[] | null;
  /** Tip retractor engaged; null when it is to stay as it is or the rig has no such output. */
  readonly retractorGrip: boolean | null;
}

/** How long a permit may wait before its bytes are sent [s]: one tick at 20 Hz and some. */
export const PERMIT_LIFE = 0.1;

/**
 * The only thing that the rig link writes to a motor. Made by this file alone, for one tick: a look-alike object does
 * not compile, and a structured clone or a cast fails `isPermit` when it comes to the bytes.
 */
export class PermittedDrive {
  static #make: (setpoints: Setpoints, issuedAt: number) => PermittedDrive;
  static {
    PermittedDrive.#make = (setpoints, issuedAt) => new PermittedDrive(setpoints, issuedAt);
  }

  readonly #setpoints: Setpoints;
  readonly #issuedAt: number;

  private constructor(setpoints: Setpoints, issuedAt: number) {
    this.#setpoints = Object.freeze(setpoints);
    this.#issuedAt = issuedAt;
  }

  /** True only for objects this class made. */
  static isPermit(candidate: unknown): candidate is PermittedDrive {
    return typeof candidate === 'object' && candidate !== null && #setpoints in candidate;
  }

  get setpoints(): Setpoints {
    return this.#setpoints;
  }

  /** Monotonic time of the judgement [s]. */
  get issuedAt(): number {
    return this.#issuedAt;
  }

  /** Zero speeds and nothing else: always allowed, needs no verdict. */
  static holdStill(now: number, hasRetractor: boolean): PermittedDrive {
    return PermittedDrive.#make({ ...NOTHING, retractorSpeed: hasRetractor ? 0 : null }, now);
  }

  /** Judges one tick's wish. All of it that is not proven safe is left out, with every reason why. */
  static judge(request: DriveRequest): Judgement {
    const motion = judgeMotion(request);
    const steer = judgeSteering(request);
    const pressure = judgePressure(request);
    const refusal = [motion.refusal, steer.refusal, pressure.refusal].find((one) => one !== null) ?? null;
    return {
      drive: PermittedDrive.#make(
        {
          spoolSpeed: motion.spoolSpeed,
          retractorSpeed: request.hasRetractorDrive ? motion.retractorSpeed : null,
          bodyPressure: pressure.value,
          musclePressures: steer.value,
          retractorGrip: request.grip,
        },
        request.now,
      ),
      tipSpeed: motion.tipSpeed,
      refusal,
    };
  }
}

export interface Judgement {
  readonly drive: PermittedDrive;
  /** Tip speed permitted, + grows [m/s]. */
  readonly tipSpeed: number;
  readonly refusal: Refusal | null;
}

const NOTHING: Setpoints = {
  spoolSpeed: 0,
  retractorSpeed: null,
  bodyPressure: null,
  musclePressures: null,
  retractorGrip: null,
};

interface MotionJudgement {
  readonly spoolSpeed: number;
  readonly retractorSpeed: number;
  readonly tipSpeed: number;
  readonly refusal: Refusal | null;
}
const STAY: MotionJudgement = { spoolSpeed: 0, retractorSpeed: 0, tipSpeed: 0, refusal: null };

const judgeMotion = (request: DriveRequest): MotionJudgement => {
  const { motion } = request.wish;
  if (motion.kind === 'still') return STAY;
  const reasons = [...commonReasons(request), ...bodyReasons(request)];
  if (motion.kind === 'grow') {
    if (reasons.length === 0 && canEase(request)) return easing(request);
    reasons.push(...growReasons(request));
    if (reasons.length > 0) return { ...STAY, refusal: { motion: 'grow', reasons } };
    const tipSpeed = Math.min(request.wish.tipSpeed, request.limits.tipSpeed);
    return { spoolSpeed: 2 * tipSpeed, retractorSpeed: 0, tipSpeed, refusal: null };
  }
  reasons.push(...pullReasons(request));
  if (reasons.length > 0) return { ...STAY, refusal: { motion: motion.kind, reasons } };
  return pull(request);
};

/** The tail moves twice as fast as the tip; a retractor inverts at the tip and the spool only takes up what comes. */
const pull = (request: DriveRequest): MotionJudgement => {
  const speed = Math.min(request.wish.tipSpeed, request.limits.tipSpeed, request.approachSpeed);
  if (request.wayBack.kind !== 'by-tip-retractor')
    return { spoolSpeed: -2 * speed, retractorSpeed: 0, tipSpeed: -speed, refusal: null };
  const { tip, spool } = coordinate({ speed, ...tailOf(request) });
  return { spoolSpeed: spool, retractorSpeed: tip, tipSpeed: -tip, refusal: null };
};

/** The tail at the spool as the coordination needs it. */
const tailOf = ({ body, readings, now, limits, wayBack }: DriveRequest) => ({
  tipSpeed: -(body?.tipSpeed ?? Number.NaN),
  slack: body?.tailSlack ?? Number.NaN,
  held: goodValue(readings.tail_tension, now, limits.readingAge),
  // Where the verdict gives none, whatever is held is too much.
  heldMax: wayBack.kind === 'by-tip-retractor' ? wayBack.heldMax : 0,
  slackMax: limits.tailSlackMax,
});

/** Letting tail out while the retractor grips turns nothing; it only takes load off the body. */
const canEase = (request: DriveRequest): boolean => {
  const { wayBack } = request;
  const heldTooHigh =
    wayBack.kind === 'cannot-judge' &&
    wayBack.reasons.length > 0 &&
    wayBack.reasons.every((reason) => reason.code === 'held-tension');
  return (
    request.tipRetractorAttached &&
    (heldTooHigh || wayBack.kind === 'by-tip-retractor') &&
    easeOff(tailOf(request)) > 0
  );
};
const easing = (request: DriveRequest): MotionJudgement => ({
  ...STAY,
  spoolSpeed: easeOff(tailOf(request)),
});

const judgeSteering = (
  request: DriveRequest,
): { value: readonly number[] | null; refusal: Refusal | null } => {
  const wanted = request.musclePressures;
  if (request.wish.steer === null || wanted === null) return { value: null, refusal: null };
  const reasons = commonReasons(request);
  wanted.forEach((pressure, i) => {
    if (!(pressure >= 0 && pressure <= request.limits.musclePressureMax))
      reasons.push({
        code: 'muscle-range',
        text: `Muscle ${i + 1} would need ${kPa(pressure)}; 0 to ${kPa(request.limits.musclePressureMax)} is allowed.`,
        remedy: 'Steer less, or straighten first.',
      });
    const signal = `muscle_${i + 1}_pressure`;
    if (request.described.has(signal))
      requireGood(reasons, request, signal, request.readings[signal as keyof Readings]);
  });
  return reasons.length > 0
    ? { value: null, refusal: { motion: 'steer', reasons } }
    : { value: wanted, refusal: null };
};

const judgePressure = (request: DriveRequest): { value: number | null; refusal: Refusal | null } => {
  const wanted = request.bodyPressure;
  if (request.wish.pressure === 0 || wanted === null) return { value: null, refusal: null };
  const reasons = commonReasons(request);
  const { bodyPressureMin: min, bodyPressureMax: max } = request.limits;
  if (!(wanted >= min && wanted <= max))
    reasons.push({
      code: 'pressure-range',
      text: `Body pressure ${kPa(wanted)} is outside ${kPa(min)} to ${kPa(max)}.`,
      remedy: 'Stay within the limits of the rig file.',
    });
  reasons.push(...hoopReasons(request, wanted), ...rampReasons(request, wanted));
  return reasons.length > 0
    ? { value: null, refusal: { motion: 'pressure', reasons } }
    : { value: wanted, refusal: null };
};
