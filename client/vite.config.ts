import { fileURLToPath } from 'node:url';
import preact from '@preact/preset-vite';
import { defineConfig } from 'vite';

const inCheckout = (path: string): string => fileURLToPath(new URL(`../${path}`, import.meta.url));

/** The page is built into `.build/client`, from where the server serves it; `npx vite client` beside it while writing. */
export default defineConfig({
  root: inCheckout('client'),
  plugins: [preact()],
  cacheDir: inCheckout('node_modules/.vite'),
  build: {
    outDir: inCheckout('.build/client'),
    emptyOutDir: true,
    target: 'es2022',
    // The content security policy allows nothing but files of our own, so nothing is put inline.
    assetsInlineLimit: 0,
  },
  server: { host: '127.0.0.1', proxy: { '/api': 'http://127.0.0.1:8717' } },
});
