import { existsSync, mkdirSync, renameSync, statSync } from 'node:fs';
import path from 'node:path';
import { type Logger, destination, pino } from 'pino';
import type { Environment } from './environment.ts';

export type { Logger } from 'pino';

const ROTATE_AT_BYTES = 20_000_000;

/** The server's log: JSON lines in the data folder (the previous 20 MB kept beside it), on stderr, or nowhere. */
export function createLog(env: Pick<Environment, 'log' | 'logLevel' | 'dataFolder'>): Logger {
  if (env.log === 'off') return pino({ enabled: false });
  const options = {
    level: env.logLevel,
    base: { pid: process.pid },
    redact: ['req.headers.cookie', 'password', '*.password'],
  };
  if (env.log === 'stderr') return pino(options, destination({ dest: 2, sync: true }));
  const file = path.join(env.dataFolder, 'logs', 'server.log');
  mkdirSync(path.dirname(file), { recursive: true, mode: 0o700 });
  if (existsSync(file) && statSync(file).size > ROTATE_AT_BYTES) renameSync(file, `${file}.1`);
  return pino(options, destination({ dest: file, sync: false, minLength: 0, mkdir: true }));
}
