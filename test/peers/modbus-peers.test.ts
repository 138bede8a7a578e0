import { type ChildProcess, execFile, spawn } from 'node:child_process';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { systemClock } from '../../main/clock.ts';
import { createMaster, type Master } from '../../main/rig/master.ts';
import type { SerialLine } from '../../main/rig/serial-line.ts';
import { serialPortOpener } from '../../main/rig/serial-port-line.ts';
import { findPymodbus, whyNot } from './programs.ts';
import { ended, openPair, type SerialPair } from './socat.ts';

// Modbus programs not written here, on real serial devices: a mistake that our master and our slave share shows here.

const run = promisify(execFile);
const PROJECT = join(import.meta.dirname, '../..');
const noSlave = whyNot('socat');
const noPymodbus = whyNot('socat', 'pymodbus');
const noMbpoll = whyNot('socat', 'mbpoll');

let pair: SerialPair;
const children: ChildProcess[] = [];

/** Starts a program and waits for a line that it prints. */
const started = (command: string, args: readonly string[], line: RegExp): Promise<void> =>
  new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd: PROJECT, stdio: ['ignore', 'pipe', 'pipe'] });
    children.push(child);
    let printed = '';
    const read = (part: Buffer): void => {
      printed += String(part);
      if (line.test(printed)) resolve();
    };
    child.stdout.on('data', read);
    child.stderr.on('data', read);
    child.once('exit', (code) => reject(new Error(`${command} ended with ${code}: ${printed}`)));
  });

afterEach(async () => {
  for (const child of children.splice(0)) await ended(child);
  await pair?.close();
});

describe.skipIf(noSlave !== null)(`the built-in rig on a serial device ${noSlave ?? ''}`, () => {
  beforeEach(async () => {
    pair = await openPair();
    await started(
      process.execPath,
      ['main/foldback.mjs', 'simulate', '--port', pair.a],
      /Serving the built-in rig/,
    );
  });

  test.skipIf(noPymodbus !== null)(`is read and written by pymodbus ${noPymodbus ?? ''}`, async () => {
    const { stdout } = await run(findPymodbus() ?? '', [
      join(import.meta.dirname, 'pymodbus-master.py'),
      pair.b,
    ]);
    const seen = JSON.parse(stdout.trim().split('\n').at(-1) ?? '') as Record<string, unknown>;
    expect(seen).toMatchObject({ identity: [4711], held: [8500, 1200], written: true, missing: 2 });
    const [pressure] = seen.inputs as number[];
    // 9 kPa in units of a pascal, with the sensor's noise.
    expect(Math.abs((pressure ?? 0) - 9000)).toBeLessThan(100);
  });

  test.skipIf(noMbpoll !== null)(`is read and written by mbpoll ${noMbpoll ?? ''}`, async () => {
    const mbpoll = (...args: string[]) =>
      run('mbpoll', ['-m', 'rtu', '-a', '1', '-b', '115200', '-P', 'none', '-0', '-1', ...args]);
    const read = await mbpoll('-t', '3', '-r', '26', '-c', '1', pair.b);
    expect(read.stdout).toMatch(/\[26\]:\s+4711/);
    await mbpoll('-t', '4', '-r', '3', pair.b, '7500');
    const held = await mbpoll('-t', '4', '-r', '3', '-c', '1', pair.b);
    expect(held.stdout).toMatch(/\[3\]:\s+7500/);
  });

  test('is checked live by check-rig, every signal good', async () => {
    const { stdout } = await run(
      process.execPath,
      ['main/foldback.mjs', 'check-rig', '--live', '--json', '--serial', pair.b],
      { cwd: PROJECT },
    );
    const { signals } = JSON.parse(stdout) as {
      signals: { name: string; quality?: string; value?: number }[];
    };
    const read = signals.filter((signal) => signal.quality !== undefined);
    expect(read.length).toBeGreaterThan(15);
    expect(read.every((signal) => signal.quality === 'good')).toBe(true);
    expect(read.find((signal) => signal.name === 'body_pressure')?.value).toBeCloseTo(9, 0);
  });
});

describe.skipIf(noPymodbus !== null)(`our master against a pymodbus slave ${noPymodbus ?? ''}`, () => {
  let line: SerialLine;
  let master: Master;
  beforeEach(async () => {
    pair = await openPair();
    await started(findPymodbus() ?? '', [join(import.meta.dirname, 'pymodbus-server.py'), pair.a], /serving/);
    const settings = {
      path: pair.b,
      usb: null,
      baudRate: 115_200,
      parity: 'none',
      stopBits: 1,
      replyTimeout: 0.5,
      linkTimeout: 1,
    } as const;
    line = await serialPortOpener(settings)();
    master = createMaster(line, { baudRate: 115_200, bitsPerCharacter: 10, replyTimeout: 0.5 }, systemClock);
  });
  afterEach(async () => {
    master.close();
    await line.close();
  });

  test('reads input registers, writes holding registers and coils, reads them back, and is told of an address that is not there', async () => {
    // The slave may still be opening its port when it says that it serves.
    let first = await master.ask({ kind: 'read', slave: 17, table: 'input', address: 10, count: 4 });
    for (let i = 0; i < 10 && first.outcome === 'timeout'; i++)
      first = await master.ask({ kind: 'read', slave: 17, table: 'input', address: 10, count: 4 });
    expect(first).toEqual({ outcome: 'answer', values: [1010, 1011, 1012, 1013] });
    expect(
      (await master.ask({ kind: 'write-registers', slave: 17, address: 5, values: [7, 65_535, 0] })).outcome,
    ).toBe('answer');
    expect((await master.ask({ kind: 'write-registers', slave: 17, address: 9, values: [42] })).outcome).toBe(
      'answer',
    );
    expect(await master.ask({ kind: 'read', slave: 17, table: 'holding', address: 5, count: 5 })).toEqual({
      outcome: 'answer',
      values: [7, 65_535, 0, 0, 42],
    });
    expect((await master.ask({ kind: 'write-coil', slave: 17, address: 3, on: true })).outcome).toBe(
      'answer',
    );
    expect(await master.ask({ kind: 'read', slave: 17, table: 'coil', address: 2, count: 3 })).toEqual({
      outcome: 'answer',
      values: [0, 1, 0],
    });
    expect(await master.ask({ kind: 'read', slave: 17, table: 'input', address: 5000, count: 1 })).toEqual({
      outcome: 'exception',
      code: 2,
    });
    expect(
      (await master.ask({ kind: 'read', slave: 18, table: 'input', address: 0, count: 1 })).outcome,
    ).toBe('timeout');
  });
});

describe('a port that cannot be had', () => {
  test('is told apart: not there, held by another program', async () => {
    const settings = {
      usb: null,
      baudRate: 115_200,
      parity: 'none',
      stopBits: 1,
      replyTimeout: 0.1,
      linkTimeout: 1,
    } as const;
    await expect(
      serialPortOpener({ ...settings, path: '/dev/foldback-is-not-here' })(),
    ).rejects.toMatchObject({ code: 'missing', remedy: expect.stringContaining('Plug') });
    if (noSlave !== null) return;
    pair = await openPair();
    const held = await serialPortOpener({ ...settings, path: pair.b })();
    await expect(serialPortOpener({ ...settings, path: pair.b })()).rejects.toMatchObject({
      code: 'busy',
      remedy: expect.stringContaining('Close it'),
    });
    await held.close();
  });
});
