import process from 'node:process';
import { checkNodeVersion } from './node-version.mjs';
import { ensureNpmPackages } from './npm-packages.mjs';
import { projectFolder } from './paths.mjs';

/**
 * What every command needs first: a fitting Node and the npm packages.
 * @param {import('./timings.mjs').Timings} timings
 * @param {(text: string) => void} say
 */
export async function prepareTools(timings, say) {
  checkNodeVersion(process.versions.node);
  await timings.step('packages', () => ensureNpmPackages(projectFolder, say));
}
