import templateCompilerOptions from '@tresjs/core/template-compiler-options';
import vue from '@vitejs/plugin-vue';
import { defineConfig } from 'vite';
import vuetify from 'vite-plugin-vuetify';

/** The client: built to dist/client, or served by the server itself in middleware mode (npm run dev). */
export default defineConfig({
  plugins: [vue(templateCompilerOptions), vuetify({ autoImport: true })],
  server: { watch: { ignored: ['**/.data/**', '**/.cache/**', '**/dist/**', '**/tests/**'] } },
  build: {
    outDir: 'dist/client',
    emptyOutDir: true,
    target: 'es2023',
    // Fonts and pictures stay files: cached on their own, and no data: addresses for the content security policy.
    assetsInlineLimit: 0,
    // three.js alone is larger than the warning limit; the bench row first-page-weight watches what matters.
    chunkSizeWarningLimit: 900,
  },
});
