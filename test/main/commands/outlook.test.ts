import { describe, expect, it } from 'vitest';
import { outlookForRig, runOutlook } from '../../../main/commands/outlook.ts';
import { BUILT_IN_RIG_FILE, loadRigFile } from '../../../main/rig/rig-file.ts';

const answers = async (lines: readonly string[]) => {
  const written: string[] = [];
  await runOutlook(
    (async function* () {
      yield* lines;
    })(),
    (line) => written.push(line),
  );
  return written.map((line) => JSON.parse(line));
};
const caseLine = (changes: object = {}): string =>
  JSON.stringify({
    id: 1,
    body: { radius: 0.04, wall: 50e-6, E: 200e6, G: 70e6 },
    pressure: 10e3,
    segments: [{ length: 0.3, curvature: 0, plane: 0 }],
    ...changes,
  });

describe('the outlook command', () => {
  it('answers each line with one line, in order, and leaves blank lines out', async () => {
    const results = await answers([caseLine({ id: 'a' }), '', '  ', caseLine({ id: 'b' })]);
    expect(results.map((result) => result.id)).toEqual(['a', 'b']);
    expect(Object.keys(results[0])).toEqual([
      'id',
      'length',
      'tipTension',
      'baseTension',
      'columnLoad',
      'arm',
      'capacity',
      'ratio',
      'verdict',
      'reason',
      'worst',
      'tip',
    ]);
  });

  it('refuses a line that is not JSON and goes on with the next', async () => {
    const results = await answers(['{"id": 1,', '{"id": 1, "pressure": NaN}', caseLine()]);
    expect(results.slice(0, 2)).toMatchObject([
      { id: null, verdict: 'refuse' },
      { id: null, verdict: 'refuse' },
    ]);
    expect(results[0].reason).toMatch(/^line: not JSON/);
    expect(results[2].verdict).toBe('invert');
  });

  it('refuses a number too large for JSON, and a bad case by its id', async () => {
    const [large, bad] = await answers([
      caseLine().replace('10000', '1e999'),
      caseLine({ id: 9, margin: 2 }),
    ]);
    expect(large.verdict).toBe('refuse');
    expect(bad).toEqual({
      id: 9,
      verdict: 'refuse',
      reason: 'margin: found 2; allowed is a number from 1 to below 2',
    });
  });
});

describe('the outlook of a rig', () => {
  const loaded = loadRigFile(BUILT_IN_RIG_FILE);
  if (!loaded.ok) throw new Error(loaded.errors.join('\n'));
  const plan = { length: 1, pressure: 12e3, bend: 0, margin: 1.25, tipRetractor: false };

  it('is that of an evenly bent body with the values of its file', () => {
    const short = outlookForRig(loaded.rig, plan);
    const bent = outlookForRig(loaded.rig, { ...plan, bend: 1.5 });
    if (short.verdict === 'refuse' || bent.verdict === 'refuse') throw new Error('refused');
    expect(short).toMatchObject({ length: 1, verdict: 'invert' });
    // (A/2)·(P + Y + v/φ) by hand from the rig file: R 80 mm, Y 1.2 kPa, 0.4 m/s a kPa.
    const { tipSpeed } = loaded.rig.limits;
    expect(short.tipTension).toBeCloseTo(Math.PI * 0.0032 * (12e3 + 1200 + (tipSpeed / 0.4) * 1e3), 6);
    expect(bent.tip.position[0]).toBeCloseTo((1 - Math.cos(1.5)) / 1.5, 9);
    expect(bent.verdict).toBe('buckle');
    expect(outlookForRig(loaded.rig, { ...plan, bend: 1.5, tipRetractor: true }).verdict).toBe('invert');
  });

  it('of no length is clear', () => {
    expect(outlookForRig(loaded.rig, { ...plan, length: 0 })).toMatchObject({ length: 0, verdict: 'invert' });
  });
});
