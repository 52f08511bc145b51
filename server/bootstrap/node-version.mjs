import { Refusal } from './refusal.mjs';

/**
 * Refuses a Node that the packages do not run on. The rule is the one in package.json's `engines`.
 * @param {string} version such as "20.19.1"
 */
export function checkNodeVersion(version) {
  const [major, minor] = version.split('.').map(Number);
  const fits = (major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22;
  if (!fits) {
    throw new Refusal(
      `Node ${version} is not one that Sidewash runs on`,
      'install Node 20.19 or a later 20, or 22.12 or later, and start again',
    );
  }
}
