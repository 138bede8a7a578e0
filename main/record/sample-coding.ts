import { z } from 'zod';
import type { ReadingsSample } from './recorder.ts';

/** One message of the readings channel. */
export const sampleMessageSchema = z
  .object({
    at: z.number().describe('Monotonic time of the console [s].'),
    full: z.literal(true).optional().describe('Nothing is left out of this message.'),
    values: z
      .record(z.string(), z.number().nullable())
      .optional()
      .describe('Good readings by signal: Pa gauge, m, N, rad; flags are 0 or 1; null: no longer good.'),
    bad: z.array(z.string()).optional().describe('Signals without a good reading.'),
    length: z.number().nullable().optional().describe('Estimated body length [m].'),
    ratio: z
      .number()
      .nullable()
      .optional()
      .describe('Buckling tension over inverting tension, worst on the way back.'),
    asked: z.number().nullable().optional().describe('Tip speed asked for, + grows [m/s].'),
    permitted: z.number().nullable().optional().describe('Tip speed permitted [m/s].'),
  })
  .describe(
    'Readings at one time. What is left out has not moved by more than its resolution since it was last given; every ten seconds nothing is left out.',
  );
export type SampleMessage = z.infer<typeof sampleMessageSchema>;

/** What a reader of the log has been told so far; null at its beginning. */
export interface Told {
  readonly sample: ReadingsSample;
  /** When everything was last told, monotonic [s]. */
  readonly fullAt: number;
}

/** Everything is told again after this time [s], so that a reader can begin anywhere. */
const FULL_EVERY = 10;

interface Resolution {
  /** Smaller moves are not told: they are below what the sensor or the use of the record can tell apart. */
  readonly band: number;
  readonly decimals: number;
}
const LENGTH: Resolution = { band: 0.01, decimals: 3 };
const SPEED: Resolution = { band: 0.001, decimals: 3 };
const RESOLUTIONS: readonly (readonly [RegExp, Resolution])[] = [
  [/^body_pressure$/, { band: 50, decimals: 0 }],
  [/_pressure$/, { band: 200, decimals: 0 }],
  [/tension$/, { band: 0.2, decimals: 2 }],
  [/payout$/, { band: 0.02, decimals: 3 }],
  [/travel$/, LENGTH],
  [/roll$/, { band: 0.01, decimals: 3 }],
  [/^camera_[xyz]$/, { band: 0.01, decimals: 3 }],
  [/^camera_q[wxyz]$/, { band: 0.005, decimals: 3 }],
];
const EXACT: Resolution = { band: 0, decimals: 6 };

/**
 * A sample as a message that leaves out what the reader knows already. Values that are not finite count as bad.
 * Pass the returned `told` with the next sample once this one is written.
 */
export const thinSample = (
  told: Told | null,
  sample: ReadingsSample,
): { readonly message: SampleMessage; readonly told: Told } => {
  const age = sample.at - (told?.fullAt ?? Number.NaN);
  const full = !(age >= 0 && age < FULL_EVERY);
  const before = full || told === null ? null : told.sample;
  const values = thinValues(before, sample);
  const unknown = Object.keys(sample.values).filter((name) => !Number.isFinite(sample.values[name]));
  const bad = [...sample.bad, ...unknown];
  const message: SampleMessage = {
    at: round(sample.at, 3),
    ...(full ? { full } : {}),
    ...(Object.keys(values).length > 0 ? { values } : {}),
    ...(before !== null && same(bad, before.bad) ? {} : { bad }),
    ...thinNumber('length', before?.length, sample.length, LENGTH),
    ...thinNumber('ratio', before?.ratio, sample.ratio, ratioResolution(sample.ratio)),
    ...thinNumber('asked', before?.asked, sample.asked, SPEED),
    ...thinNumber('permitted', before?.permitted, sample.permitted, SPEED),
  };
  return {
    message,
    told: { sample: restoreSample(before, message), fullAt: full ? sample.at : (told?.fullAt ?? sample.at) },
  };
};

/** The sample that a message stands for, given the one before it; `before` null where the message is full. */
export const restoreSample = (before: ReadingsSample | null, message: SampleMessage): ReadingsSample => {
  const values: Record<string, number> = message.full || before === null ? {} : { ...before.values };
  for (const name in message.values) {
    const value = message.values[name];
    if (value === null || value === undefined) delete values[name];
    else values[name] = value;
  }
  return {
    at: message.at,
    values,
    bad: message.bad ?? before?.bad ?? [],
    length: message.length !== undefined ? message.length : (before?.length ?? null),
    ratio: message.ratio !== undefined ? message.ratio : (before?.ratio ?? null),
    asked: speedOf(message.asked, before?.asked),
    permitted: speedOf(message.permitted, before?.permitted),
  };
};

const thinValues = (before: ReadingsSample | null, sample: ReadingsSample): Record<string, number | null> => {
  const values: Record<string, number | null> = {};
  for (const [name, value] of Object.entries(sample.values)) {
    const resolution = resolutionOf(name);
    if (Number.isFinite(value) && moved(before?.values[name], value, resolution))
      values[name] = round(value, resolution.decimals);
  }
  for (const name of Object.keys(before?.values ?? {}))
    if (!Number.isFinite(sample.values[name])) values[name] = null;
  return values;
};

const thinNumber = <Name extends string>(
  name: Name,
  before: number | null | undefined,
  value: number | null,
  resolution: Resolution,
): { [key in Name]?: number | null } => {
  const known = value !== null && Number.isFinite(value);
  if (before === undefined || (known ? moved(before ?? undefined, value, resolution) : before !== null))
    return { [name]: known ? round(value, resolution.decimals) : null } as { [key in Name]: number | null };
  return {};
};

const moved = (before: number | undefined, value: number, { band }: Resolution): boolean =>
  value !== before && !(Math.abs(value - (before ?? Number.NaN)) < band);

/** One part in a hundred. */
const ratioResolution = (ratio: number | null): Resolution => ({
  band: Math.abs(ratio ?? 0) / 100,
  decimals: 3,
});

const resolutionOf = (name: string): Resolution => {
  const known = resolutions.get(name);
  if (known !== undefined) return known;
  const found = RESOLUTIONS.find(([pattern]) => pattern.test(name))?.[1] ?? EXACT;
  resolutions.set(name, found);
  return found;
};
const resolutions = new Map<string, Resolution>();

const round = (value: number, decimals: number): number => Number(value.toFixed(decimals));
const same = (a: readonly string[], b: readonly string[]): boolean =>
  a.length === b.length && a.every((one, i) => one === b[i]);
const speedOf = (told: number | null | undefined, before: number | undefined): number =>
  told === null ? Number.NaN : (told ?? before ?? 0);
