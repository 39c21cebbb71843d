import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { stripTypeScriptTypes } from 'node:module';
import { join, resolve } from 'node:path';
import { defineConfig, type Plugin } from 'vite';
import { FONT_FILES, fontBytes } from './export/note/font-files.ts';

const here = import.meta.dirname;
const usual = resolve(here, '../dist/main');

/** A sandboxed preload is one CommonJS file that takes nothing but the desktop's own module: its types are taken off. */
function preload(): Plugin {
  let out = usual;
  return {
    name: 'preload',
    configResolved(config) {
      out = resolve(config.root, config.build.outDir);
    },
    closeBundle() {
      mkdirSync(out, { recursive: true });
      const source = readFileSync(join(here, 'electron', 'preload.cts'), 'utf8');
      writeFileSync(join(out, 'preload.cjs'), stripTypeScriptTypes(source));
    },
  };
}

/** The typefaces of the note, in a folder beside the code that sets it. */
function fonts(): Plugin {
  let out = usual;
  return {
    name: 'fonts',
    configResolved(config) {
      out = resolve(config.root, config.build.outDir);
    },
    closeBundle() {
      mkdirSync(join(out, 'fonts'), { recursive: true });
      for (const font of FONT_FILES) writeFileSync(join(out, 'fonts', font.file), fontBytes(font));
    },
  };
}

// The desktop's own code for packaging: the entry and the windows' threads, each one file in one folder.
// Only what the runtime brings and what holds native code stays outside.
export default defineConfig({
  root: here,
  publicDir: false,
  plugins: [preload(), fonts()],
  ssr: { noExternal: true, external: ['electron', 'better-sqlite3'] },
  build: {
    ssr: true,
    outDir: usual,
    emptyOutDir: true,
    target: 'node22',
    minify: false,
    rolldownOptions: {
      input: {
        electron: join(here, 'electron', 'main.ts'),
        'session-worker': join(here, 'session', 'worker.ts'),
        'mask-worker': join(here, 'requests', 'mask-worker.ts'),
        'note-worker': join(here, 'requests', 'note-worker.ts'),
        'bring-in-worker': join(here, 'import', 'worker.ts'),
      },
      output: { format: 'es', entryFileNames: '[name].js', chunkFileNames: '[name]-[hash].js' },
    },
  },
});
