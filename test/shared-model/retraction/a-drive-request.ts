import type { Limits } from '../../../shared-model/body/body.ts';
import type { Reading, Readings } from '../../../shared-model/contract/reading.ts';
import { STILL, type Wish } from '../../../shared-model/contract/request.ts';
import type { DriveRequest } from '../../../shared-model/retraction/drive-request.ts';
import type { ForcesAt, WayBack } from '../../../shared-model/retraction/verdict.ts';

export const NOW = 100;
export const LIMITS: Limits = {
  tipSpeed: 0.25,
  bodyPressureMin: 2000,
  bodyPressureMax: 14_000,
  bodyPressureRate: 2000,
  musclePressureMax: 60_000,
  bendRate: 0.6,
  bodyLengthMax: 40,
  tailTensionMax: 250,
  pressureAccuracy: 100,
  readingAge: 0.3,
  tailSlackMax: 0.3,
};
export const good = (value: number): Reading => ({ quality: 'good', value, at: NOW });
export const READINGS: Readings = {
  body_pressure: good(9000),
  tail_payout: good(2),
  tail_tension: good(80),
  emergency_stop: good(0),
  muscle_1_pressure: good(0),
};
export const HERE: ForcesAt = {
  length: 1,
  tipTension: 100,
  baseTension: 105,
  columnLoad: 900,
  arm: 0,
  capacity: 150,
  ratio: 150 / 105,
};
export const CLEAR: WayBack = { kind: 'clear', here: HERE, worst: HERE, margin: 1.25, text: 'clear' };
export const BUCKLE: WayBack = {
  kind: 'would-buckle',
  here: HERE,
  worst: { ...HERE, ratio: 0.4 },
  margin: 1.25,
  text: 'would buckle',
  remedies: [],
};
export const HELD: Extract<WayBack, { kind: 'by-tip-retractor' }> = {
  kind: 'by-tip-retractor',
  here: HERE,
  held: 0.5,
  heldMax: 3,
  margin: 1.25,
  text: 'held',
};
export const TRIP = { code: 'spool-drive', text: 'The tail does not follow.', remedy: 'Look.' } as const;
export const wish = (kind: 'grow' | 'retract', over: Partial<Wish> = {}): Wish => ({
  ...STILL,
  motion: { kind },
  tipSpeed: 0.1,
  ...over,
});

/** A pull from the base that is permitted, and whatever of it a test changes. */
export const request = (over: Partial<DriveRequest> = {}): DriveRequest => ({
  now: NOW,
  wish: wish('retract'),
  leaseAlive: true,
  linkOpen: true,
  readings: READINGS,
  limits: LIMITS,
  emergencyStopWired: true,
  described: new Set(Object.keys(READINGS)),
  body: { length: 1, tailSlack: 0, tipSpeed: 0 },
  estimateReasons: [],
  shapeAt: NOW,
  watch: { trip: null, foldSuspected: null, loose: 0 },
  wayBack: CLEAR,
  judgedAt: NOW,
  remaining: 1,
  approachSpeed: 0.2,
  tipRetractorAttached: false,
  tipRetractorState: 'absent',
  hasRetractorDrive: true,
  grip: null,
  musclePressures: null,
  bodyPressure: null,
  bodyPressureBefore: 9000,
  growthPressure: 1500,
  hoopStrength: 8000,
  bodyRadius: 0.08,
  ...over,
});
