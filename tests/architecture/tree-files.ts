import fs from 'node:fs';
import path from 'node:path';
import { projectFolder } from '../../server/bootstrap/paths.mjs';

const NOT_OURS = new Set(['node_modules', 'dist', '.git', '.data', '.cache', 'coverage']);

/** Project-relative paths of all files below the given places, without what is installed or built. */
export function filesOfTree(places: readonly string[]): string[] {
  return places.flatMap((place) => below(place)).sort();
}

function below(place: string): string[] {
  const full = path.join(projectFolder, place);
  return fs.readdirSync(full, { withFileTypes: true }).flatMap((entry) => {
    const name = path.join(place, entry.name);
    if (NOT_OURS.has(entry.name)) return [];
    if (entry.isDirectory()) return below(name);
    return entry.isFile() ? [name] : [];
  });
}

/** Folders below the given places that hold a file other than a README. */
export function foldersWithFiles(places: readonly string[]): string[] {
  const files = filesOfTree(places).filter((file) => path.basename(file) !== 'README.md');
  return [...new Set(files.map((file) => path.dirname(file)))].sort();
}

export function readText(file: string): string {
  return fs.readFileSync(path.join(projectFolder, file), 'utf8');
}
