import { type ChildProcess, spawn } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Locator, Page } from 'playwright';
import { ended } from '../test/peers/socat.ts';
import { expect, test } from './browser-test.ts';

const PROJECT = join(import.meta.dirname, '..');

/** A program of ours started as the README says, and a line it printed. */
export interface Started {
  readonly line: RegExpExecArray;
  stop(): Promise<void>;
}

export const startProgram = async (args: readonly string[], wanted: RegExp): Promise<Started> => {
  const child: ChildProcess = spawn(process.execPath, args, {
    cwd: PROJECT,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let printed = '';
  const line = await new Promise<RegExpExecArray>((resolve, reject) => {
    const read = (part: Buffer): void => {
      printed += String(part);
      const found = wanted.exec(printed);
      if (found !== null) resolve(found);
    };
    child.stdout?.on('data', read);
    child.stderr?.on('data', read);
    child.once('exit', (code) => reject(new Error(`ended with ${code}: ${printed}`)));
  });
  return { line, stop: () => ended(child) };
};

export const startConsole = (missions: string, ...more: string[]): Promise<Started> =>
  startProgram(
    ['main/start.mjs', '--shell', 'browser', '--port', '0', '--missions', missions, ...more],
    /Foldback console: (\S+)/,
  );

/** What an operator does, by the roles and names on screen. */
export const operatorOf = (page: Page) => {
  const status = (name: string): Locator => page.getByRole('status', { name, exact: true });
  const button = (name: string): Locator => page.getByRole('button', { name, exact: true });
  const length = async (): Promise<number> =>
    Number(/([−\d.]+)\s*m/.exec((await status('Body length').textContent()) ?? '')?.[1] ?? Number.NaN);

  /** Holds a control until something is so; presses afresh where the console says the press is over. */
  const holdUntil = async (control: Locator, reached: () => Promise<boolean>): Promise<void> => {
    for (let press = 0; press < 40; press++) {
      await control.hover();
      await page.mouse.down();
      for (let i = 0; i < 1200 && (await control.getAttribute('aria-pressed')) === 'true'; i++) {
        if (await reached()) {
          await page.mouse.up();
          return;
        }
        if (/press again/.test((await page.getByRole('alert').textContent()) ?? '')) break;
        await page.waitForTimeout(60);
      }
      await page.mouse.up();
    }
    throw new Error('the control was held again and again, and it never came to it');
  };

  /** The body length once the body has come to rest. */
  const restingLength = async (): Promise<number> => {
    let before = Number.NaN;
    let now = await length();
    while (now !== before) {
      await page.waitForTimeout(400);
      before = now;
      now = await length();
    }
    return now;
  };

  return {
    status,
    button,
    restingLength,
    holdUntil,
    growTo: (metres: number) => holdUntil(button('Grow'), async () => (await length()) >= metres),
    openTab: (name: string) => page.getByRole('tab', { name }).click(),
    alert: () => page.getByRole('alert'),
    expectWayBack: (words: string) => expect(status('Way back')).toContainText(words),
  };
};

/** A console with a missions folder of its own for every test of a file. */
export const freshConsole = (name: string) => {
  let missions = '';
  let started: Started | null = null;
  test.beforeEach(async () => {
    missions = await mkdtemp(join(tmpdir(), `foldback-${name}-`));
    started = await startConsole(missions);
  });
  test.afterEach(async () => {
    await started?.stop();
    await rm(missions, { recursive: true, force: true });
  });
  return {
    missions: () => missions,
    address: () => started?.line[1] ?? '',
    /** Stops the console and starts it again on the same missions. */
    restart: async (): Promise<void> => {
      await started?.stop();
      started = await startConsole(missions);
    },
  };
};
