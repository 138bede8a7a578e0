import { mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { appendTrial, companionPath, readCompanion } from '../../../main/rig/companion.ts';
import type { TrialRecord } from '../../../shared-model/trials/trial.ts';

const freshPath = (): string =>
  companionPath(join(mkdtempSync(join(tmpdir(), 'foldback-bench-')), 'rig.yaml'));
const records = fc.record({
  trial: fc.record({
    kind: fc.constant('tail-length' as const),
    points: fc.array(
      fc.record({
        payout: fc.double({ noNaN: true, noDefaultInfinity: true }),
        tape: fc.double({ noNaN: true, noDefaultInfinity: true }),
      }),
      { maxLength: 4 },
    ),
  }),
  values: fc.constant([{ name: 'payoutScale' as const, value: 1.01, halfWidth: 0.002 }]),
  before: fc.constant([]),
  date: fc.constant('2026-05-01T08:00:00Z'),
  initials: fc.string({ minLength: 1, maxLength: 12 }),
  expires: fc.constant('2026-11-01T08:00:00Z'),
}) as fc.Arbitrary<TrialRecord>;

describe('the companion of a rig file', () => {
  it('lies beside it, or in the folder it is given', () => {
    expect(companionPath('/a/b/mill.yaml')).toBe('/a/b/mill.bench.yaml');
    expect(companionPath('/a/b/mill.yml', '/c')).toBe('/c/mill.bench.yaml');
  });

  it('has no trials while there is none', () => {
    expect(readCompanion(freshPath())).toEqual({ ok: true, records: [] });
  });

  it('keeps every trial to the letter however many follow, and leaves no other file behind', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(records, { minLength: 1, maxLength: 5 }), async (all) => {
        const path = freshPath();
        let before = '';
        for (const [i, record] of all.entries()) {
          await appendTrial(path, record);
          const text = readFileSync(path, 'utf8');
          expect(text.startsWith(before)).toBe(true);
          before = text;
          expect(readCompanion(path)).toEqual({ ok: true, records: all.slice(0, i + 1) });
        }
        expect(readdirSync(join(path, '..'))).toEqual(['rig.bench.yaml']);
      }),
      { numRuns: 25 },
    );
  });

  it.each([
    ['no YAML', '- a: [', /not valid YAML/],
    ['no list', 'a: 1', /list of trials/],
    ['a trial of another kind', '- { trial: { kind: flying, points: [] } }', /trial 1/],
  ])('that is %s is refused with its place, and never written over', async (_, text, reason) => {
    const path = freshPath();
    writeFileSync(path, text);
    const read = readCompanion(path);
    expect(read.ok ? '' : read.errors.join(' ')).toMatch(reason);
    const record = fc.sample(records, { numRuns: 1, seed: 1 })[0]!;
    await expect(appendTrial(path, record)).rejects.toThrow(reason);
    expect(readFileSync(path, 'utf8')).toBe(text);
    expect(readdirSync(join(path, '..'))).toEqual(['rig.bench.yaml']);
  });
});
