import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, readdir, rm, writeFile } from 'node:fs/promises';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { type Manifest, readManifest } from '../../../main/record/manifest.ts';
import { readMission } from '../../../main/record/read-mission.ts';

const START = join(import.meta.dirname, '..', '..', '..', 'main', 'start.mjs');
const ADDRESS = /^Foldback console: http:\/\/127\.0\.0\.1:(\d+)\/#key=[\w-]{22,}$/;

interface Started {
  readonly child: ChildProcess;
  readonly folder: string;
  out(): string[];
  error(): string;
  /** Exit code once it has ended. */
  readonly ended: Promise<number | null>;
}

const start = (...options: string[]): Promise<Started> => startWith([process.execPath, START], options);

const startWith = async (
  [program = '', ...before]: readonly string[],
  options: string[],
): Promise<Started> => {
  const folder = await mkdtemp(join(tmpdir(), 'foldback-start-'));
  const env = { ...process.env, DISPLAY: '', WAYLAND_DISPLAY: '' };
  const child = spawn(program, [...before, '--missions', folder, ...options], {
    env,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let [out, error] = ['', ''];
  child.stdout.on('data', (part) => {
    out += part;
  });
  child.stderr.on('data', (part) => {
    error += part;
  });
  const ended = once(child, 'close').then(([code]) => code as number | null);
  onTestFinished(async () => {
    child.kill('SIGTERM');
    await ended;
    await rm(folder, { recursive: true, force: true, maxRetries: 5 });
  });
  return {
    child,
    folder,
    out: () => out.split('\n').filter((line) => line !== ''),
    error: () => error,
    ended,
  };
};

const printed = (one: Started, line: RegExp): Promise<void> => {
  const ended = one.ended.then((code) => {
    throw new Error(`npm start ended with ${code}: ${one.error()}`);
  });
  const appeared = expect
    .poll(() => one.out().some((text) => line.test(text)), { timeout: 50_000 })
    .toBe(true);
  return Promise.race([appeared, ended]);
};

const theMission = async (folder: string): Promise<{ folder: string; manifest: Manifest }> => {
  const [name = ''] = await readdir(folder);
  return { folder: join(folder, name), manifest: await readManifest(join(folder, name)) };
};
const kinds = async (folder: string): Promise<string[]> =>
  (await readMission((await theMission(folder)).folder)).events.map((event) => event.kind);

describe('npm start', () => {
  it('with the browser shell prints one line, the address, and nothing else', async () => {
    const one = await start('--shell', 'browser');
    await printed(one, ADDRESS);
    one.child.kill('SIGTERM');
    await one.ended;
    expect(one.out()).toEqual([expect.stringMatching(ADDRESS)]);
    expect(one.error()).toBe('');
  });

  it('says in one line which shell it took and why, and without a display keeps running', async () => {
    const one = await start();
    await printed(one, /no display/);
    const [shell, address] = one.out();
    expect(shell).toMatch(/^Shell: browser, because .*(not on this computer|no display)/);
    expect(address).toMatch(ADDRESS);
    expect(one.child.exitCode).toBe(null);
  });

  it.each(['SIGINT', 'SIGTERM'] as const)('closes the log on %s and ends well', async (signal) => {
    const one = await start('--shell', 'browser');
    await printed(one, ADDRESS);
    one.child.kill(signal);
    expect(await one.ended).toBe(0);
    expect((await theMission(one.folder)).manifest.ended).not.toBe(null);
    expect((await kinds(one.folder)).at(-1)).toBe('mission-ended');
  });

  it('closes the log even when its shell is killed', async () => {
    const one = await start('--shell', 'browser');
    await printed(one, ADDRESS);
    one.child.kill('SIGKILL');
    await expect
      .poll(async () => (await theMission(one.folder)).manifest.ended, { timeout: 20_000 })
      .not.toBe(null);
    expect((await kinds(one.folder)).at(-1)).toBe('mission-ended');
  });

  // npm hands a signal to its shell, which ends without telling the console.
  it('closes the log when only npm itself is told to end', async () => {
    const one = await startWith(['npm', 'start', '--silent', '--'], ['--shell', 'browser']);
    await printed(one, ADDRESS);
    one.child.kill('SIGTERM');
    await expect
      .poll(async () => (await theMission(one.folder)).manifest.ended, { timeout: 20_000 })
      .not.toBe(null);
  });

  it('runs on when nobody reads what it prints any more', async () => {
    const one = await start('--shell', 'browser');
    await printed(one, ADDRESS);
    one.child.stdout?.destroy();
    one.child.stderr?.destroy();
    const [, port = ''] = ADDRESS.exec(one.out()[0] ?? '') ?? [];
    expect((await fetch(`http://127.0.0.1:${port}/`)).status).toBe(200);
    one.child.kill('SIGTERM');
    await expect.poll(() => one.child.exitCode).toBe(0);
  });

  it('says that a port is in use, and records nothing', async () => {
    const taken = createServer().listen(0, '127.0.0.1');
    onTestFinished(() => void taken.close());
    await once(taken, 'listening');
    const { port } = taken.address() as { port: number };
    const one = await start('--shell', 'browser', '--port', String(port));
    expect(await one.ended).toBe(1);
    expect(one.error()).toBe(
      `Port ${port} is in use by another program. Choose another with --port, or 0 for any free one.\n`,
    );
    expect(await readdir(one.folder)).toEqual([]);
  });

  it('names every fault of a wrong rig file and does not start', async () => {
    const file = join(await mkdtemp(join(tmpdir(), 'foldback-rig-')), 'wrong.yaml');
    onTestFinished(() => rm(join(file, '..'), { recursive: true }));
    await writeFile(file, 'name: [1, 2\n');
    const one = await start('--shell', 'browser', '--rig', file);
    expect(await one.ended).toBe(1);
    expect(one.error()).toContain('wrong.yaml:');
    expect(one.out()).toEqual([]);
  });

  it.each([
    ['--listen', '0.0.0.0', 'one IP address of this computer'],
    ['--listen', '192.0.2.1', 'Add --insecure if that is meant'],
    ['--port', '65536', 'from 0 to 65535'],
    ['--port', '8o80', 'from 0 to 65535'],
    ['--shell', 'window', 'auto, electron, browser'],
  ])('refuses %s %s and says what is allowed', async (option, value, allowed) => {
    const one = await start(option, value);
    expect(await one.ended).toBe(1);
    expect(one.error()).toContain(allowed);
  });

  it('records two consoles started at once, each on a port of its own', async () => {
    const both = await Promise.all([start('--shell', 'browser'), start('--shell', 'browser')]);
    for (const one of both) await printed(one, ADDRESS);
    const [a, b] = both.map((one) => ADDRESS.exec(one.out()[0] ?? '')?.[1]);
    expect(a).not.toBe(b);
  });
});
