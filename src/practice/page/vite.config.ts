import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

export default defineConfig({
  root: fileURLToPath(new URL('.', import.meta.url)),
  base: '/',
  build: {
    outDir: fileURLToPath(new URL('../../../dist/practice/page', import.meta.url)),
    emptyOutDir: true,
    // Fonts stay files: inlined they would be read before the page.
    assetsInlineLimit: 0,
  },
  oxc: { jsx: { runtime: 'automatic', importSource: 'preact' } },
});
