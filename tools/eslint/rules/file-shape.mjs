import path from 'node:path';
import { projectPath } from '../project-path.mjs';

const NO_HOME = new Set(['utils', 'util', 'helpers', 'helper', 'misc', 'common']);
const KEBAB = /^[a-z0-9]+(-[a-z0-9]+)*(\.[a-z0-9-]+)*$/;
const PASCAL = /^[A-Z][A-Za-z0-9]*$/;
const COMPOSABLE = /^use[A-Z][A-Za-z0-9]*(\.test)?$/;

/**
 * Names and kinds of files: kebab-case modules, PascalCase components, useThing composables; no drawer for odds and
 * ends, and no file that only passes on what others export.
 * @type {import('eslint').Rule.RuleModule}
 */
export const fileShape = {
  meta: { type: 'problem', schema: [] },
  create(context) {
    const file = projectPath(context);
    const extension = path.posix.extname(file);
    const name = path.posix.basename(file, extension);
    return {
      Program(node) {
        const report = (/** @type {string} */ message) =>
          context.report({ node, loc: { line: 1, column: 0 }, message });
        if (extension === '.vue' && !PASCAL.test(name)) report(`Components are named PascalCase.vue, not ${name}.vue.`);
        if (extension !== '.vue' && !KEBAB.test(name) && !COMPOSABLE.test(name)) {
          report(`Modules are named kebab-case.ts (composables useThing.ts), not ${name}${extension}.`);
        }
        if (NO_HOME.has(name.split('.')[0])) report(`${name}${extension} says nothing of what is in it.`);
        if (name === 'index') report('No barrels: import from the file that defines the thing.');
        else if (node.body.length > 0 && node.body.every(isReexport)) {
          report('No barrels: this file only passes on what others export.');
        }
      },
    };
  },
};

/** @param {any} statement */
function isReexport(statement) {
  return /^Export(Named|All)Declaration$/.test(statement.type) && Boolean(statement.source);
}
