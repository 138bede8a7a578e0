import { test as base } from 'playwright/test';
import { findChromium, NO_CHROMIUM } from './chromium.ts';

const missing = findChromium() === null;

/** Playwright's test, skipped by name and with the reason on a machine without any Chromium. */
export const test = base.extend<{ chromiumIsHere: undefined }>({
  chromiumIsHere: [
    // biome-ignore lint/correctness/noEmptyPattern: Playwright reads a fixture's needs from this pattern.
    async ({}, use, info) => {
      info.skip(missing, NO_CHROMIUM);
      await use(undefined);
    },
    { auto: true },
  ],
});

export { expect } from 'playwright/test';
