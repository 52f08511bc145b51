import fs from 'node:fs';
import path from 'node:path';
import { defineConfig } from 'vite';

/** The server: main.ts and each thread (NAME.worker.ts) become files side by side in dist/server; packages stay outside. */
const workers = fs
  .readdirSync('server', { recursive: true, encoding: 'utf8' })
  .filter((file) => file.endsWith('.worker.ts'))
  .map((file) => [path.basename(file, '.ts'), path.join('server', file)]);

export default defineConfig({
  publicDir: false,
  build: {
    ssr: true,
    outDir: 'dist/server',
    emptyOutDir: true,
    target: 'node20',
    sourcemap: true,
    rolldownOptions: {
      input: { main: 'server/main.ts', ...Object.fromEntries(workers) },
      output: { entryFileNames: '[name].js', chunkFileNames: '[name]-[hash].js' },
    },
  },
});
