import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { loggedReadings } from '../../../main/record/logged-readings.ts';
import { type SampleMessage, type Told, thinSample } from '../../../main/record/sample-coding.ts';
import { sampleAt } from './a-mission.ts';

const messages = (count: number): SampleMessage[] => {
  let told: Told | null = null;
  return Array.from({ length: count }, (_, i) => {
    const thinned = thinSample(told, sampleAt(i / 20, { tail_payout: (i % 37) / 5 }));
    told = thinned.told;
    return thinned.message;
  });
};

describe('the readings of a log', () => {
  const readings = loggedReadings(messages(900));

  it('are the same wherever one begins to look', () => {
    const inOrder = [...readings];
    fc.assert(
      fc.property(fc.nat(899), (i) => {
        expect(readings.sample(i)).toEqual(inOrder[i]);
      }),
    );
  });

  it('are found by their time', () => {
    expect(readings.indexAt(-1)).toBe(-1);
    expect(readings.indexAt(0)).toBe(0);
    expect(readings.indexAt(20.01)).toBe(400);
    expect(readings.indexAt(1e6)).toBe(899);
  });

  it('are none beyond the end', () => {
    expect(() => readings.sample(900)).toThrow(/no reading 900; there are 900/);
  });
});
