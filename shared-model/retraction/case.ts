import { z } from 'zod';

const number = z.number('a number');
const notNegative = z.number('a number of 0 or more').min(0, 'a number of 0 or more');
const positive = z.number('a number above 0').positive('a number above 0');

/** An object that has no other keys: a misspelt key must not pass for a default. */
const object = <Shape extends z.ZodRawShape>(shape: Shape) => {
  const keys = Object.keys(shape).join(', ');
  return z.strictObject(shape, {
    error: (issue) => (issue.code === 'unrecognized_keys' ? `only ${keys}` : `an object of ${keys}`),
  });
};

const DIRECTION = 'three numbers [x, y, z], not all 0';
/** Unit vector, from any direction that is one. */
const direction = z
  .tuple([number, number, number], DIRECTION)
  .refine((d) => Math.hypot(...d) > 0 && Number.isFinite(Math.hypot(...d)), DIRECTION)
  .transform((d): [number, number, number] => {
    const n = Math.hypot(...d);
    return [d[0] / n, d[1] / n, d[2] / n];
  });

/** Arc length from the base up to which ground carries the body [m]. */
const support = z
  .union([notNegative, z.enum(['ground', 'none'])], 'metres of 0 or more, "ground" or "none"')
  .transform((value) => (value === 'ground' ? Number.POSITIVE_INFINITY : value === 'none' ? 0 : value));

/** The plane of a bend may be left out only where nothing bends: a guessed one would be another body. */
const segment = object({ length: notNegative, curvature: number, plane: number.optional() })
  .refine((one) => one.plane !== undefined || one.curvature === 0, {
    path: ['plane'],
    error: 'a number, wherever curvature is not 0',
  })
  .transform((one) => ({ ...one, plane: one.plane ?? 0 }));

const SEGMENTS_MAX = 10_000;
const segments = z.array(segment, 'a list of segments').max(SEGMENTS_MAX, `at most ${SEGMENTS_MAX} segments`);

const MARGIN = 'a number from 1 to below 2';
const FRACTION = 'a number above 0, at most 1';

/** One planning case, all SI. Only body, pressure and segments are required; the defaults are those of the model. */
const caseSchema = object({
  id: z.union([z.string(), number], 'a text or a number').nullable().default(null),
  body: object({ radius: positive, wall: positive, E: positive, G: notNegative }),
  pressure: positive,
  inversion: object({
    yield: notNegative.default(0),
    rateCoefficient: positive.optional(),
    rateExponent: positive.default(1),
  }).prefault({}),
  tipSpeed: notNegative.default(0),
  friction: notNegative.default(0),
  tailWeight: notNegative.default(0),
  segments,
  payout: notNegative.optional(),
  margin: z.number(MARGIN).min(1, MARGIN).lt(2, MARGIN).default(1.25),
  collapseFraction: z.number(FRACTION).gt(0, FRACTION).max(1, FRACTION).default(0.8),
  eccentricityFloor: notNegative.default(0.1),
  guideSetback: notNegative.default(0),
  tipRetractor: z.boolean('true or false').default(false),
  heldTension: notNegative.default(0),
  retractTo: notNegative.default(0),
  gravity: object({
    weight: notNegative.default(0),
    payload: notNegative.default(0),
    direction: direction.prefault([0, 1, 0]),
    support: support.default(0),
  }).optional(),
});
export type Case = z.output<typeof caseSchema>;

export type ParsedCase =
  | { readonly ok: true; readonly value: Case; readonly length: number }
  | { readonly ok: false; readonly id: string | number | null; readonly reason: string };

/** Checks one case and adds up its body length [m]. A refusal says where, what was found and what is allowed there. */
export const parseCase = (json: unknown): ParsedCase => {
  const parsed = caseSchema.safeParse(json);
  if (!parsed.success) return { ok: false, id: idOf(json), reason: reasonOf(parsed.error.issues, json) };
  const { id, segments, retractTo } = parsed.data;
  const length = segments.reduce((sum, one) => sum + one.length, 0);
  if (!Number.isFinite(length))
    return { ok: false, id, reason: 'segments: found more than any number of metres' };
  // Lengths that a person added up may differ in the last digits.
  if (!(retractTo <= length * (1 + 1e-9)))
    return {
      ok: false,
      id,
      reason: `retractTo: found ${retractTo}; allowed is 0 to the body length ${length}`,
    };
  return { ok: true, value: { ...parsed.data, retractTo: Math.min(retractTo, length) }, length };
};

const idOf = (json: unknown): string | number | null => {
  const id = typeof json === 'object' && json !== null && 'id' in json ? json.id : null;
  return typeof id === 'string' || Number.isFinite(id) ? (id as string | number) : null;
};

const REASONS_MAX = 5;
const reasonOf = (issues: readonly z.core.$ZodIssue[], json: unknown): string => {
  const said = issues.slice(0, REASONS_MAX).map((issue) => {
    const where = issue.path.length === 0 ? 'case' : issue.path.join('.');
    const found =
      issue.code === 'unrecognized_keys'
        ? `unknown ${issue.keys.join(', ')}`
        : shown(valueAt(json, issue.path));
    return `${where}: found ${found}; allowed is ${issue.message}`;
  });
  const more = issues.length - said.length;
  return [...said, ...(more > 0 ? [`and ${more} more`] : [])].join('. ');
};

const valueAt = (json: unknown, path: readonly PropertyKey[]): unknown =>
  path.reduce<unknown>(
    (value, key) => (typeof value === 'object' && value !== null ? Reflect.get(value, key) : undefined),
    json,
  );

const shown = (value: unknown): string => {
  if (value === undefined) return 'nothing';
  if (typeof value === 'number') return String(value);
  const text = JSON.stringify(value);
  return text.length <= 40 ? text : `${text.slice(0, 37)}...`;
};
