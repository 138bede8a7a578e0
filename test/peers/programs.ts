import { spawnSync } from 'node:child_process';
import { accessSync, constants } from 'node:fs';
import { delimiter, join } from 'node:path';

/** Path of a program on the search path, or null. */
export const findProgram = (name: string): string | null => {
  const places = (process.env.PATH ?? '').split(delimiter).map((folder) => join(folder, name));
  return places.find(mayRun) ?? null;
};

const mayRun = (path: string): boolean => {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
};

/** The Python that can import `pymodbus`, or null. Debian's package serves Debian's own Python only. */
export const findPymodbus = (): string | null =>
  ['/usr/bin/python3', 'python3'].find(
    (python) => spawnSync(python, ['-c', 'import pymodbus'], { stdio: 'ignore' }).status === 0,
  ) ?? null;

/** Why a test that needs these cannot run here, for the name of the skipped test; null when it can. */
export const whyNot = (...needed: readonly ('socat' | 'mbpoll' | 'pymodbus')[]): string | null => {
  const missing = needed.filter(
    (name) => (name === 'pymodbus' ? findPymodbus() : findProgram(name)) === null,
  );
  return missing.length === 0 ? null : `${missing.join(' and ')} cannot be found or fetched on this machine`;
};
