import { defineConfig } from 'playwright/test';
import { CHROMIUM_ARGS, findChromium } from './chromium.ts';

const executablePath = findChromium();

export default defineConfig({
  testDir: '.',
  outputDir: '../test-results/e2e',
  // One console at a time: each spec starts its own, and the machine is small.
  workers: 1,
  fullyParallel: false,
  timeout: 180_000,
  expect: { timeout: 15_000 },
  forbidOnly: process.env.CI !== undefined,
  reporter: [['list'], ['json', { outputFile: '../test-results/e2e.json' }]],
  use: {
    headless: true,
    viewport: { width: 1280, height: 800 },
    trace: 'retain-on-failure',
    launchOptions: { args: CHROMIUM_ARGS, ...(executablePath === null ? {} : { executablePath }) },
  },
});
