import { describe, expect, test } from 'vitest';
import { createRigLink } from '../../../main/rig/link.ts';
import { createBuiltInRig } from '../../../main/simulator/built-in-rig.ts';
import { PermittedDrive } from '../../../shared-model/retraction/interlock.ts';
import { builtInRig } from '../rig/built-in-rig.ts';
import { createVirtualClock } from '../virtual-clock.ts';

const rig = builtInRig();
const session = async () => {
  const clock = createVirtualClock();
  const simulated = createBuiltInRig(rig, { seed: 7, clock });
  const link = createRigLink(rig, simulated.openLine, clock);
  /** Runs one call on the link while the virtual line carries its bytes. */
  const during = async <T>(work: Promise<T>): Promise<T> => {
    let done = false;
    void work.then(() => {
      done = true;
    });
    for (let i = 0; i < 2000 && !done; i++) await clock.advanceTo(clock.now() + 0.001);
    return work;
  };
  await clock.advanceTo(0.5);
  return { clock, simulated, link, during, read: () => during(link.read(clock.now())) };
};

describe('the link to the built-in rig', () => {
  test('opens, knows the machine, and reads every signal of its file as good', async () => {
    const { link, read } = await session();
    expect(link.status().state).toBe('open');
    const readings = await read();
    expect(Object.keys(readings).sort()).toEqual(Object.keys(rig.reads).sort());
    for (const [name, reading] of Object.entries(readings)) expect(reading.quality, name).toBe('good');
    const pressure = readings.body_pressure;
    expect(pressure?.quality === 'good' && Math.abs(pressure.value - 9000)).toBeLessThan(100);
  });

  test('writes nothing but a permit of the interlock, and that only while it is fresh', async () => {
    const { clock, link, during } = await session();
    const permit = PermittedDrive.holdStill(clock.now(), true);
    expect((await during(link.write(permit, clock.now()))).outcome).toBe('confirmed');
    for (const forged of [
      structuredClone(permit),
      { setpoints: permit.setpoints, issuedAt: clock.now() },
      null,
      Object.create(PermittedDrive.prototype),
    ])
      expect((await link.write(forged as PermittedDrive, clock.now())).outcome).toBe('failed');
    const old = PermittedDrive.holdStill(clock.now() - 0.2, true);
    expect((await link.write(old, clock.now())).outcome).toBe('failed');
    const early = PermittedDrive.holdStill(clock.now() + 1, true);
    expect((await link.write(early, clock.now())).outcome).toBe('failed');
  });

  test('says what is the matter when it is unplugged, and comes back by itself', async () => {
    const { clock, simulated, link, read } = await session();
    await read();
    simulated.fault('unplug');
    expect(link.status()).toMatchObject({ state: 'lost', code: 'unplugged' });
    const readings = await read();
    for (const reading of Object.values(readings)) expect(reading.quality).toBe('bad');
    simulated.fault('none');
    await clock.advanceTo(clock.now() + 3);
    expect(link.status().state).toBe('open');
  });

  test('calls a unit that does not answer silent, and never passes an old value as good', async () => {
    const { clock, simulated, link, read } = await session();
    await read();
    simulated.fault('dead-unit');
    const readings = await read();
    for (const reading of Object.values(readings)) expect(reading.quality).not.toBe('good');
    for (let i = 0; i < 10; i++) await read();
    await clock.advanceTo(clock.now() + 0.5);
    expect(link.status()).toMatchObject({ state: 'lost', code: 'silent' });
  });

  test('under bit errors a reading is right or it is not good', async () => {
    const { simulated, read } = await session();
    simulated.fault('bit-errors');
    for (let i = 0; i < 60; i++) {
      const { body_pressure, tip_retractor_attached, emergency_stop } = await read();
      if (body_pressure?.quality === 'good') expect(Math.abs(body_pressure.value - 9000)).toBeLessThan(100);
      for (const flag of [tip_retractor_attached, emergency_stop])
        if (flag?.quality === 'good') expect(flag.value).toBe(0);
    }
  });

  test('refuses a machine that identifies itself as another', async () => {
    const clock = createVirtualClock();
    const simulated = createBuiltInRig(rig, { seed: 1, clock });
    const other = { ...rig, slaves: rig.slaves.map((slave) => ({ ...slave, identityExpected: 99 })) };
    const link = createRigLink(other, simulated.openLine, clock);
    await clock.advanceTo(0.3);
    expect(link.status()).toMatchObject({
      state: 'lost',
      code: 'fault',
      text: expect.stringContaining('4711'),
    });
  });
});

test('the base stops by itself when the heartbeat stands still', async () => {
  const { clock, simulated } = await session();
  // A foreign master sets a speed and never beats: unit 1, write register 0, 5000 = 0.5 m/s of tail.
  simulated.receive(Uint8Array.from([1, 6, 0, 0, 0x13, 0x88, 0x84, 0x9c]));
  await clock.advanceTo(clock.now() + 3);
  expect(simulated.truth().spoolSpeed).toBe(0);
  expect(simulated.truth().payout).toBeLessThan(0.4);
});
