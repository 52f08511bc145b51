import vuePlugin from 'eslint-plugin-vue';
import { defineConfig } from 'eslint/config';
import tseslint from 'typescript-eslint';
import { sidewashPlugin } from './tools/eslint/plugin.mjs';

const CODE = ['**/*.ts', '**/*.vue', '**/*.mjs', '**/*.js'];

/** Switched-off tests and tests that assert nothing. */
const DEAD_TESTS = [
  {
    selector:
      'MemberExpression[object.name=/^(it|test|describe)$/][property.name=/^(skip|only|todo|skipIf|runIf|fails)$/]',
    message: 'Every test runs, everywhere.',
  },
  {
    selector: 'CallExpression[callee.name=/^(expect|assert)$/] > Literal.arguments[value=true]',
    message: 'This asserts nothing.',
  },
];

export default defineConfig(
  { ignores: ['node_modules/', 'dist/', '.data/', '.cache/', 'coverage/', 'public/'] },
  // Rules bind everywhere: comments cannot switch them off.
  { linterOptions: { noInlineConfig: true } },
  ...tseslint.configs.recommended.map((config) => ({ ...config, files: CODE })),
  ...vuePlugin.configs['flat/essential'],
  {
    files: ['**/*.vue'],
    languageOptions: { parserOptions: { parser: tseslint.parser } },
    rules: {
      'vue/block-lang': ['error', { script: { lang: 'ts' } }],
      'vue/component-api-style': ['error', ['script-setup']],
      'vue/define-emits-declaration': ['error', 'type-based'],
      'vue/define-props-declaration': ['error', 'type-based'],
      'vue/no-v-html': 'error',
      'vue/no-template-target-blank': 'error',
      'vue/require-explicit-emits': 'error',
      'vue/multi-word-component-names': 'off',
    },
  },
  {
    files: CODE,
    plugins: { sidewash: sidewashPlugin },
    rules: {
      'sidewash/layers': 'error',
      'sidewash/no-cycles': 'error',
      'sidewash/file-shape': 'error',
      'sidewash/explained-as': ['error', 'double'],
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      // TypeScript finds undefined names, and knows the browser's and Node's.
      'no-undef': 'off',
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'no-var': 'error',
      'prefer-const': 'error',
      'no-eval': 'error',
      'no-implied-eval': 'error',
      'no-new-func': 'error',
      'max-lines': ['warn', { max: 300 }],
    },
  },
  // The server logs through its log; the client reports errors to the browser's console; commands print.
  { files: ['shared/**/*.ts', 'server/**/*.ts'], rules: { 'no-console': 'error' } },
  { files: ['src/**/*.ts', 'src/**/*.vue'], rules: { 'no-console': ['error', { allow: ['warn', 'error'] }] } },
  { files: ['server/cli/**/*.ts', 'server/main.ts'], rules: { 'no-console': 'off' } },
  // Where the outside comes in, every cast needs its reason.
  {
    files: [
      ...['server/http/**/*.ts', 'server/realtime/**/*.ts', 'server/config/**/*.ts', 'server/cli/**/*.ts'],
      ...['src/services/**/*.ts', 'src/runner/**/*.ts', 'shared/contracts/**/*.ts'],
    ],
    rules: { 'sidewash/explained-as': ['error', 'every'] },
  },
  { files: ['shared/**/*.ts', 'shared/**/*.js'], rules: { 'sidewash/shared-purity': 'error' } },
  {
    files: ['shared/numerics/**/*.ts', 'shared/model/**/*.ts', 'shared/analysis/**/*.ts'],
    // The published cases are data: each names its source itself.
    ignores: ['**/*.d.ts', 'shared/analysis/checks/**'],
    rules: { 'sidewash/numerical-docstring': 'error' },
  },
  // A package that ships untyped sources is passed on through a typed file of ours.
  { files: ['shared/numerics/vendor/*.js'], rules: { 'sidewash/file-shape': 'off' } },
  { files: ['tests/**/*.ts'], rules: { 'no-restricted-syntax': ['error', ...DEAD_TESTS] } },
);
