import { expect, it } from 'vitest';
import { installPackages } from '../peers/debian.ts';

/** A machine on which these commands succeed. */
const machine = (...succeeding: string[]) => {
  const commands: string[] = [];
  const run = (program: string, args: readonly string[]): boolean => {
    commands.push([program, ...args].join(' '));
    return succeeding.includes(args[0] ?? '');
  };
  return { commands, run };
};
const INSTALL = 'apt-get install --yes --no-install-recommends socat mbpoll';

it('nothing is installed where nobody may', () => {
  const { commands, run } = machine('install', 'update');
  expect([installPackages(['socat'], run, false), commands]).toEqual([false, []]);
});

it('packages are installed in one go', () => {
  const { commands, run } = machine('install');
  expect([installPackages(['socat', 'mbpoll'], run, true), commands]).toEqual([true, [INSTALL]]);
});

it('the lists of packages are fetched when installing fails without them', () => {
  const { commands, run } = machine('update');
  expect(installPackages(['socat', 'mbpoll'], run, true)).toBe(false);
  expect(commands).toEqual([INSTALL, 'apt-get update', INSTALL]);
});
