/**
 * Exported functions of numerics, model and analysis say what they return, the unit of each parameter and where the
 * method comes from: first line, @param for each, @returns, @throws when the body throws, @source; house style §4.
 * @type {import('eslint').Rule.RuleModule}
 */
export const numericalDocstring = {
  meta: { type: 'problem', schema: [] },
  create(context) {
    /**
     * @param {any} statement the export
     * @param {any} fn
     * @param {string} name
     */
    const check = (statement, fn, name) => {
      const problems = docstringProblems(docstringBefore(context.sourceCode, statement), fn, context.sourceCode);
      if (problems.length > 0) {
        context.report({ node: fn.id ?? fn, message: `${name}: the docstring lacks ${problems.join(', ')}.` });
      }
    };
    return {
      'Program > ExportNamedDeclaration'(/** @type {any} */ node) {
        const declaration = node.declaration;
        if (declaration?.type === 'FunctionDeclaration') check(node, declaration, declaration.id.name);
        if (declaration?.type !== 'VariableDeclaration') return;
        for (const { id, init } of declaration.declarations) {
          if (['ArrowFunctionExpression', 'FunctionExpression'].includes(init?.type)) check(node, init, id.name);
        }
      },
    };
  },
};

/**
 * @param {import('eslint').SourceCode} sourceCode
 * @param {any} node
 * @returns {string} empty when there is none
 */
function docstringBefore(sourceCode, node) {
  const comment = sourceCode.getCommentsBefore(node).at(-1);
  return comment?.type === 'Block' && comment.value.startsWith('*') ? comment.value : '';
}

/**
 * @param {string} docstring
 * @param {any} fn
 * @param {import('eslint').SourceCode} sourceCode
 * @returns {string[]}
 */
function docstringProblems(docstring, fn, sourceCode) {
  const lines = docstring.split('\n').map((line) => line.replace(/^\s*\*+\s?/, '').trim());
  const first = lines.find((line) => line !== '') ?? '';
  const problems = first === '' || first.startsWith('@') ? ['a first line that states the result'] : [];
  for (const parameter of fn.params) {
    const name = parameterName(parameter);
    if (name !== null && !new RegExp(`@param\\s+(\\{[^}]*\\}\\s+)?${name}\\s+\\S`).test(docstring)) {
      problems.push(`@param ${name} with meaning and unit`);
    }
    if (name === null && !/@param\s+\S/.test(docstring)) problems.push('@param for the options');
  }
  if (returnsValue(fn) && !/@returns\s+\S/.test(docstring)) problems.push('@returns');
  if (throwsItself(fn.body, sourceCode) && !/@throws\s+\S/.test(docstring)) problems.push('@throws');
  if (!/@source\s+\S/.test(docstring)) problems.push('@source');
  return problems;
}

/**
 * @param {any} parameter
 * @returns {string | null} null for a destructured parameter, whose document may choose a name
 */
function parameterName(parameter) {
  if (parameter.type === 'Identifier') return parameter.name;
  if (parameter.type === 'AssignmentPattern') return parameterName(parameter.left);
  if (parameter.type === 'RestElement') return parameterName(parameter.argument);
  return null;
}

/** @param {any} fn */
function returnsValue(fn) {
  const annotation = fn.returnType?.typeAnnotation;
  if (annotation) return !['TSVoidKeyword', 'TSNeverKeyword'].includes(annotation.type) && !annotation.asserts;
  return (
    fn.body.type !== 'BlockStatement' || fn.body.body.some((/** @type {any} */ part) => part.type === 'ReturnStatement')
  );
}

/**
 * Whether a throw statement stands in the function itself, not in one inside it.
 * @param {any} node
 * @param {import('eslint').SourceCode} sourceCode
 * @returns {boolean}
 */
function throwsItself(node, sourceCode) {
  if (node.type === 'ThrowStatement') return true;
  if (/Function(Expression|Declaration)$/.test(node.type)) return false;
  return (sourceCode.visitorKeys[node.type] ?? [])
    .flatMap((key) => node[key] ?? [])
    .some((child) => child !== null && typeof child.type === 'string' && throwsItself(child, sourceCode));
}
