import { type ChildProcess, spawn } from 'node:child_process';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { projectFolder } from '../../../server/bootstrap/paths.mjs';
import { anyFreePort } from '../../../server/bootstrap/ports.mjs';

/** The product as `npm start` runs it, in a process of its own. */
export interface LaunchedProduct {
  readonly address: string;
  readonly dataFolder: string;
  readonly port: number;
  readonly launcher: ChildProcess;
  /** Everything it printed so far. */
  output(): string;
  /** Ctrl-C, then waits until everything it started is gone; the exit code. Keeps the data folder. */
  stop(): Promise<number>;
}

/** What a start that ended by itself left: its exit code and all it printed. */
export interface EndedStart {
  readonly code: number;
  readonly output: string;
}

export interface LaunchOptions {
  /** Default: a fresh one under the system's temporary folder. */
  readonly dataFolder?: string;
  readonly port?: number;
  readonly env?: NodeJS.ProcessEnv;
  /** "npm": the command the README names, npm around it included; otherwise its script alone. */
  readonly command?: 'npm' | 'script';
}

const START_WITHIN_MS = 240_000;

/** A fresh empty folder for a product's data. */
export function freshDataFolder(): string {
  return fs.mkdtempSync(path.join(os.tmpdir(), 'sidewash-e2e-'));
}

/** Starts the product and waits until it says its address; rejects with its output when it ends before that. */
export async function launchProduct(options: LaunchOptions = {}): Promise<LaunchedProduct> {
  const start = await beginStart(options);
  const outcome = await Promise.race([start.address, start.ended]);
  if (typeof outcome !== 'string') {
    throw new Error(`The product ended with ${outcome.code} instead of starting:\n${outcome.output}`);
  }
  return {
    address: outcome,
    dataFolder: start.dataFolder,
    port: start.port,
    launcher: start.launcher,
    output: start.output,
    stop: async () => {
      interrupt(start.launcher);
      return (await start.ended).code;
    },
  };
}

/** Starts the product where it must refuse; resolves with how it ended. */
export async function expectStartToEnd(options: LaunchOptions): Promise<EndedStart> {
  const start = await beginStart(options);
  const outcome = await Promise.race([start.ended, start.address]);
  if (typeof outcome !== 'string') return outcome;
  interrupt(start.launcher);
  await start.ended;
  throw new Error(`The product started at ${outcome} although it should have refused.`);
}

/** Ctrl-C as a terminal does it: to the whole group, so that npm's and the script's both get it. */
function interrupt(launcher: ChildProcess): void {
  if (launcher.pid !== undefined && launcher.exitCode === null) process.kill(-launcher.pid, 'SIGINT');
}

async function beginStart({ dataFolder = freshDataFolder(), port, env, command = 'script' }: LaunchOptions) {
  const usedPort = port ?? (await anyFreePort('127.0.0.1'));
  const [program, ...args] =
    command === 'npm'
      ? ['npm', 'start']
      : [process.execPath, path.join(projectFolder, 'server', 'bootstrap', 'start.mjs')];
  const launcher = spawn(program, args, {
    cwd: projectFolder,
    detached: true,
    env: {
      ...withoutTestSettings(process.env),
      SIDEWASH_DATA: dataFolder,
      PORT: String(usedPort),
      ...env,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  const address = new Promise<string>((resolve) => {
    const take = (data: Buffer) => {
      output += data.toString();
      const match = /^Sidewash is at (\S+)$/m.exec(output);
      if (match) resolve(match[1]);
    };
    launcher.stdout.on('data', take);
    launcher.stderr.on('data', take);
  });
  const late = setTimeout(() => interrupt(launcher), START_WITHIN_MS);
  void address.then(() => clearTimeout(late));
  const ended = new Promise<EndedStart>((resolve) => {
    launcher.once('close', (code) => {
      clearTimeout(late);
      resolve({ code: code ?? 1, output });
    });
  });
  return { launcher, dataFolder, port: usedPort, address, ended, output: () => output };
}

/** The product under test is a product, not a test: what the test runner set must not reach it. */
function withoutTestSettings(env: NodeJS.ProcessEnv): NodeJS.ProcessEnv {
  const names = Object.keys(env).filter(
    (name) => !/^(VITEST|NODE_ENV$|NODE_OPTIONS$|DATABASE_URL$|DEV$|PROD$)/.test(name),
  );
  return Object.fromEntries(names.map((name) => [name, env[name]]));
}
