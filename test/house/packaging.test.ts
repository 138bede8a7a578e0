import { readdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join, matchesGlob, relative } from 'node:path';
import { describe, expect, it } from 'vitest';
import { parse } from 'yaml';
import { PROJECT } from './source.ts';

/** What is used here of the JSON Schema validator that electron-builder brings with it. */
interface Validators {
  readonly Ajv: new (
    options: object,
  ) => { compile(schema: object): ((value: unknown) => boolean) & { errors: unknown[] | null } };
}

const read = (name: string): string => readFileSync(join(PROJECT, name), 'utf8');
const config = parse(read('electron-builder.yml')) as { files: string[]; asarUnpack: string[] };
const manifest = JSON.parse(read('package.json')) as { dependencies: Record<string, string> };

const require = createRequire(import.meta.url);
const builder = createRequire(require.resolve('electron-builder/package.json'));
const library = builder.resolve('app-builder-lib/package.json');
const schema = JSON.parse(readFileSync(join(dirname(library), 'scheme.json'), 'utf8')) as object;
const { Ajv } = createRequire(library)('ajv') as Validators;

describe('the installers', () => {
  it("are described as electron-builder's own schema wants it", () => {
    const validate = new Ajv({ strict: false, allErrors: true }).compile(schema);
    validate(config);
    expect(validate.errors).toBe(null);
    expect(validate({ ...config, asarUnpacked: [] })).toBe(false);
  });

  it('leave out every package that is in the bundles, and only those', () => {
    const left = /^!node_modules\/\{(.*)\}\/\*\*$/.exec(
      config.files.find((one) => one.startsWith('!')) ?? '',
    );
    const bundled = Object.keys(manifest.dependencies).filter((name) => name !== 'serialport');
    expect(left?.[1]?.split(',').sort()).toEqual(bundled.sort());
  });

  it('keep the native part of serialport out of the archive, where the system can load it', () => {
    const home = dirname(require.resolve('@serialport/bindings-cpp/package.json'));
    const natives = readdirSync(home, { recursive: true, encoding: 'utf8' }).filter((name) =>
      name.endsWith('.node'),
    );
    expect(natives.length).toBeGreaterThan(0);
    for (const name of natives) {
      const path = relative(PROJECT, join(home, name));
      expect(config.asarUnpack.some((pattern) => matchesGlob(path, pattern))).toBe(true);
    }
  });
});
