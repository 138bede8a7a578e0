import { goodValue, type Reading } from '../contract/reading.ts';
import type { DriveRequest } from './drive-request.ts';
import { HOOP_FACTOR } from './standing.ts';
import type { Reason, WayBack } from './verdict.ts';

/** What every kind of motion needs. */
export const commonReasons = (request: DriveRequest): Reason[] => {
  const reasons: Reason[] = [];
  if (request.leaseAlive !== true)
    reasons.push({
      code: 'not-held',
      text: 'The control is not held, or its signal came too late.',
      remedy: 'Let go, then press and hold again.',
    });
  if (request.linkOpen !== true)
    reasons.push({
      code: 'link',
      text: 'The rig cannot be reached.',
      remedy: 'See Link; reconnect, then press again.',
    });
  if (request.emergencyStopWired) {
    const pressed = goodValue(request.readings.emergency_stop, request.now, request.limits.readingAge);
    if (pressed !== 0)
      reasons.push({
        code: 'emergency-stop',
        text:
          pressed === undefined
            ? 'The wired emergency stop cannot be read.'
            : 'The wired emergency stop is pressed.',
        remedy: 'Find out why, then release it at the rig.',
      });
  }
  requireGood(reasons, request, 'body_pressure', request.readings.body_pressure);
  return reasons;
};

/** What growing and pulling need beyond that. */
export const bodyReasons = (request: DriveRequest): Reason[] => {
  const reasons: Reason[] = [...request.estimateReasons];
  if (request.watch.trip !== null) reasons.push(request.watch.trip);
  const age = request.now - request.shapeAt;
  if (!(age >= 0 && age <= request.limits.readingAge))
    reasons.push({
      code: 'shape-old',
      text: `The shape of the body was last estimated ${Number.isFinite(age) ? `${age.toFixed(1)} s ago` : 'never'}.`,
      remedy: 'Check tail payout and muscle pressures on the Rig tab.',
    });
  if (request.body === null) {
    if (reasons.length === 0)
      reasons.push({
        code: 'estimate',
        text: 'Body length is not known.',
        remedy: 'Check tail payout on the Rig tab.',
      });
  } else if (!(request.body.length >= 0 && Number.isFinite(request.body.tailSlack)))
    reasons.push({
      code: 'estimate',
      text: 'Body length is not a number.',
      remedy: 'Check tail payout on the Rig tab.',
    });
  requireGood(reasons, request, 'tail_payout', request.readings.tail_payout);
  if (!(request.wish.tipSpeed > 0 && request.limits.tipSpeed > 0))
    reasons.push({ code: 'speed', text: 'No tip speed is set.', remedy: 'Choose fine or coarse speed.' });
  if (request.described.has('tail_tension')) {
    requireGood(reasons, request, 'tail_tension', request.readings.tail_tension);
    const tension = goodValue(request.readings.tail_tension, request.now, request.limits.readingAge);
    if (tension !== undefined && !(tension <= request.limits.tailTensionMax))
      reasons.push({
        code: 'tension-high',
        text: `Tail tension ${newtons(tension)} is above the rig's ${newtons(request.limits.tailTensionMax)}.`,
        remedy: 'Hold still; lower body pressure.',
      });
  }
  return reasons;
};

