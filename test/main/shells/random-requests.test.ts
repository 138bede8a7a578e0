import fc from 'fast-check';
import { expect, it, onTestFinished } from 'vitest';
import { forkConsole } from '../../../main/shells/console-process.ts';
import { createMessageLimits } from '../../../main/shells/message-limits.ts';
import type { ConsoleFrame, ConsoleMessage } from '../../../shared-model/contract/frame.ts';
import { requestSchema, STILL } from '../../../shared-model/contract/request.ts';
import { freshFolder } from './a-shell.ts';

/** Raise it for a campaign (FOLDBACK_REQUESTS=100000). */
const REQUESTS = Number(process.env.FOLDBACK_REQUESTS ?? 3000);
const SEED = 20261201;

const GOOD: readonly object[] = [
  { kind: 'hold', press: 1, seq: 0, wish: { ...STILL, motion: { kind: 'grow' }, tipSpeed: 0.1 } },
  {
    kind: 'hold',
    press: 2,
    seq: 0,
    wish: { ...STILL, motion: { kind: 'backtrack', target: 'b-1' }, tipSpeed: 0.1 },
  },
  { kind: 'release', press: 1 },
  { kind: 'mark-branch-point', label: '', arms: ['left', 'right'] },
  { kind: 'log-waypoint', note: '', picture: null },
  { kind: 'set-tip-retractor', attached: true, confirmed: true },
  { kind: 'stop' },
];

/** A request in which one thing, however deep, is something else, missing or too many. */
const mutated = fc
  .tuple(fc.constantFrom(...GOOD), fc.nat(), fc.oneof(fc.jsonValue(), fc.double(), fc.constant(undefined)))
  .map(([request, which, instead]) => {
    const copy = structuredClone(request) as Record<string, unknown>;
    const places = placesOf(copy);
    const place = places[which % places.length];
    if (place !== undefined) place.holder[place.key] = instead;
    return JSON.parse(JSON.stringify(copy)) as unknown;
  });

interface Place {
  readonly holder: Record<string, unknown>;
  readonly key: string;
}
const placesOf = (holder: Record<string, unknown>): Place[] => [
  { holder, key: 'extra' },
  ...Object.entries(holder).flatMap(([key, value]) => [
    { holder, key },
    ...(typeof value === 'object' && value !== null ? placesOf(value as Record<string, unknown>) : []),
  ]),
];

const isNone = (request: unknown): boolean => !requestSchema.safeParse(request).success;

it('random and mutated requests are refused with a reason, and nothing moves', async () => {
  const missionsDir = await freshFolder();
  const console_ = await forkConsole({ rigFile: null, serialPath: null, missionsDir, seed: 1 });
  onTestFinished(() => console_.close());
  const permitted: number[] = [];
  console_.onMessage((_: string, message: ConsoleMessage) => {
    if (message.kind === 'frame') permitted.push((message as ConsoleFrame).drive.permitted);
  });
  console_.join('driver');
  console_.join('watcher');
  const requests = fc
    .sample(fc.oneof(mutated, fc.jsonValue()), { numRuns: REQUESTS, seed: SEED })
    .filter(isNone);
  for (const [index, request] of requests.entries()) {
    const answer = await console_.request(index % 2 === 0 ? 'driver' : 'watcher', request);
    expect(answer, JSON.stringify(request)).toMatchObject({ ok: false, code: 'bad-request' });
  }
  expect(requests.length).toBeGreaterThan(REQUESTS / 2);
  expect(permitted.filter((speed) => speed !== 0)).toEqual([]);
});

it('whatever bytes a window sends, it is relayed as it came or cut off with a reason', () => {
  const bytes = fc.oneof(
    fc.uint8Array().map((list) => Buffer.from(list)),
    fc.json().map((text) => Buffer.from(text)),
    fc
      .record({ id: fc.oneof(fc.integer(), fc.jsonValue()), request: fc.jsonValue() })
      .map((message) => Buffer.from(JSON.stringify(message))),
  );
  fc.assert(
    fc.property(bytes, fc.boolean(), (data, isBinary) => {
      const admission = createMessageLimits()(data, isBinary, 0);
      if (admission.ok)
        expect(JSON.parse(JSON.stringify(admission.message))).toMatchObject({
          id: JSON.parse(String(data)).id,
        });
      else expect([1003, 1008, 1009]).toContain(admission.code);
    }),
    { numRuns: REQUESTS, seed: SEED },
  );
});
