import { mkdtemp, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { _electron, expect, test } from 'playwright/test';
import { ensureElectronBundles, ensureRenderer } from '../main/shells/builds.ts';
import { electronBinary, whyNotElectron } from '../main/shells/electron-launch.ts';

const executablePath = electronBinary();
const why = executablePath === null ? 'skipped: no Electron binary' : whyNotElectron();
test.skip(why !== null, why ?? '');

test('the Electron window shows the console, gives its page no Node, and closes the log', async () => {
  const missions = await mkdtemp(join(tmpdir(), 'foldback-electron-'));
  await ensureRenderer();
  const folder = await ensureElectronBundles();
  const program = await _electron.launch({
    executablePath: executablePath ?? '',
    args: [
      // Chromium's own sandbox refuses to run as root.
      ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
      join(folder, 'electron.js'),
      ...['--missions', missions],
    ],
  });
  const page = await program.firstWindow();
  await expect(page).toHaveURL('foldback://console/index.html');
  await expect(page.getByRole('button', { name: 'Stop' })).toBeVisible();
  await expect(page.getByRole('status', { name: 'Link' })).toContainText('Hz');
  expect(await page.evaluate(() => [typeof globalThis.process, 'require' in globalThis])).toEqual([
    'undefined',
    false,
  ]);
  await program.close();
  expect(await readdir(missions)).toHaveLength(1);
  await rm(missions, { recursive: true });
});
