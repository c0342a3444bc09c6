import { fileURLToPath } from 'node:url';
import preact from '@preact/preset-vite';
import { defineConfig } from 'vite';

/** Builds the window into dist/window. Nothing is inlined: the page's content security policy allows no inline script, style or data address. */
export default defineConfig({
  root: fileURLToPath(new URL('app/window', import.meta.url)),
  base: './',
  plugins: [preact({ devToolsEnabled: false, prefreshEnabled: false })],
  build: {
    outDir: fileURLToPath(new URL('dist/window', import.meta.url)),
    emptyOutDir: true,
    assetsInlineLimit: 0,
    cssCodeSplit: false,
    modulePreload: false,
    target: 'es2023',
    reportCompressedSize: false,
  },
});
