import { layerProblem } from '../layers.mjs';
import { projectPath } from '../project-path.mjs';

/** Every import, static, re-exported, dynamic or of a type alone, keeps to the table in layers.mjs. */
/** @type {import('eslint').Rule.RuleModule} */
export const layers = {
  meta: { type: 'problem', schema: [] },
  create(context) {
    const file = projectPath(context);
    const check = (/** @type {any} */ node, /** @type {unknown} */ specifier) => {
      if (typeof specifier !== 'string') return;
      const message = layerProblem(file, specifier);
      if (message !== null) context.report({ node, message });
    };
    return {
      ImportDeclaration: (node) => check(node, node.source.value),
      ExportNamedDeclaration: (node) => check(node, node.source?.value),
      ExportAllDeclaration: (node) => check(node, node.source.value),
      ImportExpression: (node) => check(node, node.source.type === 'Literal' ? node.source.value : undefined),
      TSImportType: (/** @type {any} */ node) => check(node, node.source?.value ?? node.argument?.literal?.value),
    };
  },
};
