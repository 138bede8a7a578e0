import { spawnSync } from 'node:child_process';
import { fetchChromium, findChromium } from '../../e2e/chromium.ts';
import { installPackages } from './debian.ts';
import { findProgram, findPymodbus } from './programs.ts';

/** Fetches what the tests need and the machine lacks, where that can be done; what stays missing is skipped by name. */
export const fetchPrograms = (): void => {
  const missing = [
    ...(findProgram('socat') === null ? ['socat'] : []),
    ...(findProgram('mbpoll') === null ? ['mbpoll'] : []),
    ...(findPymodbus() === null ? ['python3-pymodbus'] : []),
  ];
  if (missing.length > 0) installPackages(missing, run);
  if (findChromium() === null) fetchChromium(run);
};

const run = (program: string, args: readonly string[]): boolean => {
  process.stderr.write(`${program} ${args.join(' ')}\n`);
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  return spawnSync(program, args, { stdio: ['ignore', 2, 2], env }).status === 0;
};
