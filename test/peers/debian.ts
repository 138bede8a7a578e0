import { existsSync } from 'node:fs';

/** Runs a program and says whether it succeeded. */
export type Run = (program: string, args: readonly string[]) => boolean;

/** Whether packages can be installed without asking anyone: Debian or a relative of it, and root. */
export const mayInstall = (): boolean => process.getuid?.() === 0 && existsSync('/usr/bin/apt-get');

/** Installs Debian packages; where the lists of packages are missing or old, they are fetched first. */
export const installPackages = (names: readonly string[], run: Run, allowed = mayInstall()): boolean => {
  if (!allowed) return false;
  const install = ['install', '--yes', '--no-install-recommends', ...names];
  return run('apt-get', install) || (run('apt-get', ['update']) && run('apt-get', install));
};
