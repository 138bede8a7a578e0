import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type MissionEvent,
  missionEventSchema,
  type UnstampedEvent,
} from '../../../shared-model/mission/event.ts';
import {
  emptyMission,
  foldMission,
  type MissionState,
  reduceMission,
} from '../../../shared-model/mission/mission.ts';
import { ghosts, onBody, openArms, targetsOnBody } from '../../../shared-model/mission/selectors.ts';
import { fold, grow, markAt, stamped, tipAt, waypoint } from './story.ts';

// Few names and lengths, so that random stories meet the same places again; a tenth of a millimetre of noise on some.
const length = fc
  .tuple(fc.integer({ min: -1, max: 40 }), fc.constantFrom(0, 0.0001, 0.04, 0.06, 0.3))
  .map(([half, noise]) => half / 2 + noise);
const point = fc.constantFrom('p', 'q', 'r');
const arm = fc.constantFrom('left', 'right', 'down');
const text = fc.string({ maxLength: 20 });
const number = fc.double({ noNaN: true, noDefaultInfinity: true });
const moved = (kind: 'extended' | 'retracted') =>
  length.map((at): UnstampedEvent => ({ kind, length: at, tip: tipAt(at) }));

const anyEvent: fc.Arbitrary<UnstampedEvent> = fc.oneof(
  { weight: 8, arbitrary: moved('extended') },
  { weight: 6, arbitrary: moved('retracted') },
  {
    weight: 2,
    arbitrary: fc
      .tuple(length, point, fc.uniqueArray(arm, { minLength: 0, maxLength: 3 }))
      .map(([at, id, arms]) => markAt(at, id, arms)),
  },
  {
    weight: 4,
    arbitrary: fc
      .tuple(point, arm)
      .map(([branchPoint, name]): UnstampedEvent => ({ kind: 'arm-entered', branchPoint, arm: name })),
  },
  {
    weight: 2,
    arbitrary: fc.tuple(fc.constantFrom('w1', 'w2', 'w3'), length).map(([id, at]) => waypoint(id, at)),
  },
  fc.record({
    kind: fc.constant('mission-started' as const),
    mission: fc.constantFrom('m1', 'm2'),
    place: text,
    rig: text,
    simulated: fc.boolean(),
    software: text,
  }),
  fc.record({ kind: fc.constant('mission-ended' as const), reason: text }),
  fc.record({
    kind: fc.constant('pull-refused' as const),
    motion: text,
    length: fc.option(number),
    forces: fc.constant(null),
    margin: fc.option(number),
    reasons: fc.array(fc.record({ code: text, text, remedy: text }), { maxLength: 3 }),
  }),
  fc.record({
    kind: fc.constant('tip-retractor' as const),
    state: fc.constantFrom('attached' as const, 'absent' as const),
    source: fc.constantFrom('sensed' as const, 'declared' as const),
  }),
  fc.record({ kind: fc.constant('backtrack-started' as const), target: point, from: number, to: number }),
  fc.record({ kind: fc.constant('backtrack-arrived' as const), target: point, length: number }),
  fc.record({ kind: fc.constant('stopped' as const), by: text }),
  fc.record({ kind: fc.constant('link' as const), state: fc.constantFrom('open', 'lost'), text }),
  fc.record({
    kind: fc.constant('alarm' as const),
    id: point,
    change: fc.constantFrom('raised' as const, 'acknowledged' as const, 'cleared' as const),
    priority: text,
    cause: text,
  }),
  fc.record({
    kind: fc.constant('driver' as const),
    client: text,
    change: fc.constantFrom('took-over' as const, 'left' as const),
  }),
);
const story = fc.array(anyEvent, { maxLength: 80 }).map(stamped);

/** What must hold of any tree of paths; each line is a way in which a drawing or a backtrack would go wrong. */
const wrongWith = (state: MissionState): string[] => {
  const wrong: string[] = [];
  const says = (holds: boolean, text: string) => holds || wrong.push(text);
  const byId = new Map(state.branches.map((branch) => [branch.id, branch]));
  says(byId.size === state.branches.length, 'two branches of one name');
  says(byId.has(state.currentBranch), 'current branch unknown');
  says(state.length >= 0 && state.length <= state.longest, 'longer than the longest');
  for (const branch of state.branches) {
    says(branch.from <= branch.reached && branch.reached <= state.longest, `${branch.id} reached`);
    const lengths = branch.line.map((one) => one.length);
    says(
      lengths.every((at, i) => at <= branch.reached && (i === 0 || (lengths[i - 1] as number) < at)),
      `${branch.id} line`,
    );
    says(
      lengths.slice(1).every((at) => at > branch.from),
      `${branch.id} drawn before its beginning`,
    );
    const parent = branch.parent === null ? undefined : byId.get(branch.parent);
    says((branch.parent === null) === (branch.id === 'trunk'), `${branch.id} rootless`);
    says(parent === undefined || parent.from <= branch.from, `${branch.id} begins before its parent`);
  }
  for (const one of state.branchPoints) {
    says(one.arms.filter((it) => it.state === 'current').length <= 1, `${one.id} has two current arms`);
    says(byId.has(one.branch), `${one.id} lies nowhere`);
  }
  for (const one of state.waypoints) says(byId.has(one.branch), `${one.id} lies nowhere`);
  const current = byId.get(state.currentBranch);
  says(current !== undefined && state.length >= current.from - 0.05 - 1e-9, 'tip before its branch');
  says(current !== undefined && state.length <= current.reached, 'tip beyond its branch');
  says(
    targetsOnBody(state).every((target) => target.length <= state.length + 0.05),
    'target beyond tip',
  );
  says(
    ghosts(state).every((ghost) => ghost.reached - ghost.from > 0.05 - 1e-9 && ghost.line.length > 0),
    'empty ghost',
  );
  return wrong;
};

