import type { EstimateFrame } from '../../shared-model/contract/frame.ts';
import {
  goodValue,
  muscleSignals,
  type Readings,
  type ReadSignal,
} from '../../shared-model/contract/reading.ts';
import type { Answer, BenchReading } from '../../shared-model/contract/request.ts';
import { defaultMargin } from '../../shared-model/retraction/judge.ts';
import { fitTrial } from '../../shared-model/trials/fit-trial.ts';
import type {
  FittedValue,
  TrialKind,
  TrialPoints,
  TrialRecord,
  TrialValue,
} from '../../shared-model/trials/trial.ts';
import { appendTrial, readCompanion } from '../rig/companion.ts';
import type { RigDescription } from '../rig/signal.ts';
import type { TriedRig } from '../rig/trials.ts';

/** What one tick leaves for the bench. */
interface Sample {
  readonly at: number;
  readonly pulling: boolean;
  readonly moving: boolean;
  readonly values: Omit<BenchReading, 'count' | 'spread'>;
}

/** The bench of one rig: steady readings for its trials, and their record. */
export interface Bench {
  note(readings: Readings, estimate: EstimateFrame | null, turn: number, tipSpeed: number, now: number): void;
  take(kind: TrialKind, now: number): Answer;
  save(
    trial: TrialPoints,
    initials: string,
    expires: string,
    date: Date,
  ): Promise<{ readonly answer: Answer; readonly record: TrialRecord | null }>;
  list(): Answer;
}

/** A reading is the mean of so long [s], of at least so many ticks; a pull is remembered for so long. */
const WINDOW = 1;
const LEAST_SAMPLES = 8;
const REMEMBERED = 20;
/** Estimated tip speed of a body at rest, the encoder's counts being noise [m/s]. */
const STILL_SPEED = 0.005;

/** What a trial needs besides payout; of these a rig may lack one, and then a person enters it. */
const NEEDS: Readonly<Record<TrialKind, readonly Needed[]>> = {
  'tail-length': [],
  'muscle-bend': ['muscle'],
  inversion: ['pressure', 'tension'],
  transition: ['pressure'],
};
type Needed = 'pressure' | 'tension' | 'muscle';
const SIGNALS: Readonly<Record<Needed, { readonly signal: ReadSignal; readonly words: string }>> = {
  pressure: { signal: 'body_pressure', words: 'body pressure' },
  tension: { signal: 'tail_tension', words: 'tail tension' },
  muscle: { signal: 'muscle_1_pressure', words: 'muscle pressures' },
};
const isRead = (rig: RigDescription, name: Needed): boolean => rig.reads[SIGNALS[name].signal] !== undefined;

export const createBench = ({ rig, companion, payout }: TriedRig): Bench => {
  let samples: Sample[] = [];
  return {
    note: (readings, estimate, turn, tipSpeed, now) => {
      const values = valuesOf(rig, payout, readings, estimate, turn, now);
      samples = samples.filter((one) => now - one.at <= REMEMBERED);
      if (values !== null)
        samples.push({
          at: now,
          pulling: tipSpeed < 0,
          moving: tipSpeed !== 0 || !(Math.abs(estimate?.tipSpeed ?? Number.NaN) <= STILL_SPEED),
          values,
        });
    },
    take: (kind, now) => {
      const chosen = kind === 'inversion' ? lastPull(samples) : lastRest(samples, now);
      if (typeof chosen === 'string') return { ok: false, code: 'not-steady', text: chosen };
      const value = meanOf(chosen);
      const lacking = NEEDS[kind].filter((name) => value[name] === null && isRead(rig, name));
      if (lacking.length === 0) return { ok: true, value };
      const words = lacking.map((name) => SIGNALS[name].words).join(' and ');
      return {
        ok: false,
        code: 'not-read',
        text: `There was no steady good reading of the ${words}. See the Rig tab, then take the reading again.`,
      };
    },
    save: async (trial, initials, expires, date) => {
      const refused = (code: string, text: string) => ({
        answer: { ok: false, code, text } as const,
        record: null,
      });
      if (!(Date.parse(expires) > date.getTime()))
        return refused('expired', 'The trial would have expired already. Choose a later day.');
      // The screen's own fit counts for nothing: what is kept is fitted here, from the points.
      const fit = fitTrial(trial, rig);
      if (!fit.ok) return refused('no-fit', fit.why);
      const record: TrialRecord = {
        trial,
        values: fit.values.map((one) => ({ ...one })),
        before: fit.values.map(({ name }) => ({ name, value: inForce(rig, payout, name) })),
        date: date.toISOString(),
        initials,
        expires,
      };
      try {
        await appendTrial(companion, record);
      } catch (error) {
        return refused(
          'not-saved',
          `The trial was not saved: ${error instanceof Error ? error.message : String(error)}`,
        );
      }
      return { answer: { ok: true, value: { file: companion } }, record };
    },
    list: () => {
      const read = readCompanion(companion);
      return read.ok
        ? { ok: true, value: read.records }
        : { ok: false, code: 'unreadable', text: read.errors.join(' ') };
    },
  };
};

