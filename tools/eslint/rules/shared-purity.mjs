/** Members of Math that give the same bits in every JavaScript engine. */
const EXACT_MATH = new Set(['abs', 'sqrt', 'floor', 'ceil', 'round', 'trunc', 'sign', 'min', 'max', 'imul', 'fround']);

/** Globals that a pure module may use: the language's own, less the clock, chance, code from text and garbage. */
const ALLOWED_GLOBALS = new Set([
  ...['undefined', 'NaN', 'Infinity', 'isNaN', 'isFinite', 'parseInt', 'parseFloat'],
  ...['Object', 'Array', 'Number', 'String', 'Boolean', 'Symbol', 'BigInt', 'Math', 'JSON', 'RegExp', 'Promise'],
  ...['Map', 'Set', 'WeakMap', 'WeakSet', 'Proxy', 'Reflect', 'ArrayBuffer', 'SharedArrayBuffer', 'DataView'],
  ...['Int8Array', 'Uint8Array', 'Uint8ClampedArray', 'Int16Array', 'Uint16Array', 'Int32Array', 'Uint32Array'],
  ...['Float32Array', 'Float64Array', 'BigInt64Array', 'BigUint64Array', 'Iterator', 'Error', 'TypeError'],
  ...['RangeError', 'SyntaxError', 'EvalError', 'URIError', 'ReferenceError', 'AggregateError'],
]);

/** Methods whose answer depends on the machine's language. */
const LOCAL_METHODS = new Set(['toLocaleString', 'toLocaleUpperCase', 'toLocaleLowerCase', 'localeCompare']);

/**
 * Under shared, the same arguments give the same bits everywhere: no DOM, no Node, no clock, no chance, no inexact
 * Math, no state of a module.
 * @type {import('eslint').Rule.RuleModule}
 */
export const sharedPurity = {
  meta: { type: 'problem', schema: [] },
  create(context) {
    const report = (/** @type {any} */ node, /** @type {string} */ message) => context.report({ node, message });

    const checkGlobal = (/** @type {import('eslint').Scope.Reference} */ reference) => {
      const node = /** @type {any} */ (reference.identifier);
      if (isTypeOnly(reference)) return;
      if (node.name === 'Math') checkMath(node);
      else if (!ALLOWED_GLOBALS.has(node.name)) {
        report(node, `shared is pure: ${node.name} is not available here; pass what you need as an argument.`);
      }
    };

    const checkMath = (/** @type {any} */ node) => {
      const parent = node.parent;
      const isMember = parent.type === 'MemberExpression' && parent.object === node && !parent.computed;
      if (isMember && EXACT_MATH.has(parent.property.name)) return;
      const name = isMember ? `Math.${parent.property.name}` : 'Math as a value';
      report(parent, `${name} is not exact in every engine (or is chance); take it from numerics/elementary.ts.`);
    };

    return {
      Program(node) {
        const scope = context.sourceCode.getScope(node);
        const globals = scope.type === 'global' ? scope : scope.upper;
        globals?.through.forEach(checkGlobal);
        for (const variable of globals?.variables ?? []) {
          if (variable.defs.length === 0) variable.references.forEach(checkGlobal);
        }
        for (const statement of node.body) checkStatement(statement, report);
      },
      'BinaryExpression[operator="**"], AssignmentExpression[operator="**="]': (/** @type {any} */ node) =>
        report(node, 'The ** operator is not exact in every engine; use pow from numerics/elementary.ts.'),
      'MemberExpression[computed=false]'(/** @type {any} */ node) {
        if (LOCAL_METHODS.has(node.property.name)) {
          report(node, `${node.property.name} depends on the machine's language; write the text out.`);
        }
      },
    };
  },
};

/** @param {any} reference */
function isTypeOnly(reference) {
  return reference.isTypeReference === true && reference.isValueReference !== true;
}

/**
 * @param {any} statement
 * @param {(node: any, message: string) => void} report
 */
function checkStatement(statement, report) {
  const declaration = statement.type === 'ExportNamedDeclaration' ? statement.declaration : statement;
  if (declaration?.type === 'VariableDeclaration' && declaration.kind !== 'const' && !declaration.declare) {
    report(declaration, `A module-level ${declaration.kind} is hidden state; shared has none.`);
  }
}
