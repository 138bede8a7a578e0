import { describe, expect, it } from 'vitest';
import { endToEndTotals, skipsAreFailures, sum, unitTotals } from '../totals.ts';

/** The parts of vitest's JSON report that are read (the shape of Jest's, as both write it). */
const file = (name: string, status: string, ...tests: [string, string][]) => ({
  name,
  status,
  assertionResults: tests.map(([fullName, one]) => ({ fullName, status: one, failureMessages: [] })),
});
const unit = (...testResults: ReturnType<typeof file>[]) => unitTotals({ numTotalTests: 0, testResults });

/** The parts of Playwright's JSON report that are read, as its version 1.65 wrote it. */
const spec = (title: string, status: string, why?: string) => ({
  title,
  file: 'story.spec.ts',
  ok: true,
  tests: [{ status, annotations: why === undefined ? [] : [{ type: 'skip', description: why }] }],
});
const endToEnd = (suites: object[], errors: object[] = []) => endToEndTotals({ suites, errors, stats: {} });

describe('the totals of all tests', () => {
  it('count unit tests that passed, failed and were skipped', () => {
    const totals = unit(
      file('a', 'passed', ['a one', 'passed'], ['a two', 'pending']),
      file('b', 'failed', ['b one', 'failed'], ['b two', 'passed'], ['b three', 'todo']),
    );
    expect(totals).toEqual({ passed: 2, failed: ['b one'], skipped: ['a two', 'b three'] });
  });

  it('count a file that could not be loaded as a failure, though none of its tests ran', () => {
    expect(unit(file('broken', 'failed')).failed).toEqual(['broken could not be run']);
  });

  it('count end-to-end tests in suites within suites', () => {
    const totals = endToEnd([
      {
        specs: [spec('grows', 'expected')],
        suites: [{ specs: [spec('retracts', 'unexpected')], suites: [] }],
      },
      { specs: [spec('opens a window', 'skipped', 'no binary')] },
    ]);
    expect(totals).toEqual({
      passed: 1,
      failed: ['story.spec.ts retracts'],
      skipped: ['story.spec.ts opens a window (no binary)'],
    });
  });

  it('take no comfort in a test that passed only when it was tried again', () => {
    expect(endToEnd([{ specs: [spec('grows', 'flaky')] }])).toMatchObject({
      passed: 0,
      failed: ['story.spec.ts grows'],
    });
  });

  it('count an error outside any test', () => {
    expect(endToEnd([], [{ message: 'the config is wrong' }]).failed).toEqual(['the config is wrong']);
  });

  it('where nothing may be skipped, excuse the Electron window alone', () => {
    const skipped = ['electron.spec.ts the window (skipped: no Electron binary)', 'reads it with mbpoll'];
    expect(skipsAreFailures({ passed: 3, failed: ['x'], skipped })).toEqual({
      passed: 3,
      failed: ['x', 'skipped: reads it with mbpoll'],
      skipped: [skipped[0]],
    });
  });

  it('add up', () => {
    const one = { passed: 1, failed: ['a'], skipped: ['b'] };
    expect(sum([one, one])).toEqual({ passed: 2, failed: ['a', 'a'], skipped: ['b', 'b'] });
  });
});
