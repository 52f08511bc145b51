import path from 'node:path';
import { fileURLToPath } from 'node:url';

/** The project's folder: where package.json lies. */
export const projectFolder = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..', '..');

/**
 * The data folder that the environment names, or `.data` in the project.
 * @param {NodeJS.ProcessEnv} env
 */
export function dataFolderOf(env) {
  return path.resolve(projectFolder, env.SIDEWASH_DATA || '.data');
}
