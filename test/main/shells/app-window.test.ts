import { existsSync } from 'node:fs';
import { readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { openAppWindow } from '../../../main/shells/app-window.ts';
import { freshFolder } from './a-shell.ts';

const ADDRESS = 'http://127.0.0.1:8080/#key=k';

/** A search path whose only browser notes what it was asked for. */
const browserThatNotes = async (): Promise<{ notes: string }> => {
  const folder = await freshFolder();
  const notes = join(folder, 'notes');
  await writeFile(join(folder, 'chromium'), `#!/bin/sh\nprintf '%s\\n' "$@" > '${notes}'\n`, { mode: 0o755 });
  vi.stubEnv('PATH', folder);
  vi.stubEnv('TMPDIR', folder);
  return { notes };
};

beforeEach(() => {
  vi.stubEnv('DISPLAY', ':99');
  vi.spyOn(process, 'getuid').mockReturnValue(1000);
});
afterEach(() => {
  vi.unstubAllEnvs();
  vi.restoreAllMocks();
});

describe.skipIf(process.platform !== 'linux')('the window of a browser (on Linux)', () => {
  it('is opened in a profile of its own, so that the key reaches no history', async () => {
    const { notes } = await browserThatNotes();
    expect(await openAppWindow(ADDRESS, () => {})).toContain('chromium');
    const asked = () =>
      readFile(notes, 'utf8').then(
        (text) => text.trim().split('\n'),
        () => [],
      );
    await expect.poll(asked).toContain(`--app=${ADDRESS}`);
    expect((await asked()).some((one) => one.startsWith('--user-data-dir=') && one.length > 20)).toBe(true);
  });

  it('whose process ends at once has handed the page on, and is not taken for closed', async () => {
    const { notes } = await browserThatNotes();
    const closed = vi.fn();
    await openAppWindow(ADDRESS, closed);
    await expect.poll(() => existsSync(notes)).toBe(true);
    expect(closed).not.toHaveBeenCalled();
  });

  it.each<[string, () => void, RegExp]>([
    ['without a display', () => vi.stubEnv('DISPLAY', ''), /no display/],
    ['for root', () => vi.mocked(process.getuid!).mockReturnValue(0), /root/],
    ['without a browser', () => vi.stubEnv('PATH', '/nowhere'), /No Chromium-family browser/],
  ])('is not opened %s; the address is to be opened by hand', async (_, given, why) => {
    await browserThatNotes();
    vi.stubEnv('WAYLAND_DISPLAY', '');
    given();
    const said = await openAppWindow(ADDRESS, () => {});
    expect(said).toMatch(why);
    expect(said).toContain('Open the address above');
  });
});
