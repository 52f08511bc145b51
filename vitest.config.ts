import templateCompilerOptions from '@tresjs/core/template-compiler-options';
import vue from '@vitejs/plugin-vue';
import vuetify from 'vite-plugin-vuetify';
import { defineConfig } from 'vitest/config';

/**
 * One project per kind of test. `*.dom.test.ts` runs in happy-dom with Vue components compiled;
 * everything else runs in plain Node. An unexpected console warning fails the test (console-guard).
 */
const guard = ['tests/support/console-guard.ts'];

export default defineConfig({
  test: {
    maxWorkers: 2,
    projects: [
      {
        test: {
          name: 'unit',
          include: ['tests/unit/**/*.test.ts'],
          exclude: ['tests/unit/**/*.dom.test.ts'],
          setupFiles: guard,
          testTimeout: 30_000,
        },
      },
      {
        plugins: [vue(templateCompilerOptions), vuetify({ autoImport: true })],
        test: {
          name: 'components',
          environment: 'happy-dom',
          include: ['tests/unit/**/*.dom.test.ts'],
          setupFiles: guard,
          server: { deps: { inline: ['vuetify'] } },
          css: false,
          testTimeout: 30_000,
        },
      },
      {
        test: {
          name: 'reference',
          include: ['tests/reference/**/*.test.ts'],
          setupFiles: guard,
          testTimeout: 60_000,
        },
      },
      {
        test: {
          name: 'architecture',
          include: ['tests/architecture/**/*.test.ts'],
          setupFiles: guard,
          testTimeout: 120_000,
        },
      },
      {
        test: {
          name: 'integration',
          include: ['tests/integration/**/*.test.ts'],
          setupFiles: guard,
          globalSetup: ['tests/support/mariadb-global-setup.ts'],
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
      {
        test: {
          name: 'e2e',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/e2e/support/product-global-setup.ts'],
          fileParallelism: false,
          testTimeout: 180_000,
          hookTimeout: 180_000,
        },
      },
    ],
  },
});
