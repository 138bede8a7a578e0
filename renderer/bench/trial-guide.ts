import type { BenchReading } from '../../shared-model/contract/request.ts';
import type { TrialKind, TrialPoints, TrialValue } from '../../shared-model/trials/trial.ts';
import type { Point } from './drafts.ts';

/** One number of a point: read from the rig, or measured by a person. On screen in `unit`, inside in SI. */
export interface TrialField {
  readonly name: string;
  readonly label: string;
  readonly unit: string;
  /** SI value of one unit. */
  readonly factor: number;
  readonly places: number;
  /** Where the rig can give it. */
  readonly read?: (reading: BenchReading) => number | null;
}

export interface TrialGuide {
  readonly kind: TrialKind;
  readonly title: string;
  readonly gives: string;
  readonly steps: readonly string[];
  readonly caution: string;
  readonly fields: readonly TrialField[];
  /** Shows a control that pulls the tail in slowly. */
  readonly pulls: boolean;
}

const pressure: TrialField = {
  name: 'pressure',
  label: 'Body pressure',
  unit: 'kPa',
  factor: 1000,
  places: 2,
  read: (reading) => reading.pressure,
};
const length: TrialField = {
  name: 'length',
  label: 'Body length',
  unit: 'm',
  factor: 1,
  places: 3,
  read: (reading) => reading.length,
};

export const TRIAL_GUIDES: readonly TrialGuide[] = [
  {
    kind: 'tail-length',
    title: 'Tail length against a tape',
    gives: 'scale and zero of the spool’s encoder',
    caution:
      'A moving spool and tail can catch fingers and sleeves. Nobody touches them while the tail moves.',
    steps: [
      'Lay a tape from the base along a straight, free floor.',
      'Grow to a length on Drive and let go; the tail must be taut.',
      'Take the reading here, read the tape at the tip, add the point.',
      'Repeat for four lengths or more that span at least a metre.',
    ],
    fields: [
      {
        name: 'payout',
        label: 'Payout as read',
        unit: 'm',
        factor: 1,
        places: 3,
        read: (reading) => reading.payout,
      },
      { name: 'tape', label: 'Body length by tape', unit: 'm', factor: 1, places: 3 },
    ],
    pulls: false,
  },
  {
    kind: 'muscle-bend',
    title: 'Muscle pressure against bend',
    gives: 'gain of the steering muscles',
    caution: 'A bending body sweeps sideways. Keep clear of its free end; muscles are under pressure.',
    steps: [
      'Grow as much as bends with the muscles, free of floor and walls.',
      'Steer towards the first muscle on Drive, hold, let go.',
      'Take the reading here. Stretch a straight edge along the bend: bend = 8 × height ÷ (chord² + 4 × height²).',
      'Repeat for four pressures or more.',
    ],
    fields: [
      {
        name: 'pressure',
        label: 'Muscle pressure',
        unit: 'kPa',
        factor: 1000,
        places: 2,
        read: (reading) => reading.muscle,
      },
      { name: 'bend', label: 'Bend', unit: '1/m', factor: 1, places: 3 },
    ],
    pulls: false,
  },
  {
    kind: 'inversion',
    title: 'Inversion tension',
    gives: 'yield of inversion and friction of the tail',
    caution:
      'The tail is under tension: stand aside of its line. The pull is judged as always and may be refused.',
    steps: [
      'Grow a short body, straight; later one that lies in bends of 0.7 rad or more.',
      'Hold Retract slowly for two seconds or more, let go.',
      'Take the reading: it is the last second of that pull. Enter the total bend of the body, add the point.',
      'Repeat at several pressures and with both shapes, five pulls or more.',
    ],
    fields: [
      pressure,
      {
        name: 'tension',
        label: 'Tail tension',
        unit: 'N',
        factor: 1,
        places: 1,
        read: (reading) => reading.tension,
      },
      length,
      {
        name: 'turn',
        label: 'Total bend',
        unit: 'rad',
        factor: 1,
        places: 2,
        read: (reading) => reading.turn,
      },
    ],
    pulls: true,
  },
  {
    kind: 'transition',
    title: 'Transition length',
    gives: 'share of the collapse that is relied on, smallest arm, and the margin that is justified',
    caution:
      'Foldback pulls no body that its verdict refuses, so this is done by hand: lowest pressure that stands, spool free, a spring balance on the tail, nobody near the body, which may jump aside.',
    steps: [
      'Grow straight, then in two different bends; three lengths each.',
      'Free the spool. Pull the tail slowly by the spring balance until the body just folds.',
      'Take the reading for length and pressure, enter the bend and the tension at which it folded, add the point.',
      'Six folds or more. The scatter sets the margin.',
    ],
    fields: [
      length,
      { name: 'bend', label: 'Bend (0: straight)', unit: '1/m', factor: 1, places: 3 },
      pressure,
      { name: 'tension', label: 'Tension when it folded', unit: 'N', factor: 1, places: 1 },
    ],
    pulls: false,
  },
];

export const VALUE_NAMES: Readonly<
  Record<
    TrialValue,
    { readonly name: string; readonly unit: string; readonly factor: number; readonly places: number }
  >
> = {
  payoutScale: { name: 'Scale of the payout', unit: '', factor: 1, places: 4 },
  payoutOffset: { name: 'Zero of the payout', unit: 'm', factor: 1, places: 3 },
  bendGain: { name: 'Gain of the bend', unit: '', factor: 1, places: 3 },
  inversionYield: { name: 'Yield of inversion', unit: 'kPa', factor: 1000, places: 3 },
  friction: { name: 'Friction of the tail', unit: '', factor: 1, places: 3 },
  collapseFraction: { name: 'Share of the collapse relied on', unit: '', factor: 1, places: 3 },
  eccentricityFloor: { name: 'Smallest arm, of the radius', unit: '', factor: 1, places: 3 },
  margin: { name: 'Margin justified', unit: '', factor: 1, places: 2 },
};

/** Points in SI from what stands in the fields. */
export const trialOf = (kind: TrialKind, points: readonly Point[]): TrialPoints =>
  ({ kind, points }) as unknown as TrialPoints;

/** A number as a person types it, also with a decimal comma; null where it is none. */
export const numberOf = (text: string): number | null => {
  const trimmed = text.trim().replace(',', '.').replace('−', '-');
  return /^-?\d+(\.\d+)?$/.test(trimmed) ? Number(trimmed) : null;
};