const valuesOf = (
  rig: RigDescription,
  payout: TriedRig['payout'],
  readings: Readings,
  estimate: EstimateFrame | null,
  turn: number,
  now: number,
): Sample['values'] | null => {
  const value = (reading: Readings[keyof Readings]) => goodValue(reading, now, rig.limits.readingAge) ?? null;
  const corrected = value(readings.tail_payout);
  if (estimate === null || corrected === null) return null;
  const muscles = muscleSignals(rig.muscles.muscles.length).map(({ pressure }) => value(readings[pressure]));
  return {
    // As the encoder gives it, so that a new trial does not build on an old one.
    payout: (corrected - payout.offset) / payout.scale,
    pressure: value(readings.body_pressure),
    tension: value(readings.tail_tension),
    // One that is not read might be the one that works.
    muscle:
      muscles.length === 0 || muscles.includes(null) ? null : Math.max(...(muscles as readonly number[])),
    length: estimate.length,
    turn,
  };
};

/** The last second of rest. */
const lastRest = (samples: readonly Sample[], now: number): readonly Sample[] | string => {
  const last = samples.filter((one) => now - one.at <= WINDOW);
  if (last.some((one) => one.moving)) return 'Hold still for a second, then take the reading.';
  return last.length >= LEAST_SAMPLES ? last : 'There were no good readings for a second. See the Rig tab.';
};

/** The last second of the last pull. */
const lastPull = (samples: readonly Sample[]): readonly Sample[] | string => {
  const end = samples.findLastIndex((one) => one.pulling);
  const start = samples.findLastIndex((one, i) => i < end && !one.pulling);
  const pull = samples.slice(start + 1, end + 1);
  const last = pull.filter((one) => pull.at(-1)!.at - one.at <= WINDOW);
  // The start of a pull is not steady.
  if (end < 0 || pull.at(-1)!.at - pull[0]!.at < 2 * WINDOW || last.length < LEAST_SAMPLES)
    return 'Pull steadily for two seconds or more, then take the reading.';
  return last;
};

const meanOf = (samples: readonly Sample[]): BenchReading => {
  const mean = (name: keyof Sample['values']): number | null => {
    const values = samples.map((one) => one.values[name]);
    if (values.some((value) => value === null)) return null;
    return (values as number[]).reduce((sum, value) => sum + value, 0) / values.length;
  };
  const spread = (name: keyof Sample['values']): number | null => {
    const middle = mean(name);
    if (middle === null) return null;
    const squares = samples.reduce((sum, one) => sum + ((one.values[name] ?? middle) - middle) ** 2, 0);
    return Math.sqrt(squares / samples.length);
  };
  return {
    payout: mean('payout') ?? Number.NaN,
    length: mean('length') ?? Number.NaN,
    turn: mean('turn') ?? Number.NaN,
    pressure: mean('pressure'),
    tension: mean('tension'),
    muscle: mean('muscle'),
    count: samples.length,
    spread: {
      payout: spread('payout'),
      pressure: spread('pressure'),
      tension: spread('tension'),
      muscle: spread('muscle'),
    },
  };
};

/** What is in force now of a value that a trial gives. */
const inForce = (
  { body, muscles }: RigDescription,
  payout: TriedRig['payout'],
  name: TrialValue,
): FittedValue['value'] => {
  switch (name) {
    case 'payoutScale':
      return payout.scale;
    case 'payoutOffset':
      return payout.offset;
    case 'bendGain':
      return muscles.bendGain;
    case 'inversionYield':
      return body.inversion.yield;
    case 'friction':
      return body.friction;
    case 'collapseFraction':
      return body.collapseFraction;
    case 'eccentricityFloor':
      return body.eccentricityFloor;
    case 'margin':
      return defaultMargin(body);
  }
};
