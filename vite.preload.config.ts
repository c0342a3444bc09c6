import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

/** Bundles the preload script of the desktop shell into one CommonJS file: a sandboxed one can't import. */
export default defineConfig({
  publicDir: false,
  build: {
    outDir: fileURLToPath(new URL('dist/app/preload', import.meta.url)),
    emptyOutDir: true,
    minify: false,
    target: 'es2023',
    reportCompressedSize: false,
    lib: {
      entry: fileURLToPath(new URL('app/preload/preload.ts', import.meta.url)),
      formats: ['cjs'],
      fileName: () => 'preload.cjs',
    },
    rollupOptions: { external: ['electron'] },
  },
});
