import { lstat, readdir } from 'node:fs/promises';
import path from 'node:path';

export interface FolderPart {
  name: string;
  bytes: number;
  files: number;
}

/** Sizes of what lies at the top of a folder, largest first; what goes away meanwhile counts nothing, links are not followed. */
export async function folderSizes(folder: string): Promise<FolderPart[]> {
  const parts = await Promise.all(
    (await names(folder)).map(async (name) => ({ name, ...(await sizeOf(path.join(folder, name))) })),
  );
  return parts.sort((a, b) => b.bytes - a.bytes || a.name.localeCompare(b.name));
}

async function names(folder: string): Promise<string[]> {
  return readdir(folder).catch(() => []);
}

async function sizeOf(place: string): Promise<{ bytes: number; files: number }> {
  const found = await lstat(place).catch(() => null);
  if (found === null) return { bytes: 0, files: 0 };
  if (!found.isDirectory()) return { bytes: found.size, files: 1 };
  let [bytes, files] = [0, 0];
  for (const name of await names(place)) {
    const inside = await sizeOf(path.join(place, name));
    bytes += inside.bytes;
    files += inside.files;
  }
  return { bytes, files };
}
