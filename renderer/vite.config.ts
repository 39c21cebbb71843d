import react from '@vitejs/plugin-react';
import { defineConfig, type Plugin } from 'vite';

/** The page proper is fetched and compiled while its small entry still is. */
const readAhead: Plugin = {
  name: 'read-ahead',
  transformIndexHtml: {
    order: 'post',
    handler: (_, { bundle }) =>
      Object.values(bundle ?? {})
        .filter((part) => part.type === 'chunk' && part.name === 'show')
        .map(({ fileName }) => ({
          tag: 'link',
          attrs: { rel: 'modulepreload', crossorigin: true, href: `./${fileName}` },
          injectTo: 'head' as const,
        })),
  },
};

// Everything the page needs comes from its own origin: no inlined assets, no inline scripts or styles.
export default defineConfig({
  root: import.meta.dirname,
  base: './',
  plugins: [react(), readAhead],
  worker: { format: 'es' },
  build: {
    outDir: '../dist/renderer',
    emptyOutDir: true,
    assetsInlineLimit: 0,
    // one sheet of styles, named by the document: a part with its own would wait for it before it is drawn
    cssCodeSplit: false,
    modulePreload: { polyfill: false },
    target: 'chrome120',
    reportCompressedSize: true,
    chunkSizeWarningLimit: 6000,
  },
});
