import { existsSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';

/** The folder of package.json, found upwards: this file runs from server/config and, bundled, from dist/server. */
export const projectFolder = findUpwards(path.dirname(fileURLToPath(import.meta.url)));

function findUpwards(folder: string): string {
  if (existsSync(path.join(folder, 'package.json'))) return folder;
  const parent = path.dirname(folder);
  if (parent === folder) throw new Error('package.json of the project not found above the server files.');
  return findUpwards(parent);
}
