import type { BodyDescription, MeasuredValue } from '../body/body.ts';
import {
  TRIAL_KINDS,
  type TrialKind,
  type TrialMachine,
  type TrialRecord,
  type TrialValue,
} from './trial.ts';

/** A machine with what its trials gave, and how each kind stands. */
export interface AppliedTrials extends TrialMachine {
  /** Twice the body length is scale × payout as read + offset. */
  readonly payout: { readonly scale: number; readonly offset: number };
  readonly standings: readonly TrialStanding[];
}

export interface TrialStanding {
  readonly kind: TrialKind;
  readonly state: 'measured' | 'expired' | 'none';
  readonly record: TrialRecord | null;
}

/**
 * The newest trial of each kind onto a machine. One that has expired counts as measured no more: a value that makes the
 * verdict bolder goes back to the rig file's, so that only the more careful of the two is in force.
 * @param now RFC 3339 UTC
 */
export const applyTrials = (
  machine: TrialMachine,
  records: readonly TrialRecord[],
  now: string,
): AppliedTrials => {
  const standings = TRIAL_KINDS.map((kind): TrialStanding => {
    const record = newest(records, kind);
    if (record === null) return { kind, state: 'none', record };
    return { kind, state: isBefore(now, record.expires) ? 'measured' : 'expired', record };
  });
  let applied: AppliedTrials = { ...machine, payout: { scale: 1, offset: 0 }, standings };
  for (const standing of standings) applied = applyOne(applied, standing, machine.body);
  return applied;
};

/** Of two RFC 3339 times in UTC, by their whole seconds. */
const isBefore = (a: string, b: string): boolean => a.slice(0, 19) < b.slice(0, 19);

const newest = (records: readonly TrialRecord[], kind: TrialKind): TrialRecord | null =>
  records
    .filter((record) => record.trial.kind === kind)
    .reduce<TrialRecord | null>(
      (best, one) => (best === null || !isBefore(one.date, best.date) ? one : best),
      null,
    );

const applyOne = (
  machine: AppliedTrials,
  { kind, state, record }: TrialStanding,
  file: BodyDescription,
): AppliedTrials => {
  if (record === null) return machine;
  const value = (name: TrialValue, otherwise: number): number =>
    record.values.find((one) => one.name === name)?.value ?? otherwise;
  const fresh = state === 'measured';
  const { body } = machine;
  // Of an expired value only what makes the verdict more careful stays.
  const careful = (measured: number, filed: number, towards: 'larger' | 'smaller') =>
    fresh ? measured : towards === 'larger' ? Math.max(measured, filed) : Math.min(measured, filed);
  switch (kind) {
    case 'tail-length':
      return { ...machine, payout: { scale: value('payoutScale', 1), offset: value('payoutOffset', 0) } };
    case 'muscle-bend':
      return {
        ...machine,
        muscles: { ...machine.muscles, bendGain: value('bendGain', machine.muscles.bendGain) },
      };
    case 'inversion':
      return {
        ...machine,
        body: {
          ...body,
          inversion: {
            ...body.inversion,
            yield: careful(value('inversionYield', file.inversion.yield), file.inversion.yield, 'larger'),
          },
          friction: careful(value('friction', file.friction), file.friction, 'larger'),
          measured: withMeasured(body.measured, ['inversionYield', 'friction'], fresh),
        },
      };
    case 'transition':
      return {
        ...machine,
        body: {
          ...body,
          collapseFraction: careful(
            value('collapseFraction', file.collapseFraction),
            file.collapseFraction,
            'smaller',
          ),
          eccentricityFloor: careful(
            value('eccentricityFloor', file.eccentricityFloor),
            file.eccentricityFloor,
            'larger',
          ),
          justifiedMargin: value('margin', 1),
        },
      };
  }
};

const withMeasured = (
  before: readonly MeasuredValue[],
  values: readonly MeasuredValue[],
  fresh: boolean,
): readonly MeasuredValue[] => {
  const others = before.filter((one) => !values.includes(one));
  return fresh ? [...others, ...values] : others;
};
