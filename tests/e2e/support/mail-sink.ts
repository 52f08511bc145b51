import fs from 'node:fs';
import path from 'node:path';
import { inject } from 'vitest';

/** The link in the newest message to `email` in the local sink of the shared product; null while there is none. */
export function linkInSink(email: string): string | null {
  const folder = path.join(inject('dataFolder'), 'mail');
  for (const name of fs.existsSync(folder) ? fs.readdirSync(folder).sort().reverse() : []) {
    const raw = fs.readFileSync(path.join(folder, name), 'utf8').replace(/=\r?\n/g, '');
    const found = /\/welcome\/[\w-]{43}/.exec(raw);
    if (raw.includes(email) && found) return found[0];
  }
  return null;
}
