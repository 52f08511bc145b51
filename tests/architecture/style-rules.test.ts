import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { ESLint } from 'eslint';
import { describe, expect, it, onTestFinished } from 'vitest';
import { sidewashPlugin } from '../../tools/eslint/plugin.mjs';
import { lintText, messagesOf } from './lint-text.ts';

const COMPLETE = `
/**
 * Twice the yaw rate.
 *
 * @param r  Yaw rate; rad/s; finite.
 * @returns  rad/s.
 * @throws {RangeError} when r is not finite.
 * @source   derived here.
 */
export function twice(r: number): number {
  if (r !== r) throw new RangeError('r is not a number');
  return 2 * r;
}
`;

describe('docstrings of numerical functions', () => {
  const RULE = 'sidewash/numerical-docstring';

  it('accepts a complete one', async () => {
    expect(await messagesOf(RULE, 'shared/numerics/sample-file.ts', COMPLETE)).toEqual([]);
  });

  it.each([
    ['a first line', / \* Twice the yaw rate\.\n \*\n/, 'a first line'],
    ['@param', / \* @param .*\n/, '@param r'],
    ['@returns', / \* @returns .*\n/, '@returns'],
    ['@throws', / \* @throws .*\n/, '@throws'],
    ['@source', / \* @source .*\n/, '@source'],
  ])('misses %s', async (_what, part, complaint) => {
    for (const room of ['numerics', 'model', 'analysis']) {
      const messages = await messagesOf(RULE, `shared/${room}/sample-file.ts`, COMPLETE.replace(part, ''));
      expect(messages).toHaveLength(1);
      expect(messages[0]).toContain(complaint);
    }
  });

  it('asks the same of an exported arrow function', async () => {
    expect(await messagesOf(RULE, 'shared/model/sample-file.ts', 'export const f = (x: number) => x;')).toHaveLength(1);
  });

  it('leaves other rooms to their own style', async () => {
    expect(await messagesOf(RULE, 'shared/scenario/sample-file.ts', COMPLETE.replace(/@source.*/, ''))).toEqual([]);
  });
});

describe('types', () => {
  it('refuses any', async () => {
    const messages = await lintText('server/services/sample-file.ts', 'export const y = (x: any) => x;');
    expect(messages.join()).toContain('no-explicit-any');
  });

  it('refuses ts-ignore', async () => {
    const text = "// @ts-ignore\nexport const y: number = 'x';";
    expect((await lintText('src/services/sample-file.ts', text)).join()).toContain('ban-ts-comment');
  });

  const DOUBLE = 'export const y = (x: string) => x as unknown as number;';
  const SINGLE = 'export const y = (x: unknown) => x as number;';

  it.each([
    ['a cast through unknown, anywhere', 'shared/scenario/sample-file.ts', DOUBLE, 1],
    ['a plain cast at a boundary', 'server/http/sample-file.ts', SINGLE, 1],
    ['a plain cast at a boundary of the client', 'src/services/sample-file.ts', SINGLE, 1],
    ['a plain cast elsewhere', 'src/stage/sample-file.ts', SINGLE, 0],
    ['as const', 'server/http/sample-file.ts', "export const y = ['a'] as const;", 0],
  ])('%s', async (_what, file, text, count) => {
    expect(await messagesOf('sidewash/explained-as', file, text)).toHaveLength(count);
    const explained = `// The header is checked two lines above.\n${text}`;
    expect(await messagesOf('sidewash/explained-as', file, explained)).toEqual([]);
  });
});

describe('files', () => {
  const RULE = 'sidewash/file-shape';
  const TEXT = 'export const y = 1;';

  it.each([
    ['shared/units/utils.ts', TEXT, 'says nothing'],
    ['src/features/fly/helpers.ts', TEXT, 'says nothing'],
    ['shared/units/index.ts', TEXT, 'No barrels'],
    ['shared/units/all-units.ts', "export { x } from './angles.ts';\nexport * from './quantity.ts';", 'No barrels'],
    ['shared/units/someUnits.ts', TEXT, 'kebab-case'],
    ['src/components/sheet-pane.vue', `<script setup lang="ts">\n${TEXT}\n</script>`, 'PascalCase'],
  ])('%s is refused', async (file, text, complaint) => {
    const messages = await messagesOf(RULE, file, text);
    expect(messages).toHaveLength(1);
    expect(messages[0]).toContain(complaint);
  });

  it.each(['src/composables/useTick.ts', 'src/stores/session.store.ts', 'tests/unit/state-hash.test.ts'])(
    '%s is accepted',
    async (file) => {
      expect(await messagesOf(RULE, file, TEXT)).toEqual([]);
    },
  );

  it('a long file is pointed out', async () => {
    const text = Array.from({ length: 301 }, (_, i) => `export const y${i} = ${i};`).join('\n');
    expect(await messagesOf('max-lines', 'shared/units/sample-file.ts', text)).toHaveLength(1);
  });
});

describe('import cycles', () => {
  it('finds one over several files and leaves types and dynamic imports alone', async () => {
    const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'sidewash-cycle-'));
    onTestFinished(() => fs.rmSync(folder, { recursive: true }));
    const files = {
      'one.js': "import { two } from './two.js';\nexport const one = () => two();\n",
      'two.js': "import {\n  three,\n} from './three.js';\nexport const two = () => three();\n",
      'three.js': "import { one } from './one.js';\nexport const three = () => one;\n",
      'lazy.js': "export const lazy = () => import('./eager.js');\n",
      'eager.js': "import { lazy } from './lazy.js';\nexport const eager = () => lazy();\n",
    };
    for (const [name, text] of Object.entries(files)) fs.writeFileSync(path.join(folder, name), text);
    const eslint = new ESLint({
      cwd: folder,
      overrideConfigFile: true,
      overrideConfig: { plugins: { sidewash: sidewashPlugin }, rules: { 'sidewash/no-cycles': 'error' } },
    });
    const results = await eslint.lintFiles('*.js');
    const messages = results.flatMap((result) => result.messages.map((message) => message.message));
    expect(messages.sort()).toEqual([
      'Import cycle: one.js → two.js → three.js → one.js.',
      'Import cycle: three.js → one.js → two.js → three.js.',
      'Import cycle: two.js → three.js → one.js → two.js.',
    ]);
  });
});

describe('tests', () => {
  it.each([
    ['it.skip', "it.skip('x', () => {});"],
    ['describe.only', "describe.only('x', () => {});"],
    ['it.todo', "it.todo('x');"],
    ['expect(true)', 'expect(true).toBe(true);'],
  ])('%s is refused', async (_what, line) => {
    const text = `import { describe, expect, it } from 'vitest';\n${line}\nexport const used = [describe, expect, it];\n`;
    expect(await messagesOf('no-restricted-syntax', 'tests/unit/sample-file.test.ts', text)).toHaveLength(1);
  });
});
