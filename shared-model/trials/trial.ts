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

/** A trial as it is kept, append only: raw points, what was fitted, what was in force before, who and until when. */
export const trialRecordSchema = z.strictObject({
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
export type TrialRecord = z.infer<typeof trialRecordSchema>;
