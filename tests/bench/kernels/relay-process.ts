import { type ChildProcess, spawn } from 'node:child_process';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { projectFolder } from '../../../server/bootstrap/paths.mjs';

/** The bare relay in a process of its own. */
export async function startRelay(): Promise<{ address: string; cpuS: () => number; stop: () => void }> {
  const child: ChildProcess = spawn(
    process.execPath,
    ['--import', 'tsx', path.join('tests', 'bench', 'kernels', 'bare-relay.ts')],
    { cwd: projectFolder, stdio: ['ignore', 'pipe', 'inherit'] },
  );
  const port = await new Promise<string>((resolve, reject) => {
    child.stdout?.on('data', (data: Buffer) => {
      const match = /^READY (\d+)/u.exec(data.toString());
      if (match) resolve(match[1]);
    });
    child.once('exit', (code) => reject(new Error(`The relay ended with ${code}.`)));
  });
  return {
    address: `http://127.0.0.1:${port}`,
    cpuS: () => {
      const fields = readFileSync(`/proc/${child.pid}/stat`, 'utf8').split(') ')[1].split(' ');
      return (Number(fields[11]) + Number(fields[12])) / 100;
    },
    stop: () => child.kill('SIGTERM'),
  };
}
