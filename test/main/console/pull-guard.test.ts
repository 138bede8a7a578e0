import { describe, expect, test } from 'vitest';
import { createPullGuard } from '../../../main/console/pull-guard.ts';
import { PermittedDrive } from '../../../shared-model/retraction/interlock.ts';
import { good, HELD, READINGS, request } from '../../shared-model/retraction/a-drive-request.ts';
import { builtInRig } from '../rig/built-in-rig.ts';

const byBase = PermittedDrive.judge(request()).drive;
const byBoth = PermittedDrive.judge(
  request({
    wayBack: HELD,
    tipRetractorAttached: true,
    tipRetractorState: 'attached',
    readings: { ...READINGS, tail_tension: good(0.3) },
  }),
).drive;
const still = PermittedDrive.holdStill(100, true);
const failed = { outcome: 'failed', text: 'unit 2: no answer in time' } as const;

describe('setpoints that the rig does not take', () => {
  test('end a pull by two drives at the first, for one of them may have taken its own', () => {
    expect(byBoth.setpoints.retractorSpeed).toBeGreaterThan(0);
    expect(createPullGuard(builtInRig()).wrote(byBoth, failed)).toContain('unit 2');
  });

  test('end a motion of the spool alone at the third in a row', () => {
    const guard = createPullGuard(builtInRig());
    expect([guard.wrote(byBase, failed), guard.wrote(byBase, failed)]).toEqual([null, null]);
    expect(guard.wrote(byBase, { outcome: 'confirmed' })).toBeNull();
    expect([guard.wrote(byBase, failed), guard.wrote(byBase, failed)]).toEqual([null, null]);
    expect(guard.wrote(byBase, failed)).toContain('did not take the setpoints');
  });

  test('end nothing that holds still', () => {
    const guard = createPullGuard(builtInRig());
    for (let i = 0; i < 10; i++) expect(guard.wrote(still, failed)).toBeNull();
    expect(guard.wrote(byBase, null)).toBeNull();
  });
});
