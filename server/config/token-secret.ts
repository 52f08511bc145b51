import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { ConfigurationError } from './environment.ts';

const FILE_NAME = 'token-secret';
const SECRET_BYTES = 48;

/** The secret that signs access tokens: the given one, else the data folder's, made once and readable by its owner only. */
export function tokenSecret(given: string | null, dataFolder: string): string {
  if (given !== null) return given;
  const file = path.join(dataFolder, FILE_NAME);
  try {
    mkdirSync(dataFolder, { recursive: true, mode: 0o700 });
    writeFileSync(file, randomBytes(SECRET_BYTES).toString('base64url'), { flag: 'wx', mode: 0o600 });
  } catch (error) {
    if (codeOf(error) !== 'EEXIST') throw unusable(file, error);
  }
  try {
    const secret = readFileSync(file, 'utf8').trim();
    if (secret.length >= SECRET_BYTES) return secret;
  } catch (error) {
    throw unusable(file, error);
  }
  throw new ConfigurationError([
    `The token secret in ${file} is too short; delete the file and everyone signs in again.`,
  ]);
}

function unusable(file: string, cause: unknown): ConfigurationError {
  const reason = codeOf(cause) ?? String(cause);
  return new ConfigurationError([
    `The token secret ${file} cannot be read or written (${reason}); check the permissions of the data folder or set SIDEWASH_JWT_SECRET.`,
  ]);
}

function codeOf(error: unknown): string | null {
  return error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : null;
}
