import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { BUILT_IN_RIG_FILE, loadRigFile, parseRigText } from '../../../main/rig/rig-file.ts';

const BENCH = join(import.meta.dirname, '../../../main/rig/files/bench-three-muscles.yaml');
const text = readFileSync(BUILT_IN_RIG_FILE, 'utf8');
const errorsOf = (changed: string): readonly string[] => {
  const result = parseRigText(changed, 'rig.yaml');
  return result.ok ? [] : result.errors;
};

describe('a rig file', () => {
  test('gives the built-in rig in SI', () => {
    const result = loadRigFile(BUILT_IN_RIG_FILE);
    if (!result.ok) throw new Error(result.errors.join());
    expect(result.rig.body).toMatchObject({ radius: 0.08, E: 60_000, G: 2000, wall: 1, guideSetback: 0.06 });
    expect(result.rig.body.inversion.yield).toBe(1200);
    // v = φ·ΔP with 0.4 m/s at 1 kPa
    expect(result.rig.body.inversion.rateCoefficient * 1000).toBeCloseTo(0.4, 12);
    expect(result.rig.limits.bodyPressureMax).toBe(14_000);
    expect(result.rig.reads.body_pressure).toMatchObject({ scale: 1, min: -1000, max: 25_000 });
    expect(result.rig.simulated).toBe(true);
  });

  test('of separate slaves is sound too, and takes the ambient pressure off an absolute sensor', () => {
    const result = loadRigFile(BENCH);
    if (!result.ok) throw new Error(result.errors.join());
    const { body_pressure } = result.rig.reads;
    // 1013 of 0.1 kPa is the ambient pressure itself: no gauge pressure.
    expect(1013 * body_pressure!.scale + body_pressure!.offset).toBeCloseTo(0, 9);
    expect(result.rig.slaves.map(({ id }) => id)).toEqual([11, 12, 13, 14]);
    expect(result.rig.simulated).toBe(false);
  });

  test.each([
    [
      'a value out of range',
      text.replace('diameter_mm: 160', 'diameter_mm: -3'),
      /^rig\.yaml:\d+: body\.diameter_mm: .*>0 \(found -3\)$/,
    ],
    [
      'a word for a number',
      text.replace('friction: 0.25', 'friction: much'),
      /body\.friction: .*number.*\(found "much"\)/,
    ],
    [
      'an unknown key',
      text.replace('baud: 115200', 'baud: 115200\n  bauds: 9'),
      /serial\.bauds: this key is not known/,
    ],
    ['a missing key', text.replace('  friction: 0.25', '  #'), /body\.friction/],
    [
      'a range that falls',
      text.replace('range: [-1, 25]', 'range: [25, -1]'),
      /body_pressure\.range: must rise/,
    ],
    [
      'a unit that is not listed',
      text.replace('tail_tension: { unit: 1', 'tail_tension: { unit: 9'),
      /tail_tension\.unit: no unit 9/,
    ],
    [
      'a stop that is wired and not read',
      text.replace(/ +emergency_stop: .*\n/, ''),
      /emergency_stop_wired: is true/,
    ],
    [
      'a muscle without its sensor',
      text.replace(/ +muscle_2_pressure: .*\n/, ''),
      /muscle_2_pressure is needed/,
    ],
  ])('names line, key, what was found and what is allowed for %s', (_, changed, message) => {
    expect(errorsOf(changed).join('\n')).toMatch(message);
  });

  test('names the very line', () => {
    const line = text.split('\n').findIndex((one) => one.includes('diameter_mm')) + 1;
    expect(errorsOf(text.replace('diameter_mm: 160', 'diameter_mm: -3'))[0]).toContain(`rig.yaml:${line}:`);
  });

  test('tells all its faults at once', () => {
    expect(
      errorsOf(text.replace('diameter_mm: 160', 'diameter_mm: 0').replace('baud: 115200', 'baud: 1')),
    ).toHaveLength(2);
  });

  test('that is not YAML, not there, or a folder is refused with what to do', () => {
    expect(errorsOf('a: [')[0]).toMatch(/not valid YAML/);
    for (const path of ['/nowhere/rig.yaml', '/tmp']) {
      const result = loadRigFile(path);
      expect(result.ok ? '' : result.errors[0]).toMatch(/cannot be read, .*Give the path of a rig file/);
    }
  });

  test('says of every key with a dimension which unit it is in', () => {
    // Common practice: a bare number with a dimension is how a millimetre becomes an inch.
    const bare = [
      ...text.matchAll(
        /^ {2}([a-z_]*(?:pressure|speed|length|diameter|radius|timeout|weight|tension_max)[a-z_A-Z_]*):/gm,
      ),
    ].map((match) => match[1]!);
    for (const key of bare.filter((one) => !/^(muscle_\d|body_pressure$|tail_|tip_retractor)/.test(one)))
      expect(key).toMatch(/_(mm|m|kPa|N|ms|m_per_s|kPa_per_s|N_per_m|per_m_s)$/);
  });
});
