import path from 'node:path';

/**
 * Path of the linted file from the project's folder on, with forward slashes.
 * @param {import('eslint').Rule.RuleContext} context
 */
export function projectPath(context) {
  return path.relative(context.cwd, context.filename).split(path.sep).join('/');
}
