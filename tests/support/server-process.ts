import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { z } from 'zod';
import { anyFreePort } from '../../server/bootstrap/ports.mjs';
import { findProgram } from '../../server/bootstrap/programs.mjs';
import { projectFolder } from '../../server/bootstrap/paths.mjs';

const delaySchema = z.object({ p99Ms: z.number(), maxMs: z.number() });

export const PROCESS_SECRET = 'several processes share this secret';

/** A server in a process of its own, to be killed and started again on the same port. */
export interface ServerProcess {
  readonly address: string;
  readonly pid: number;
  /** SIGKILL, and waits until it is gone. */
  kill(): Promise<void>;
  /** Processor time used so far, s. */
  cpuS(): number;
  /** How late its event loop was since this was last asked; only of a watched one. */
  loopDelay(): Promise<{ p99Ms: number; maxMs: number }>;
  start(): Promise<void>;
  stop(): Promise<void>;
}

export async function startServerProcess(setup: {
  databaseUrl: string;
  redisUrl?: string;
  env?: Record<string, string>;
  /** Can be asked for its event loop's delay. */
  watched?: boolean;
}): Promise<ServerProcess> {
  const port = await anyFreePort('127.0.0.1');
  const address = `http://127.0.0.1:${port}`;
  let child: ChildProcess | null = null;
  let tellDelay: (delay: z.infer<typeof delaySchema>) => void = () => undefined;

  async function start(): Promise<void> {
    const watch = setup.watched === true ? ['--import', './tests/load/loop-delay.mjs'] : [];
    const started = spawn(process.execPath, ['--import', 'tsx', ...watch, path.join('server', 'main.ts')], {
      cwd: projectFolder,
      env: {
        PATH: process.env['PATH'],
        HOME: process.env['HOME'],
        DATABASE_URL: setup.databaseUrl,
        DATABASE_CONNECTIONS: '6',
        PORT: String(port),
        SIDEWASH_JWT_SECRET: PROCESS_SECRET,
        SIDEWASH_LOG: process.env['TEST_LOG'] ? 'stderr' : 'off',
        SIDEWASH_LOG_LEVEL: 'warn',
        ...(setup.redisUrl === undefined ? {} : { REDIS_URL: setup.redisUrl }),
        ...setup.env,
      },
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    child = started;
    let output = '';
    await new Promise<void>((resolve, reject) => {
      const take = (data: Buffer): void => {
        output += data.toString();
        if (output.includes('SIDEWASH_READY')) resolve();
        for (const [, json] of data.toString().matchAll(/^LOOP_DELAY (.*)$/gmu))
          tellDelay(delaySchema.parse(JSON.parse(json)));
      };
      started.stdout.on('data', take);
      started.stderr.on('data', (data: Buffer) => {
        if (process.env['TEST_LOG']) process.stderr.write(data);
        take(data);
      });
      started.once('exit', (code) => reject(new Error(`The server ended with ${code}:\n${output}`)));
    });
  }

  async function end(signal: NodeJS.Signals): Promise<void> {
    const ending = child;
    child = null;
    if (ending === null || ending.exitCode !== null) return;
    const gone = once(ending, 'exit');
    ending.kill(signal);
    await gone;
  }

  await start();
  return {
    address,
    get pid() {
      return child?.pid ?? -1;
    },
    kill: () => end('SIGKILL'),
    cpuS: () => {
      // Fields 14 and 15 behind the program's name in brackets: user and system time in hundredths.
      const fields = readFileSync(`/proc/${child?.pid ?? 0}/stat`, 'utf8')
        .split(') ')[1]
        .split(' ');
      return (Number(fields[11]) + Number(fields[12])) / 100;
    },
    loopDelay: () =>
      new Promise((resolve) => {
        tellDelay = resolve;
        child?.kill('SIGUSR2');
      }),
    start,
    stop: () => end('SIGTERM'),
  };
}

export interface RedisProcess {
  readonly url: string;
  restart(): Promise<void>;
  stop(): Promise<void>;
}

/** A Redis of its own on a free port; null where Debian's redis-server is not installed. */
export async function startRedis(): Promise<RedisProcess | null> {
  const program = findProgram(['redis-server']);
  if (program === undefined) return null;
  const port = await anyFreePort('127.0.0.1');
  const folder = mkdtempSync(path.join(os.tmpdir(), 'sidewash-redis-'));
  const args = ['--port', String(port), '--bind', '127.0.0.1', '--save', '', '--appendonly', 'no', '--dir', folder];
  let child: ChildProcess | null = null;
  const start = async (): Promise<void> => {
    const started = spawn(program, args, { stdio: ['ignore', 'pipe', 'ignore'] });
    child = started;
    await new Promise<void>((resolve, reject) => {
      let output = '';
      started.stdout.on('data', (data: Buffer) => {
        output += data.toString();
        if (output.includes('Ready to accept connections')) resolve();
      });
      started.once('exit', (code) => reject(new Error(`redis-server ended with ${code}:\n${output}`)));
    });
  };
  const stop = async (): Promise<void> => {
    const ending = child;
    child = null;
    if (ending === null) return;
    const gone = once(ending, 'exit');
    ending.kill('SIGTERM');
    await gone;
  };
  await start();
  return {
    url: `redis://127.0.0.1:${port}`,
    restart: async () => {
      await stop();
      await delay(500);
      await start();
    },
    stop: async () => {
      await stop();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
