import { describe, expect, test } from 'vitest';
import {
  type AlarmBoard,
  acknowledgeAlarm,
  type Condition,
  EMPTY_BOARD,
  listAlarms,
  stepAlarms,
} from '../../../main/console/alarms.ts';

const LEAK: Condition = {
  id: 'leak',
  priority: 'medium',
  cause: 'Pressure falls.',
  consequence: 'c',
  action: 'a',
  onDelay: 0.5,
  offDelay: 1,
};
const STOP: Condition = { ...LEAK, id: 'stop', priority: 'high', onDelay: 0 };

/** Steps the board through times with the conditions of each; returns it with all changes by name. */
const play = (
  steps: readonly (readonly [now: number, ...conditions: Condition[]])[],
  from: AlarmBoard = EMPTY_BOARD,
) => {
  let board = from;
  const changes: string[] = [];
  for (const [now, ...conditions] of steps) {
    const stepped = stepAlarms(board, conditions, now);
    board = stepped.board;
    changes.push(...stepped.changes.map(({ change, alarm }) => `${alarm.id} ${change}`));
  }
  return { board, changes };
};

describe('the alarm board, after IEC 62682', () => {
  test('raises an alarm only once its condition has lasted the delay', () => {
    expect(
      play([
        [0, LEAK],
        [0.4, LEAK],
      ]).changes,
    ).toEqual([]);
    expect(
      play([
        [0, LEAK],
        [0.4, LEAK],
        [0.5, LEAK],
        [0.6, LEAK],
      ]).changes,
    ).toEqual(['leak raised']);
  });

  test('a condition that only flickers is never an alarm', () => {
    const flicker = Array.from({ length: 20 }, (_, i) =>
      i % 2 === 0 ? ([i * 0.3, LEAK] as const) : ([i * 0.3] as const),
    );
    expect(play(flicker).changes).toEqual([]);
  });

  test('keeps an alarm that nobody has seen after its condition is gone, and clears it when it is seen', () => {
    const { board, changes } = play([[0, STOP], [0.1], [1.2]]);
    expect(changes).toEqual(['stop raised', 'stop returned']);
    expect(listAlarms(board)).toMatchObject([{ id: 'stop', state: 'returned' }]);
    const seen = acknowledgeAlarm(board, 'stop');
    expect(seen.changes.map(({ change }) => change)).toEqual(['acknowledged', 'cleared']);
    expect(listAlarms(seen.board)).toEqual([]);
  });

  test('clears an acknowledged alarm by itself once its condition has been gone for the off-delay', () => {
    const seen = acknowledgeAlarm(play([[0, STOP]]).board, 'stop').board;
    expect(listAlarms(seen)).toMatchObject([{ state: 'acknowledged' }]);
    expect(play([[0.5], [0.9]], seen).changes).toEqual([]);
    expect(play([[0.5], [1.1]], seen).changes).toEqual(['stop cleared']);
  });

  test('raises a returned alarm anew when its condition comes back', () => {
    expect(play([[0, STOP], [1.5], [2, STOP]]).changes).toEqual([
      'stop raised',
      'stop returned',
      'stop raised',
    ]);
  });

  test('shows what nobody has seen first, then by priority', () => {
    const { board } = play([[0, STOP, { ...LEAK, onDelay: 0 }]]);
    expect(listAlarms(board).map(({ id }) => id)).toEqual(['stop', 'leak']);
    expect(listAlarms(acknowledgeAlarm(board, 'stop').board).map(({ id }) => id)).toEqual(['leak', 'stop']);
  });
});
