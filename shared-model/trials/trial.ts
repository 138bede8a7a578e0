import { z } from 'zod';
import type { BodyDescription, Limits, Muscles } from '../body/body.ts';

const number = z.number().refine(Number.isFinite);

/** The trials of the bench and one point of each, as it was read and measured. SI. */
export const trialPointsSchema = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('tail-length'),
    /** Payout as read, and body length by tape [m]. */
    points: z.array(z.strictObject({ payout: number, tape: number })).max(200),
  }),
  z.strictObject({
    kind: z.literal('muscle-bend'),
    /** Pressure of the one muscle that works [Pa], and the bend measured [1/m]. */
    points: z.array(z.strictObject({ pressure: number, bend: number })).max(200),
  }),
  z.strictObject({
    kind: z.literal('inversion'),
    /** Body pressure [Pa], tail tension while the tip turns slowly [N], body length [m], total bend [rad]. */
    points: z
      .array(z.strictObject({ pressure: number, tension: number, length: number, turn: number }))
      .max(200),
  }),
  z.strictObject({
    kind: z.literal('transition'),
    /** Body length [m], bend of the whole body [1/m], body pressure [Pa], tail tension at which it folded [N]. */
    points: z
      .array(z.strictObject({ length: number, bend: number, pressure: number, tension: number }))
      .max(200),
  }),
]);
export type TrialPoints = z.infer<typeof trialPointsSchema>;
export type TrialKind = TrialPoints['kind'];
export const TRIAL_KINDS: readonly TrialKind[] = ['tail-length', 'muscle-bend', 'inversion', 'transition'];
export type PointsOf<Kind extends TrialKind> = Extract<TrialPoints, { kind: Kind }>['points'];

/** A value that a trial gives, with the half-width of its 95 % band. SI. */
export interface FittedValue {
  readonly name: TrialValue;
  readonly value: number;
  readonly halfWidth: number;
}
export const TRIAL_VALUES = [
  'payoutScale',
  'payoutOffset',
  'bendGain',
  'inversionYield',
  'friction',
  'collapseFraction',
  'eccentricityFloor',
  'margin',
] as const;
export type TrialValue = (typeof TRIAL_VALUES)[number];

/** What a trial of each kind gives: all of it, or it counts for nothing. */
export const VALUES_OF: Readonly<Record<TrialKind, readonly TrialValue[]>> = {
  'tail-length': ['payoutScale', 'payoutOffset'],
  'muscle-bend': ['bendGain'],
  inversion: ['inversionYield', 'friction'],
  transition: ['collapseFraction', 'eccentricityFloor', 'margin'],
};

/** What each value may be, in SI; both ends are allowed. Outside it is a slip of hand or unit (common practice). */
export const VALUE_RANGES: Readonly<Record<TrialValue, readonly [low: number, high: number]>> = {
  // A scale further off than this is another spool, an offset another zero; a payout that reads further below zero is
  // refused by the estimate, and nothing could grow.
  payoutScale: [0.8, 1.25],
  payoutOffset: [-0.04, 0.5],
  bendGain: [0.05, 2],
  inversionYield: [0, 100_000],
  friction: [0, 1.5],
  collapseFraction: [0.05, 1],
  eccentricityFloor: [0, 10],
  // Never below the smallest that is ever used, and pressure can never satisfy one of 2.
  margin: [1.25, 1.999],
};

/** Written so that NaN is outside. */
export const inRange = (name: TrialValue, value: number): boolean => {
  const [low, high] = VALUE_RANGES[name];
  return value >= low && value <= high;
};

/** Data and fit for a plot; the line with its 95 % band. In the units that people read. */
export interface TrialPlot {
  readonly x: string;
  readonly y: string;
  readonly points: readonly (readonly [x: number, y: number])[];
  readonly line: readonly { readonly x: number; readonly y: number; readonly band: number }[];
}

export type TrialFit =
  | {
      readonly ok: true;
      readonly values: readonly FittedValue[];
      readonly deviation: number;
      readonly plot: TrialPlot;
    }
  /** What is missing or wrong, said to a person. */
  | { readonly ok: false; readonly why: string };

/** What a fit takes from the machine. */
export interface TrialMachine {
  readonly body: BodyDescription;
  readonly muscles: Muscles;
  readonly limits: Limits;
}

const recordShape = z.strictObject({
  trial: trialPointsSchema,
  values: z.array(
    z.strictObject({ name: z.enum(TRIAL_VALUES), value: number, halfWidth: z.number().min(0) }),
  ),
  before: z.array(z.strictObject({ name: z.enum(TRIAL_VALUES), value: number })),
  /** RFC 3339 UTC. */
  date: z.iso.datetime(),
  initials: z.string().min(1).max(12),
  expires: z.iso.datetime(),
});
export type TrialRecord = z.infer<typeof recordShape>;

/**
 * A trial as it is kept, append only: raw points, what was fitted, what was in force before, who and until when. Values that
 * lack, or that cannot be, are refused: whoever writes them by hand could else make the verdict bolder than any trial may.
 */
export const trialRecordSchema = recordShape.superRefine(({ trial, values }, context) => {
  const wanted = VALUES_OF[trial.kind];
  const given = values.map(({ name }) => name);
  if (given.length !== wanted.length || !wanted.every((name) => given.includes(name)))
    context.addIssue({
      code: 'custom',
      path: ['values'],
      message: `a trial of ${trial.kind} gives each of ${wanted.join(', ')} once (found ${given.join(', ') || 'none'})`,
    });
  for (const [i, { name, value }] of values.entries())
    if (!inRange(name, value))
      context.addIssue({
        code: 'custom',
        path: ['values', i, 'value'],
        message: `${name} may be ${VALUE_RANGES[name].join(' to ')} (found ${value})`,
      });
});
