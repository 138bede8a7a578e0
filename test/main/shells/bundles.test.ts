import { fork } from 'node:child_process';
import { mkdir, mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { build } from 'vite';
import { afterAll, beforeAll, describe, expect, it, onTestFinished } from 'vitest';
import type { FromConsole, ToConsole } from '../../../main/console/channel.ts';
import { freshFolder } from './a-shell.ts';

const PROJECT = join(import.meta.dirname, '..', '..', '..');
let folder = '';

beforeAll(async () => {
  // Within the project, so that serialport is found where it is installed.
  await mkdir(join(PROJECT, 'dist'), { recursive: true });
  folder = await mkdtemp(join(PROJECT, 'dist', '.test-'));
  for (const mode of ['main', 'preload'])
    await build({
      configFile: join(PROJECT, 'vite.config.ts'),
      mode,
      logLevel: 'silent',
      build: { outDir: folder },
    });
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const modulesOf = async (file: string): Promise<string[]> =>
  [
    ...(await readFile(join(folder, file), 'utf8')).matchAll(
      /^(?:import .*? from |.*\brequire\()"([^"]+)"/gm,
    ),
  ].map(([, name]) => name ?? '');

describe('the bundles for Electron', () => {
  it('bring a preload that a sandbox accepts: one CommonJS file that needs Electron alone', async () => {
    expect(await modulesOf('preload.cjs')).toEqual(['electron']);
  });

  it('hold what the installed program starts with', async () => {
    const { main } = JSON.parse(await readFile(join(PROJECT, 'package.json'), 'utf8')) as { main: string };
    expect(dirname(main)).toBe('dist/main');
    expect(await readdir(folder)).toContain(basename(main));
  });

  it('leave only Electron, serialport and Node outside', async () => {
    const files = (await readdir(folder)).filter((name) => name.endsWith('.js'));
    const outside = (await Promise.all(files.map(modulesOf)))
      .flat()
      .filter((name) => /^[a-z@][^:]*$/.test(name));
    expect(new Set(outside)).toEqual(new Set(['electron', 'serialport']));
  });

  it('bring a console process that starts the built-in rig, records and closes', async () => {
    const missionsDir = await freshFolder();
    const child = fork(join(folder, 'console-process.js'), { execArgv: [] });
    onTestFinished(() => void child.kill('SIGKILL'));
    const said: FromConsole['kind'][] = [];
    const ended = new Promise<number | null>((resolve) => child.on('exit', resolve));
    child.on('message', (message: FromConsole) => {
      said.push(message.kind);
      if (message.kind === 'started') child.send({ kind: 'join', client: 'one' } satisfies ToConsole);
      if (message.kind === 'message' && message.message.kind === 'frame')
        child.send({ kind: 'close' } satisfies ToConsole);
    });
    const options = { rigFile: null, serialPath: null, missionsDir, seed: 1 };
    child.send({ kind: 'start', options } satisfies ToConsole);
    expect(await ended).toBe(0);
    expect([said[0], said.at(-1)]).toEqual(['started', 'closed']);
    expect(await readdir(missionsDir)).toHaveLength(1);
  });
});