export const growReasons = (request: DriveRequest): Reason[] => {
  const reasons: Reason[] = [];
  if (request.body !== null && !(request.body.length < request.limits.bodyLengthMax))
    reasons.push({
      code: 'length-max',
      text: `The body is out to its full ${request.limits.bodyLengthMax.toFixed(1)} m.`,
      remedy: 'Come back, or use a longer body.',
    });
  const pressure = goodValue(request.readings.body_pressure, request.now, request.limits.readingAge);
  // The regulator may swing past its setpoint a little; a tenth above the limit is a fault.
  if (pressure !== undefined && !(pressure <= 1.1 * request.limits.bodyPressureMax))
    reasons.push({
      code: 'pressure-high',
      text: `Body pressure ${kPa(pressure)} is above ${kPa(request.limits.bodyPressureMax)}.`,
      remedy: 'Lower body pressure.',
    });
  if (request.grip === true || request.tipRetractorAttached)
    reasons.push({
      code: 'gripped',
      text: 'The tip retractor grips the tail; the tip cannot grow.',
      remedy: 'Release the tip retractor, then grow.',
    });
  if (!(request.watch.loose <= request.limits.tailSlackMax))
    reasons.push({
      code: 'loose-tail',
      text: `${request.watch.loose.toFixed(2)} m of tail lies loose: the tip does not take it.`,
      remedy: 'Look at the picture: steer clear of what blocks the tip, or raise body pressure.',
    });
  if (!(request.growthPressure !== null && Number.isFinite(request.growthPressure)))
    reasons.push({
      code: 'growth',
      text: 'The pressure that growth takes here is not known.',
      remedy: 'Check the body values in the rig file.',
    });
  else if (pressure !== undefined && !(pressure >= request.growthPressure))
    reasons.push({
      code: 'growth-stalls',
      text: `Growth takes ${kPa(request.growthPressure)} here; the body has ${kPa(pressure)}. Tail let out now would lie loose.`,
      remedy: 'Raise body pressure.',
    });
  return reasons;
};

export const pullReasons = (request: DriveRequest): Reason[] => {
  const { wayBack } = request;
  const reasons: Reason[] = [...lostGripReasons(request)];
  const { foldSuspected, trip } = request.watch;
  if (foldSuspected !== null && foldSuspected !== trip) reasons.push(foldSuspected);
  if (request.remaining === null || !(request.remaining > 0))
    reasons.push({
      code: 'no-way',
      text: 'The tip is already there.',
      remedy: 'Choose another target, or grow.',
    });
  if (!(request.approachSpeed >= 0))
    reasons.push({
      code: 'target',
      text: 'The distance to the target is not known.',
      remedy: 'Choose the target again.',
    });
  // A verdict of an earlier tick says nothing about the shape and pressure of this one.
  if (!(request.judgedAt === request.now))
    reasons.push({
      code: 'old-verdict',
      text: 'The verdict is not of this moment.',
      remedy: 'Hold still and press again.',
    });
  if (wayBack.kind === 'cannot-judge') reasons.push(...wayBack.reasons, CANNOT_JUDGE);
  else if (wayBack.kind === 'would-buckle')
    reasons.push({
      code: 'would-buckle',
      text: wayBack.text,
      remedy: wayBack.remedies[0]?.text ?? 'Fit the tip retractor.',
    });
  else if (wayBack.kind === 'by-tip-retractor') reasons.push(...retractorReasons(request, wayBack));
  else reasons.push(...basePullReasons(request, wayBack));
  return reasons;
};

/** A retractor that was told to grip and does not, or does not say so, stops the pull under its own name. */
const lostGripReasons = ({ grip, tipRetractorState: state }: DriveRequest): Reason[] => {
  if (grip !== true || state === 'attached') return [];
  const unread = state === 'unknown';
  return [
    {
      code: unread ? 'retractor-unread' : 'retractor-loose',
      text: unread
        ? 'Whether the tip retractor grips cannot be read.'
        : 'The tip retractor is engaged but does not grip.',
      remedy: unread
        ? 'Check its signal on the Rig tab; hold still.'
        : 'Wait for it to grip, or release it and look at the picture.',
    },
  ];
};

/**
 * The wall against a higher body pressure: its hoop load stays a factor below what it bears as the body lies. Lowering is
 * the way out, and is never refused for it.
 */
export const hoopReasons = (request: DriveRequest, pressure: number): Reason[] => {
  const { hoopStrength, bodyRadius } = request;
  if (
    hoopStrength === null ||
    pressure <= (request.bodyPressureBefore ?? Number.NaN) ||
    pressure * bodyRadius * HOOP_FACTOR <= hoopStrength
  )
    return [];
  return [
    {
      code: 'hoop',
      text: `${kPa(pressure)} would load wall or seam to more than a ${HOOP_FACTOR}th of its strength.`,
      remedy: `Stay below ${kPa(hoopStrength / (HOOP_FACTOR * bodyRadius))}.`,
    },
  ];
};