describe('the fold of a mission', () => {
  it('is the same in one go as event by event', () => {
    fc.assert(
      fc.property(story, fc.nat(80), (events, cut) => {
        const stepped = events.slice(cut).reduce(reduceMission, foldMission(events.slice(0, cut)));
        expect(stepped).toEqual(foldMission(events));
      }),
    );
  });

  it('holds together after every event of any story', () => {
    fc.assert(
      fc.property(story, (events) => {
        let state = emptyMission;
        for (const event of events) {
          state = reduceMission(state, event);
          expect(wrongWith(state)).toEqual([]);
          openArms(state);
          onBody(state, state.longest);
        }
      }),
      { numRuns: 400 },
    );
  });

  it('comes out the same from a log of JSON lines', () => {
    fc.assert(
      fc.property(story, (events) => {
        const replayed = events.map((event) => missionEventSchema.parse(JSON.parse(JSON.stringify(event))));
        // JSON writes minus zero as zero.
        expect(JSON.stringify(foldMission(replayed))).toBe(JSON.stringify(foldMission(events)));
      }),
    );
  });

  it('takes no notice of events that it has already', () => {
    fc.assert(
      fc.property(story, fc.nat(80), (events, from) => {
        const state = foldMission(events);
        expect(events.slice(from).reduce(reduceMission, state)).toEqual(state);
      }),
    );
  });

  it('leaves the state before an event as it was', () => {
    const freeze = <T>(value: T): T => {
      if (typeof value === 'object' && value !== null && !Object.isFrozen(value)) {
        Object.freeze(value);
        Object.values(value).forEach(freeze);
      }
      return value;
    };
    fc.assert(
      fc.property(story, (events) => {
        events.reduce((state, event) => freeze(reduceMission(state, freeze(event))), emptyMission);
      }),
    );
  });
});

describe('what a mission remembers', () => {
  it('numbers waypoints in the order they were logged in', () => {
    const state = fold(waypoint('a', 0), grow(0, 2), waypoint('b', 2));
    expect(state.waypoints.map(({ id, number: n }) => [id, n])).toEqual([
      ['a', 1],
      ['b', 2],
    ]);
  });

  it('keeps every refused pull with its numbers and all its reasons', () => {
    const forces = {
      length: 9,
      tipTension: 101,
      baseTension: 120,
      columnLoad: 400,
      arm: 0.2,
      capacity: 60,
      ratio: 0.5,
    };
    const state = fold({
      kind: 'pull-refused',
      motion: 'retract',
      length: 9,
      forces,
      margin: 1.25,
      reasons: [
        { code: 'a', text: 'The body would buckle.', remedy: 'Straighten it.' },
        { code: 'b', text: 'A reading is old.', remedy: 'See the link.' },
      ],
    });
    expect(state.refusals).toEqual([
      {
        at: 0,
        time: '2026-04-01T09:00:00.000Z',
        motion: 'retract',
        length: 9,
        forces,
        text: 'The body would buckle. A reading is old.',
      },
    ]);
  });

  it('counts alarms when they are raised, stops, and losses of the link', () => {
    const alarm = { kind: 'alarm', id: 'link', priority: 'high', cause: 'x' } as const;
    const state = fold(
      { ...alarm, change: 'raised' },
      { ...alarm, change: 'acknowledged' },
      { kind: 'stopped', by: 'driver' },
      { kind: 'link', state: 'lost', text: '' },
      { kind: 'link', state: 'open', text: '' },
    );
    expect(state).toMatchObject({ alarms: 1, stops: 1, linkLosses: 1 });
  });

  it('knows whether the backtrack that was asked for has arrived', () => {
    const started: UnstampedEvent = { kind: 'backtrack-started', target: 'fork', from: 12, to: 9.5 };
    expect(fold(started).backtrack).toEqual({ target: 'fork', from: 12, to: 9.5, arrived: false });
    const other: UnstampedEvent = { kind: 'backtrack-arrived', target: 'w1', length: 4 };
    expect(fold(started, other).backtrack?.arrived).toBe(false);
    expect(fold(started, { ...other, target: 'fork' }).backtrack?.arrived).toBe(true);
  });

  it('ends with the time of the last word', () => {
    const events: MissionEvent[] = stamped([{ kind: 'mission-ended', reason: 'closed' }]);
    expect(foldMission(events).ended).toBe(events[0]?.time);
  });
});
