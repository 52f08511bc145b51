/**
 * A bad network of the project's own: the clients here, a door to the server in another network namespace, and between
 * them a tunnel whose every packet is late and some are lost. What TCP makes of it is the kernel's own doing.
 * Needs the rights of an administrator, and Debian's iproute2 and socat.
 */
import { type ChildProcess, execFileSync, spawn } from 'node:child_process';
import path from 'node:path';
import { projectFolder } from '../../server/bootstrap/paths.mjs';

export interface LossyNetwork {
  /** Where clients of this namespace reach the server through the bad network. */
  address: string;
  /** Packets that the tunnel has carried and lost so far. */
  counts(): { carried: number; lost: number };
  stop(): void;
}

const PORT = 4789;
const DOOR = 5180;

/**
 * @param target   Address of the server, on loopback.
 * @param delayMs  Delay of each packet, each way.
 * @returns        Null where there are no rights or no tunnels for it; the reason was printed.
 */
export async function openLossyNetwork(
  target: string,
  { delayMs, lossShare, seed, seconds }: { delayMs: number; lossShare: number; seed: number; seconds: number },
): Promise<LossyNetwork | null> {
  const { port } = new URL(target);
  const mark = String(process.pid % 10_000);
  const far = `swf${mark}`;
  const middle = `swm${mark}`;
  const children: ChildProcess[] = [];
  const run = (...words: string[]): void => void execFileSync('ip', words, { stdio: ['ignore', 'ignore', 'pipe'] });
  const stop = (): void => {
    for (const child of children) child.kill('SIGTERM');
    for (const undo of [
      ['link', 'del', `swa${mark}`],
      ['link', 'del', `swd${mark}`],
      ['netns', 'del', far],
      ['netns', 'del', middle],
    ]) {
      try {
        run(...undo);
      } catch {
        // It was not made.
      }
    }
  };
  const script = async (namespace: string, name: string, ...words: string[]): Promise<ChildProcess> => {
    const file = path.join(projectFolder, 'tests', 'load', name);
    const child = spawn('ip', ['netns', 'exec', namespace, process.execPath, file, ...words], {
      stdio: ['ignore', 'pipe', 'inherit'],
    });
    children.push(child);
    await new Promise<void>((resolve, reject) => {
      child.stdout.once('data', () => resolve());
      child.once('exit', (code) => reject(new Error(`${name} ended with ${code}`)));
    });
    return child;
  };
  /** A device whose packets go to the relay, and come from it, as they are. */
  const tunnel = (within: string[], own: string, from: string, to: string): void => {
    const device = `TUN:${own}/24,tun-type=tun,iff-no-pi,iff-up`;
    const words = [
      ...within,
      'timeout',
      String(seconds),
      'socat',
      device,
      `UDP4-DATAGRAM:${to}:${PORT},bind=${from}:${PORT}`,
    ];
    children.push(spawn(words[0], words.slice(1), { stdio: ['ignore', 'ignore', 'inherit'] }));
  };
  let carried = 0;
  let lost = 0;
  try {
    for (const namespace of [far, middle]) {
      run('netns', 'add', namespace);
      run('-n', namespace, 'link', 'set', 'lo', 'up');
    }
    // Two cables to the relay in the middle, and a third by which the door reaches the server undisturbed.
    run('link', 'add', 'name', `swa${mark}`, 'type', 'veth', 'peer', 'name', 'a', 'netns', middle);
    run('link', 'add', 'name', 'b', 'netns', far, 'type', 'veth', 'peer', 'name', 'b', 'netns', middle);
    run('link', 'add', 'name', `swd${mark}`, 'type', 'veth', 'peer', 'name', 'd', 'netns', far);
    run('address', 'add', '10.77.1.2/24', 'dev', `swa${mark}`);
    run('-n', middle, 'address', 'add', '10.77.1.1/24', 'dev', 'a');
    run('-n', middle, 'address', 'add', '10.77.2.1/24', 'dev', 'b');
    run('-n', far, 'address', 'add', '10.77.2.2/24', 'dev', 'b');
    run('address', 'add', '10.77.3.1/24', 'dev', `swd${mark}`);
    run('-n', far, 'address', 'add', '10.77.3.2/24', 'dev', 'd');
    run('link', 'set', 'dev', `swa${mark}`, 'up');
    run('link', 'set', 'dev', `swd${mark}`, 'up');
    for (const [namespace, device] of [
      [middle, 'a'],
      [middle, 'b'],
      [far, 'b'],
      [far, 'd'],
    ])
      run('-n', namespace, 'link', 'set', 'dev', device, 'up');
    const ends = ['10.77.1.1', '10.77.2.1', '10.77.1.2', '10.77.2.2'];
    const numbers = [delayMs, lossShare, seed, seconds].map(String);
    const relay = await script(middle, 'packet-relay.mjs', String(PORT), ...ends, ...numbers);
    relay.stdout?.on('data', (data: Buffer) => {
      const found = [...data.toString().matchAll(/^RELAY (\d+) (\d+)$/gmu)].at(-1);
      if (found) [carried, lost] = [Number(found[1]), Number(found[2])];
    });
    tunnel([], '10.78.0.1', '10.77.1.2', '10.77.1.1');
    tunnel(['ip', 'netns', 'exec', far], '10.78.0.2', '10.77.2.2', '10.77.2.1');
    // The server listens on loopback alone: a door here, one there.
    await localDoor(children, port, seconds);
    await script(far, 'tcp-door.mjs', '10.78.0.2', String(DOOR), '10.77.3.1', port, String(seconds));
    return { address: `http://10.78.0.2:${DOOR}`, counts: () => ({ carried, lost }), stop };
  } catch (error) {
    stop();
    console.log(`No network of its own: ${error instanceof Error ? error.message.trim() : String(error)}`);
    return null;
  }
}

async function localDoor(children: ChildProcess[], port: string, seconds: number): Promise<void> {
  const file = path.join(projectFolder, 'tests', 'load', 'tcp-door.mjs');
  const child = spawn(process.execPath, [file, '10.77.3.1', port, '127.0.0.1', port, String(seconds)], {
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  children.push(child);
  await new Promise<void>((resolve, reject) => {
    child.stdout.once('data', () => resolve());
    child.once('exit', (code) => reject(new Error(`tcp-door.mjs ended with ${code}`)));
  });
}
