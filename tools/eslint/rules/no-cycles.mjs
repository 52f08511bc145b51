import fs from 'node:fs';
import path from 'node:path';
import { resolveInside } from '../layers.mjs';
import { projectPath } from '../project-path.mjs';

/** Imports of values: `import type` leaves nothing at run time, a dynamic import runs later. */
const VALUE_IMPORT = /^[ \t]*(?:import|export)\s+(?!type\s)(?:[^'";]*?\sfrom\s+)?['"]([^'"]+)['"]/gm;

/** @type {Map<string, { modified: number, imports: string[] }>} */
const known = new Map();

/**
 * Files of the project whose values a file imports.
 * @param {string} root
 * @param {string} file
 * @returns {string[]}
 */
function importsOf(root, file) {
  const stat = fs.statSync(path.join(root, file), { throwIfNoEntry: false });
  if (!stat?.isFile() || !/\.(ts|vue|mjs|js)$/.test(file)) return [];
  const entry = known.get(file);
  if (entry?.modified === stat.mtimeMs) return entry.imports;
  const imports = valueImports(fs.readFileSync(path.join(root, file), 'utf8'), file);
  known.set(file, { modified: stat.mtimeMs, imports });
  return imports;
}

/**
 * @param {string} text
 * @param {string} file
 * @returns {string[]}
 */
export function valueImports(text, file) {
  return [...text.matchAll(VALUE_IMPORT)]
    .map((match) => resolveInside(file, match[1]))
    .filter((target) => target !== null);
}

/**
 * The shortest way back from one file to another along imports; null when there is none.
 * @param {(file: string) => string[]} edges
 * @param {string} from
 * @param {string} to
 * @returns {string[] | null}
 */
export function wayBack(edges, from, to) {
  const cameFrom = new Map([[from, '']]);
  const queue = [from];
  for (let file = queue.shift(); file !== undefined; file = queue.shift()) {
    if (file === to) {
      const way = [];
      for (let at = file; at !== ''; at = cameFrom.get(at) ?? '') way.unshift(at);
      return way;
    }
    for (const next of edges(file)) {
      if (cameFrom.has(next)) continue;
      cameFrom.set(next, file);
      queue.push(next);
    }
  }
  return null;
}

/** @type {import('eslint').Rule.RuleModule} */
export const noCycles = {
  meta: { type: 'problem', schema: [] },
  create(context) {
    const file = projectPath(context);
    return {
      ImportDeclaration(node) {
        if (/** @type {any} */ (node).importKind === 'type' || typeof node.source.value !== 'string') return;
        const target = resolveInside(file, node.source.value);
        if (target === null) return;
        const way = wayBack((at) => importsOf(context.cwd, at), target, file);
        if (way !== null) context.report({ node, message: `Import cycle: ${[file, ...way].join(' → ')}.` });
      },
    };
  },
};
