import { describe, expect, it } from 'vitest';
import { solveCase } from '../../../shared-model/retraction/solve-case.ts';
import { BODY_B } from '../../reference/body-b.ts';

const whole = {
  id: 'leat',
  body: BODY_B,
  pressure: 10e3,
  inversion: { yield: 1500, rateCoefficient: 4e-4, rateExponent: 1 },
  tipSpeed: 0.05,
  friction: 0.3,
  tailWeight: 0.3,
  segments: [
    { length: 0.2, curvature: 0, plane: 0 },
    { length: 0.1, curvature: 0.2, plane: 0.5 },
  ],
  payout: 0.61,
  margin: 1.25,
  collapseFraction: 0.8,
  eccentricityFloor: 0.1,
  guideSetback: 0.02,
  tipRetractor: false,
  heldTension: 0,
  retractTo: 0.1,
  gravity: { weight: 0.1, payload: 0.1, direction: [0, 1, 0], support: 0.1 },
};
const bare = { body: BODY_B, pressure: 10e3, segments: [{ length: 0.3, curvature: 0, plane: 0 }] };

/** Every place of a case that holds a number, as a path. */
const numberPaths = (value: unknown, path: (string | number)[] = []): (string | number)[][] => {
  if (typeof value === 'number') return [path];
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) =>
    numberPaths(inner, [...path, Array.isArray(value) ? Number(key) : key]),
  );
};

const withValue = (path: readonly (string | number)[], value: unknown): unknown => {
  const copy = structuredClone(whole) as unknown;
  let at = copy as Record<string | number, unknown>;
  for (const key of path.slice(0, -1)) at = at[key] as Record<string | number, unknown>;
  at[path.at(-1) as string] = value;
  return copy;
};

describe('a planning case', () => {
  it('that says everything is solved', () => {
    const result = solveCase(whole);
    expect(result.verdict).toBe('invert');
    expect(result.id).toBe('leat');
  });

  it('needs only body, pressure and segments', () => {
    expect(solveCase(bare)).toMatchObject({ id: null, verdict: 'invert', length: 0.3 });
    for (const key of ['body', 'pressure', 'segments']) {
      const { [key as 'body']: _, ...rest } = bare;
      const result = solveCase(rest);
      expect(result.verdict).toBe('refuse');
      expect(result.verdict === 'refuse' && result.reason).toContain(`${key}: found nothing; allowed is`);
    }
  });

  it('takes the defaults of the model', () => {
    const spelt = {
      ...bare,
      inversion: { yield: 0 },
      tipSpeed: 0,
      friction: 0,
      tailWeight: 0,
      payout: 0.6,
      margin: 1.25,
      collapseFraction: 0.8,
      eccentricityFloor: 0.1,
      guideSetback: 0,
      tipRetractor: false,
      heldTension: 0,
      retractTo: 0,
    };
    expect(solveCase(bare)).toEqual(solveCase(spelt));
  });

  it('may leave the plane out only where nothing bends', () => {
    const plain = { ...bare, segments: [{ length: 0.3, curvature: 0 }] };
    expect(solveCase(plain)).toEqual(solveCase(bare));
    const bent = solveCase({ ...bare, segments: [{ length: 0.3, curvature: 1 }] });
    expect(bent.verdict === 'refuse' && bent.reason).toContain('segments.0.plane: found nothing');
    expect(solveCase({ ...bare, segments: [{ length: 0.3 }] }).verdict).toBe('refuse');
  });

  it.each(numberPaths(whole).map((path) => [path.join('.'), path] as const))(
    'refuses %s that is no number, and says where, what and what is allowed',
    (where, path) => {
      for (const bad of [Number.NaN, Infinity, -Infinity, null, '1', true, []]) {
        const result = solveCase(withValue(path, bad));
        expect(result.verdict, String(bad)).toBe('refuse');
        if (result.verdict === 'refuse') expect(result.reason).toMatch(/: found .+; allowed is .+/);
        if (result.verdict === 'refuse' && !where.startsWith('gravity.direction'))
          expect(result.reason).toContain(where);
      }
    },
  );

  const signed = /curvature|plane|direction/;
  it.each(
    numberPaths(whole)
      .filter((path) => !signed.test(path.join('.')))
      .map((path) => [path.join('.'), path] as const),
  )('refuses a negative %s', (_, path) => {
    expect(solveCase(withValue(path, -1)).verdict).toBe('refuse');
  });

  it.each([
    ['body.radius', 0],
    ['body.wall', 0],
    ['body.E', 0],
    ['pressure', 0],
    ['inversion.rateCoefficient', 0],
    ['inversion.rateExponent', 0],
    ['margin', 0.99],
    ['margin', 2],
    ['collapseFraction', 0],
    ['collapseFraction', 1.01],
    ['retractTo', 0.31],
  ])('refuses %s = %s', (where, value) => {
    const result = solveCase(withValue(where.split('.'), value));
    expect(result.verdict === 'refuse' && result.reason).toContain(`${where}: found ${value}; allowed is`);
  });

  it('refuses a key it does not know, wherever it is', () => {
    for (const path of [['presure'], ['body', 'thickness'], ['segments', 0, 'radius'], ['gravity', 'g']]) {
      const result = solveCase(withValue(path, 1));
      expect(result.verdict === 'refuse' && result.reason).toContain(
        `found unknown ${path.at(-1)}; allowed is only`,
      );
    }
  });

  it('refuses what is no case at all', () => {
    for (const json of [null, 7, 'case', [], [bare], {}]) expect(solveCase(json).verdict).toBe('refuse');
    expect(solveCase({ ...bare, segments: {} }).verdict).toBe('refuse');
    expect(solveCase({ ...bare, gravity: null }).verdict).toBe('refuse');
    expect(solveCase({ ...bare, gravity: { direction: [0, 0, 0] } }).verdict).toBe('refuse');
    expect(solveCase({ ...bare, gravity: { support: 'floor' } }).verdict).toBe('refuse');
  });

  it('refuses with id, verdict and reason only, and keeps the id', () => {
    expect(Object.keys(solveCase({ ...bare, id: 7, pressure: -1 })).sort()).toEqual([
      'id',
      'reason',
      'verdict',
    ]);
    expect(solveCase({ ...bare, id: 7, pressure: -1 }).id).toBe(7);
    expect(solveCase({ ...bare, id: {} }).id).toBeNull();
  });

  it('says no more than five places when a long body is wrong everywhere', () => {
    const segments = Array.from({ length: 50 }, () => ({ length: -1, curvature: 0, plane: 0 }));
    const result = solveCase({ ...bare, segments });
    expect(result.verdict === 'refuse' && result.reason).toMatch(/segments\.4\..*and 45 more$/);
  });

  it('refuses numbers that overflow instead of answering with nonsense', () => {
    const huge = [
      { ...bare, body: { ...BODY_B, radius: 1e200 } },
      { ...bare, body: { ...BODY_B, E: 1e308 } },
      { ...bare, pressure: 1e308 },
      { ...bare, segments: [{ length: 1e200, curvature: 1e-200, plane: 0 }] },
      { ...bare, segments: Array.from({ length: 3 }, () => ({ length: 1e308, curvature: 0, plane: 0 })) },
      { ...bare, friction: 1e6, segments: [{ length: 1, curvature: 1, plane: 0 }] },
    ];
    for (const one of huge) {
      const result = solveCase(one);
      if (result.verdict === 'refuse') expect(result.reason).not.toBe('');
      else expect(JSON.stringify({ ...result, ratio: 0, worst: 0 })).not.toContain('null');
      expect(result.verdict).not.toBe('invert');
    }
  });
});
