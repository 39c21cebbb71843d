import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

// Everything the page needs comes from its own origin: no inlined assets, no inline scripts or styles.
export default defineConfig({
  root: import.meta.dirname,
  base: './',
  plugins: [react()],
  worker: { format: 'es' },
  build: {
    outDir: '../dist/renderer',
    emptyOutDir: true,
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    target: 'chrome120',
    reportCompressedSize: true,
    chunkSizeWarningLimit: 6000,
  },
});