/** A setpoint that leaps would fill or vent faster than the rig file allows; down to the limit it may always. */
export const rampReasons = (request: DriveRequest, pressure: number): Reason[] => {
  const before = request.bodyPressureBefore ?? Number.NaN;
  const step = request.limits.bodyPressureRate * RAMP_TIME + 1;
  const lowest = Math.min(before, request.limits.bodyPressureMax) - step;
  if (pressure >= lowest && pressure <= before + step) return [];
  return [
    {
      code: 'pressure-ramp',
      text: `The setpoint would leap to ${kPa(pressure)}.`,
      remedy: 'Let go, then press and hold again.',
    },
  ];
};

/** Longest time that one step of a ramp may stand for [s]: two ticks. */
const RAMP_TIME = 0.1;

/** Stands beside the reasons of the verdict, so that one without any reason refuses too. */
const CANNOT_JUDGE: Reason = {
  code: 'cannot-judge',
  text: 'The way back cannot be judged.',
  remedy: 'See what is missing; hold still until it is there.',
};

const basePullReasons = (request: DriveRequest, wayBack: Extract<WayBack, { kind: 'clear' }>): Reason[] => {
  const { margin, worst, here } = wayBack;
  const reasons: Reason[] = [];
  if (!(margin >= 1 && worst.ratio >= margin && here.ratio >= margin))
    reasons.push({ code: 'would-buckle', text: wayBack.text, remedy: 'Fit the tip retractor.' });
  if (request.tipRetractorAttached)
    reasons.push({
      code: 'gripped',
      text: 'The tip retractor grips the tail, so the base must not pull.',
      remedy: 'Release the tip retractor, or pull with it.',
    });
  const tension = goodValue(request.readings.tail_tension, request.now, request.limits.readingAge);
  if (tension !== undefined && !(tension * margin <= here.capacity))
    reasons.push({
      code: 'tension-trip',
      text: `Tail tension ${newtons(tension)} is above the ${newtons(here.capacity / margin)} that the body bears with margin.`,
      remedy: 'Hold still; lower body pressure or fit the tip retractor.',
    });
  return reasons;
};

const retractorReasons = (
  request: DriveRequest,
  wayBack: Extract<WayBack, { kind: 'by-tip-retractor' }>,
): Reason[] => {
  const reasons: Reason[] = [];
  if (!request.tipRetractorAttached)
    reasons.push({
      code: 'retractor-absent',
      text: 'The tip retractor is not confirmed as gripping.',
      remedy: 'Engage the tip retractor and wait until the rig confirms it.',
    });
  if (!request.hasRetractorDrive)
    reasons.push({
      code: 'retractor-drive',
      text: 'The rig file describes no speed setpoint for the tip retractor.',
      remedy: 'Add tip_retractor_speed_setpoint to the rig file.',
    });
  if (!(wayBack.held <= wayBack.heldMax))
    reasons.push({
      code: 'held-tension',
      text: `The spool still holds ${newtons(wayBack.held)}; the body bears ${newtons(wayBack.heldMax)}.`,
      remedy: 'Hold Grow: while the retractor grips it only eases the spool off. Then pull.',
    });
  return reasons;
};

export const requireGood = (
  reasons: Reason[],
  request: DriveRequest,
  signal: string,
  reading: Reading | undefined,
): void => {
  if (goodValue(reading, request.now, request.limits.readingAge) !== undefined) return;
  const name = signal.replaceAll('_', ' ');
  reasons.push({
    code: `reading:${signal}`,
    text:
      reading === undefined
        ? `There is no reading of ${name}.`
        : reading.quality === 'bad'
          ? `The reading of ${name} is bad: ${reading.why}.`
          : `The reading of ${name} is ${Math.max(0, request.now - reading.at).toFixed(1)} s old.`,
    remedy: 'Check the sensor and its line on the Rig tab.',
  });
};

export const kPa = (pressure: number): string => `${(pressure / 1000).toFixed(1)} kPa`;
const newtons = (force: number): string => `${force < 10 ? force.toFixed(1) : force.toFixed(0)} N`;
