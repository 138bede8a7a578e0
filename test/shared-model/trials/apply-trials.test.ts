import { describe, expect, it } from 'vitest';
import { defaultMargin } from '../../../shared-model/retraction/judge.ts';
import { applyTrials } from '../../../shared-model/trials/apply-trials.ts';
import type { TrialPoints, TrialRecord, TrialValue } from '../../../shared-model/trials/trial.ts';
import { builtInRig } from '../../main/rig/built-in-rig.ts';

const rig = builtInRig();
const catalogue = { ...rig, body: { ...rig.body, measured: ['E', 'G'] as const } };
const NOW = '2026-06-01T00:00:00Z';

const record = (
  kind: TrialPoints['kind'],
  values: Partial<Record<TrialValue, number>>,
  over: Partial<TrialRecord> = {},
): TrialRecord => ({
  trial: { kind, points: [] },
  values: Object.entries(values).map(([name, value]) => ({ name: name as TrialValue, value, halfWidth: 0 })),
  before: [],
  date: '2026-05-01T00:00:00Z',
  initials: 'ab',
  expires: '2026-12-01T00:00:00Z',
  ...over,
});
const inversion = record('inversion', { inversionYield: 1500, friction: 0.2 });

describe('the trials of a machine', () => {
  it('leave it as its file says while there are none', () => {
    const applied = applyTrials(catalogue, [], NOW);
    expect(applied.body).toBe(catalogue.body);
    expect(applied.payout).toEqual({ scale: 1, offset: 0 });
    expect(applied.standings.every((one) => one.state === 'none')).toBe(true);
    expect(defaultMargin(applied.body)).toBe(1.5);
  });

  it('replace catalogue values, and with all of them measured the margin falls to 1.25', () => {
    const { body, standings } = applyTrials(catalogue, [inversion], NOW);
    expect([body.inversion.yield, body.friction]).toEqual([1500, 0.2]);
    expect(body.inversion.rateCoefficient).toBe(rig.body.inversion.rateCoefficient);
    expect(defaultMargin(body)).toBe(1.25);
    expect(standings.find((one) => one.kind === 'inversion')?.state).toBe('measured');
  });

  it('count as measured no more once they have expired, and then only the more careful value holds', () => {
    const expired = { ...inversion, expires: '2026-05-31T00:00:00Z' };
    const { body, standings } = applyTrials(rig, [expired], NOW);
    // The file says 1,200 Pa and 0.25: of the trial only its higher yield stays.
    expect([body.inversion.yield, body.friction]).toEqual([1500, 0.25]);
    expect(defaultMargin(body)).toBe(1.5);
    expect(standings.find((one) => one.kind === 'inversion')?.state).toBe('expired');
  });

  it('are in force by the newest of a kind, wherever it stands in the file', () => {
    const older = record(
      'inversion',
      { inversionYield: 900, friction: 0.1 },
      { date: '2026-04-01T00:00:00Z' },
    );
    for (const records of [
      [older, inversion],
      [inversion, older],
    ])
      expect(applyTrials(rig, records, NOW).body.inversion.yield).toBe(1500);
  });

  it('of folding set what is relied on, and a margin that no other value lowers', () => {
    const fold = record('transition', { collapseFraction: 0.9, eccentricityFloor: 0.05, margin: 1.4 });
    const { body } = applyTrials(rig, [fold], NOW);
    expect([body.collapseFraction, body.eccentricityFloor]).toEqual([0.9, 0.05]);
    expect(defaultMargin(body)).toBe(1.4);
    const { body: later } = applyTrials(rig, [{ ...fold, expires: NOW }], NOW);
    expect([later.collapseFraction, later.eccentricityFloor]).toEqual([0.8, 0.1]);
    expect(defaultMargin(later)).toBe(1.4);
  });

  it('of the tail and of a muscle correct the encoder and the gain', () => {
    const tail = record('tail-length', { payoutScale: 1.01, payoutOffset: -0.02 });
    const muscle = record('muscle-bend', { bendGain: 0.6 });
    const applied = applyTrials(rig, [tail, muscle], NOW);
    expect(applied.payout).toEqual({ scale: 1.01, offset: -0.02 });
    expect(applied.muscles.bendGain).toBe(0.6);
  });
});
