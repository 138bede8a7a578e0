import { cp, mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { putInPlace } from '../../../main/shells/builds.ts';
import { freshFolder } from './a-shell.ts';

/** A finished build whose two files belong together. */
const build = async (folder: string, name: string): Promise<string> => {
  const fresh = await mkdtemp(join(folder, '.fresh-'));
  await writeFile(join(fresh, 'index.html'), name);
  await mkdir(join(fresh, 'assets'));
  await writeFile(join(fresh, 'assets', 'index.js'), name);
  return fresh;
};
const inPlace = async (place: string): Promise<string[]> => [
  await readFile(join(place, 'index.html'), 'utf8'),
  await readFile(join(place, 'assets', 'index.js'), 'utf8'),
];

it('a build takes the place of the one before, and nothing of that is left', async () => {
  const folder = await freshFolder();
  const place = join(folder, 'renderer');
  await putInPlace(await build(folder, 'first'), place);
  await writeFile(join(place, 'assets', 'old.js'), 'old');
  await putInPlace(await build(folder, 'second'), place);
  expect(await inPlace(place)).toEqual(['second', 'second']);
  expect([await readdir(join(place, 'assets')), await readdir(folder)]).toEqual([['index.js'], ['renderer']]);
});

it('builds that finish at once leave one of them, whole', async () => {
  for (let round = 0; round < 50; round++) {
    const folder = await freshFolder();
    const place = join(folder, 'renderer');
    const names = ['a', 'b', 'c', 'd'];
    const builds = await Promise.all(names.map((name) => build(folder, name)));
    if (round % 2 === 0) await cp(builds[0] ?? '', place, { recursive: true });
    await Promise.all(builds.map((fresh) => putInPlace(fresh, place)));
    await Promise.all(builds.map((fresh) => rm(fresh, { recursive: true, force: true })));
    const [page, script] = await inPlace(place);
    expect(names).toContain(page);
    expect(script).toBe(page);
    expect(await readdir(folder)).toEqual(['renderer']);
  }
});
