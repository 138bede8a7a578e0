import { copyFileSync, mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { checkRig } from '../../../main/commands/check-rig.ts';
import { appendTrial, companionPath } from '../../../main/rig/companion.ts';
import { BUILT_IN_RIG_FILE } from '../../../main/rig/rig-file.ts';

const checked = async (file?: string) => {
  const out: string[] = [];
  const errors: string[] = [];
  const output = { out: (line: string) => out.push(line), error: (line: string) => errors.push(line) };
  const code = await checkRig({ file, json: false, live: false }, output);
  return { code, out: out.join('\n'), errors: errors.join('\n') };
};
const copy = (): string => {
  const file = join(mkdtempSync(join(tmpdir(), 'foldback-rig-')), 'mill.yaml');
  copyFileSync(BUILT_IN_RIG_FILE, file);
  return file;
};

describe('check-rig', () => {
  it('finds the built-in rig sound', async () => {
    const { code, out, errors } = await checked();
    expect([code, errors]).toEqual([0, '']);
    expect(out).toContain('rig file is sound');
  });

  it('tells of the trials in the companion, and until when they hold', async () => {
    const file = copy();
    await appendTrial(companionPath(file), {
      trial: { kind: 'tail-length', points: [] },
      values: [
        { name: 'payoutScale', value: 1.01, halfWidth: 0.001 },
        { name: 'payoutOffset', value: 0, halfWidth: 0.001 },
      ],
      before: [],
      date: '2020-01-01T00:00:00Z',
      initials: 'ab',
      expires: '2020-06-01T00:00:00Z',
    });
    const { code, out } = await checked(file);
    expect(code).toBe(0);
    expect(out).toMatch(/tail-length +expired by ab on 2020-01-01/);
  });

  it('finds fault with a companion that cannot be read', async () => {
    const file = copy();
    writeFileSync(companionPath(file), '- nothing: 1');
    const { code, errors } = await checked(file);
    expect(code).toBe(1);
    expect(errors).toContain('mill.bench.yaml:1: trial 1');
  });
});
