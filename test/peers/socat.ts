import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** Two pseudo-terminals joined back to back, as a serial cable would. */
export interface SerialPair {
  readonly a: string;
  readonly b: string;
  close(): Promise<void>;
}

export const openPair = async (): Promise<SerialPair> => {
  const folder = await mkdtemp(join(tmpdir(), 'foldback-pair-'));
  const [a, b] = [join(folder, 'a'), join(folder, 'b')];
  const socat = spawn('socat', [`pty,raw,echo=0,link=${a}`, `pty,raw,echo=0,link=${b}`], { stdio: 'ignore' });
  await until(() => existsSync(a) && existsSync(b), 'socat did not open its pair');
  return {
    a,
    b,
    close: async () => {
      await ended(socat);
      await rm(folder, { recursive: true, force: true });
    },
  };
};

/** Waits for what another program is to do; the bound only keeps a broken run from hanging. */
export const until = async (holds: () => boolean, otherwise: string): Promise<void> => {
  for (let i = 0; i < 1000; i++) {
    if (holds()) return;
    await new Promise((done) => setTimeout(done, 20));
  }
  throw new Error(otherwise);
};

/** Ends a child process and waits until it is gone. */
export const ended = (child: ChildProcess): Promise<void> =>
  new Promise((done) => {
    if (child.exitCode !== null || child.signalCode !== null) return done();
    child.once('exit', () => done());
    child.kill('SIGTERM');
  });
