import fs from 'node:fs';
import path from 'node:path';
import { codeOf, Refusal } from './refusal.mjs';

/** Free space that a first start needs: an empty database takes about 50 MB, recordings grow from there. */
export const MINIMUM_FREE_BYTES = 200_000_000;

/**
 * Makes the data folder and its `run` and `logs`; refuses one that cannot be written or is nearly full.
 * @param {string} folder
 * @param {number} [minimumFreeBytes]
 */
export function prepareDataFolder(folder, minimumFreeBytes = MINIMUM_FREE_BYTES) {
  try {
    for (const part of ['run', 'logs']) makeFolder(path.join(folder, part));
    const probe = path.join(folder, 'run', `probe-${process.pid}`);
    fs.writeFileSync(probe, Buffer.alloc(4096));
    fs.rmSync(probe);
  } catch (error) {
    throw refusalFor(folder, error);
  }
  const { bavail, bsize } = fs.statfsSync(folder);
  if (bavail * bsize < minimumFreeBytes) {
    throw new Refusal(
      `The data folder ${folder} is full: ${megabytes(bavail * bsize)} free, ${megabytes(minimumFreeBytes)} needed`,
      'free some space there, or name another folder with SIDEWASH_DATA',
    );
  }
}

/**
 * One level after the other: a recursive mkdir hides the reason, such as a read-only disk, behind another code.
 * @param {string} folder
 */
function makeFolder(folder) {
  if (fs.existsSync(folder)) return;
  makeFolder(path.dirname(folder));
  try {
    fs.mkdirSync(folder, { mode: 0o700 });
  } catch (error) {
    // Another start may have made it just now.
    if (codeOf(error) !== 'EEXIST') throw error;
  }
}

/**
 * @param {string} folder
 * @param {unknown} error
 */
function refusalFor(folder, error) {
  const code = codeOf(error);
  if (code === 'ENOSPC' || code === 'EDQUOT') {
    return new Refusal(
      `The data folder ${folder} is full`,
      'free some space there, or name another folder with SIDEWASH_DATA',
    );
  }
  const why = code === 'EROFS' ? 'it is read-only' : code === 'EACCES' || code === 'EPERM' ? 'permission denied' : code;
  return new Refusal(
    `The data folder ${folder} cannot be written (${why})`,
    'give this user write permission to it, or name another folder with SIDEWASH_DATA',
  );
}

/** @param {number} bytes */
function megabytes(bytes) {
  return `${Math.floor(bytes / 1_000_000)} MB`;
}
