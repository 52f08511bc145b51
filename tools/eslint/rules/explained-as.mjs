/**
 * A cast has its reason beside it: in a comment on one of its lines, or on the line above the statement.
 * `as const` needs none. Option "double" asks it only of casts through unknown, "every" of all casts.
 * @type {import('eslint').Rule.RuleModule}
 */
export const explainedAs = {
  meta: { type: 'problem', schema: [{ enum: ['double', 'every'] }], defaultOptions: ['double'] },
  create(context) {
    const every = context.options[0] === 'every';
    const comments = context.sourceCode.getAllComments();

    const isExplained = (/** @type {any} */ node) => {
      const from = firstLine(node) - 1;
      const to = node.loc.end.line;
      return comments.some((comment) => {
        const { start, end } = /** @type {NonNullable<typeof comment.loc>} */ (comment.loc);
        return start.line <= to && end.line >= from;
      });
    };

    return {
      'TSAsExpression, TSTypeAssertion'(/** @type {any} */ node) {
        if (isConst(node.typeAnnotation)) return;
        const isInner = node.typeAnnotation.type === 'TSUnknownKeyword';
        const isDouble = node.expression.type === 'TSAsExpression' || node.expression.type === 'TSTypeAssertion';
        if (isInner || (!every && !isDouble) || isExplained(node)) return;
        context.report({ node, message: 'A cast needs its reason in a comment beside it, or a schema instead of it.' });
      },
    };
  },
};

/** @param {any} node */
function firstLine(node) {
  let at = node;
  while (at.parent && !/(Statement|Declaration|Property|PropertyDefinition)$/.test(at.type)) at = at.parent;
  return Math.min(at.loc.start.line, node.loc.start.line);
}

/** @param {any} type */
function isConst(type) {
  return type.type === 'TSTypeReference' && type.typeName?.name === 'const';
}
