import { spawn } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
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
  values: fc.constant([
    { name: 'payoutScale' as const, value: 1.01, halfWidth: 0.002 },
    { name: 'payoutOffset' as const, value: -0.02, halfWidth: 0.004 },
  ]),
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

  it('keeps all of several trials that are saved at once', async () => {
    const path = freshPath();
    const all = fc.sample(records, { numRuns: 6, seed: 2 });
    await Promise.all(all.map((record) => appendTrial(path, record)));
    expect(readCompanion(path)).toEqual({ ok: true, records: all });
  });

  it('goes on to take trials after one that it could not take', async () => {
    const path = freshPath();
    writeFileSync(path, '- a: [');
    const [record] = fc.sample(records, { numRuns: 1, seed: 3 }) as [TrialRecord];
    const refused = appendTrial(path, record);
    await expect(refused).rejects.toThrow(/not valid YAML/);
    writeFileSync(path, '');
    await appendTrial(path, record);
    expect(readCompanion(path)).toEqual({ ok: true, records: [record] });
  });

  it('keeps what a person wrote into it, also before the first trial', async () => {
    const path = freshPath();
    writeFileSync(path, '# Spool changed in May.\n');
    const [record] = fc.sample(records, { numRuns: 1, seed: 4 }) as [TrialRecord];
    await appendTrial(path, record);
    expect(readFileSync(path, 'utf8')).toMatch(/^# Spool changed in May\.\n/);
  });

  it('holds every trial that was told to be saved when the process is killed amid saving', async () => {
    const path = freshPath();
    const [record] = fc.sample(records, { numRuns: 1, seed: 5 }) as [TrialRecord];
    const module = new URL('../../../main/rig/companion.ts', import.meta.url).href;
    const source = `
      const { appendTrial } = await import(${JSON.stringify(module)});
      for (;;) {
        await appendTrial(${JSON.stringify(path)}, ${JSON.stringify(record)});
        console.log('saved');
      }`;
    const child = spawn(process.execPath, ['--import', 'tsx', '--input-type=module', '-e', source], {
      stdio: ['ignore', 'pipe', 'inherit'],
    });
    const ended = new Promise((done) => child.once('exit', done));
    let saved = 0;
    for await (const _ of createInterface({ input: child.stdout })) if (++saved === 20) child.kill('SIGKILL');
    await ended;
    const read = readCompanion(path);
    expect(read).toMatchObject({ ok: true });
    expect(saved).toBeGreaterThanOrEqual(20);
    expect(read.ok ? read.records.length : 0).toBeGreaterThanOrEqual(saved);
  });

  /** A companion of one trial with these values, a key a line. */
  const withValues = (kind: string, values: Record<string, number>): string => {
    const lines = Object.entries(values).flatMap(([name, value]) => [
      `    - name: ${name}`,
      `      value: ${value}`,
      '      halfWidth: 0',
    ]);
    return `- trial: { kind: ${kind}, points: [] }
  before: []
  date: 2026-05-01T08:00:00Z
  initials: ab
  expires: 2026-11-01T08:00:00Z
  values:${lines.length === 0 ? ' []' : `\n${lines.join('\n')}`}
`;
  };

  it.each<[string, string, Record<string, number>, RegExp]>([
    ['nothing measured', 'inversion', {}, /:6: trial 1: values: .*inversionYield, friction/],
    ['half of it', 'inversion', { friction: 0.2 }, /:7: trial 1: values: .*inversionYield/],
    ['a value of another trial', 'muscle-bend', { friction: 0.2 }, /:7: .*bendGain/],
    [
      'more than full collapse',
      'transition',
      { collapseFraction: 5, eccentricityFloor: 0.1, margin: 1.3 },
      /:8: trial 1: values\.0\.value: collapseFraction may be 0.05 to 1 \(found 5\)/,
    ],
    [
      'an arm below none',
      'transition',
      { collapseFraction: 0.8, eccentricityFloor: -3, margin: 1.3 },
      /:11: .*eccentricityFloor may be 0 to/,
    ],
    [
      'a margin below the smallest',
      'transition',
      { collapseFraction: 0.8, eccentricityFloor: 0.1, margin: 0.1 },
      /:14: .*margin may be 1.25 to/,
    ],
    ['friction that pushes', 'inversion', { inversionYield: 1200, friction: -0.2 }, /:11: .*friction/],
    ['another spool', 'tail-length', { payoutScale: 2, payoutOffset: 0 }, /:8: .*payoutScale/],
  ])('that gives %s is refused with line, key and what is allowed', (_, kind, values, reason) => {
    const path = freshPath();
    writeFileSync(path, withValues(kind, values));
    const read = readCompanion(path);
    expect(read.ok ? '' : read.errors.join('\n')).toMatch(reason);
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
