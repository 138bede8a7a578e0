import { z } from 'zod';

const finite = z.number();
const notNegative = z.number().min(0);
const positive = z.number().positive();

/** Unit vector, from any direction that is one. */
const direction = z
  .tuple([finite, finite, finite])
  .refine((d) => Math.hypot(...d) > 0, 'must not be the zero vector')
  .transform((d): [number, number, number] => {
    const n = Math.hypot(...d);
    return [d[0] / n, d[1] / n, d[2] / n];
  });

/** Arc length from the base up to which ground carries the body [m]. */
const support = z
  .union([notNegative, z.enum(['ground', 'none'])])
  .transform((value) => (value === 'ground' ? Number.POSITIVE_INFINITY : value === 'none' ? 0 : value));

const segment = z.strictObject({
  length: notNegative,
  curvature: finite.default(0),
  plane: finite.default(0),
});

/** One planning case, all SI. Only body, pressure and segments are required; the defaults are those of the model. */
export const caseSchema = z.strictObject({
  id: z.union([z.string(), z.number()]).nullable().default(null),
  body: z.strictObject({ radius: positive, wall: positive, E: positive, G: notNegative }),
  pressure: positive,
  inversion: z
    .strictObject({
      yield: notNegative.default(0),
      rateCoefficient: positive.nullable().default(null),
      rateExponent: positive.default(1),
    })
    .prefault({}),
  tipSpeed: notNegative.default(0),
  friction: notNegative.default(0),
  tailWeight: notNegative.default(0),
  segments: z.array(segment).max(100_000),
  payout: notNegative.nullable().default(null),
  margin: z.number().min(1).lt(2).default(1.25),
  collapseFraction: z.number().gt(0).max(1).default(0.8),
  eccentricityFloor: notNegative.default(0.1),
  guideSetback: notNegative.default(0),
  tipRetractor: z.boolean().default(false),
  heldTension: notNegative.default(0),
  retractTo: notNegative.default(0),
  gravity: z
    .strictObject({
      weight: notNegative.default(0),
      payload: notNegative.default(0),
      direction: direction.prefault([0, 1, 0]),
      support: support.default(0),
    })
    .nullable()
    .default(null),
});
export type Case = z.output<typeof caseSchema>;

export type ParsedCase =
  | { readonly ok: true; readonly value: Case }
  | { readonly ok: false; readonly id: string | number | null; readonly reason: string };

/** Checks one case. A refusal says every place that is wrong and what is allowed there. */
export const parseCase = (json: unknown): ParsedCase => {
  const parsed = caseSchema.safeParse(json);
  if (!parsed.success) {
    const reason = parsed.error.issues
      .map((issue) => `${issue.path.length === 0 ? 'case' : issue.path.join('.')}: ${issue.message}`)
      .join('; ');
    return { ok: false, id: idOf(json), reason };
  }
  const total = parsed.data.segments.reduce((sum, one) => sum + one.length, 0);
  if (!Number.isFinite(total))
    return { ok: false, id: parsed.data.id, reason: 'segments: the total length is not finite' };
  if (parsed.data.retractTo > total)
    return {
      ok: false,
      id: parsed.data.id,
      reason: `retractTo: ${parsed.data.retractTo} is beyond the body length ${total}; allowed is 0 to ${total}`,
    };
  return { ok: true, value: parsed.data };
};

const idOf = (json: unknown): string | number | null => {
  const id = typeof json === 'object' && json !== null && 'id' in json ? json.id : null;
  return typeof id === 'string' || typeof id === 'number' ? id : null;
};
