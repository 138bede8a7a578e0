import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import react from '@vitejs/plugin-react';
import { defineConfig, type Plugin, type UserConfig } from 'vite';

const project = import.meta.dirname;

const renderer: UserConfig = {
  root: join(project, 'renderer'),
  base: './',
  plugins: [react()],
  build: {
    outDir: join(project, 'dist', 'renderer'),
    emptyOutDir: true,
    chunkSizeWarningLimit: 1200,
    modulePreload: { polyfill: false },
  },
};

/** The built-in rig's file lies beside the bundle as it lies beside its reader in the source. */
const builtInRigFile = (): Plugin => ({
  name: 'built-in-rig-file',
  generateBundle() {
    const name = 'files/built-in.yaml';
    this.emitFile({ type: 'asset', fileName: name, source: readFileSync(join(project, 'main/rig', name)) });
  },
});

/** Bundles for Electron; only what it brings itself, and serialport with its native part, stays outside. */
const bundle = (input: Record<string, string>, format: 'es' | 'cjs', plugins: Plugin[] = []): UserConfig => ({
  root: project,
  plugins,
  ssr: { noExternal: true, external: ['serialport', 'electron'] },
  build: {
    ssr: true,
    target: 'node22',
    outDir: join(project, 'dist', 'main'),
    emptyOutDir: false,
    rolldownOptions: {
      input,
      output: {
        format,
        entryFileNames: format === 'cjs' ? '[name].cjs' : '[name].js',
        chunkFileNames: '[name].js',
      },
    },
  },
});

const main = bundle(
  { electron: 'main/shells/electron.ts', 'console-process': 'main/console/process.ts' },
  'es',
  [builtInRigFile()],
);
/** A sandboxed preload is one CommonJS file. */
const preload = bundle({ preload: 'main/shells/preload.ts' }, 'cjs');

export default defineConfig(({ mode }) => (mode === 'main' ? main : mode === 'preload' ? preload : renderer));
