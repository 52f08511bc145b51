import fs from 'node:fs';
import net from 'node:net';
import path from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { isStale, sourceHash } from '../../../server/bootstrap/builds.mjs';
import { prepareDataFolder } from '../../../server/bootstrap/data-folder.mjs';
import { checkDatabaseAddress } from '../../../server/bootstrap/database-address.mjs';
import { ensureProgram, MARIADB_SERVER } from '../../../server/bootstrap/debian-packages.mjs';
import { checkNodeVersion } from '../../../server/bootstrap/node-version.mjs';
import { packagesMatchLock } from '../../../server/bootstrap/npm-packages.mjs';
import { anyFreePort, nextFreePort, portIsFree } from '../../../server/bootstrap/ports.mjs';
import { temporaryFolder } from './temporary-folder.ts';

describe('Node', () => {
  it.each(['20.19.0', '20.20.2', '22.12.0', '24.1.0'])('%s will do', (version) => {
    expect(() => checkNodeVersion(version)).not.toThrow();
  });

  it.each(['18.20.4', '20.18.3', '21.7.0', '22.11.0'])('%s is refused with what to install', (version) => {
    expect(() => checkNodeVersion(version)).toThrow(/^Node \S+ is not one .* install Node 20\.19 .*\.$/);
  });
});

describe('the data folder', () => {
  it('is made, for this user alone', () => {
    const folder = path.join(temporaryFolder(), 'a', 'b');
    prepareDataFolder(folder);
    expect(fs.statSync(path.join(folder, 'run')).mode & 0o777).toBe(0o700);
  });

  it('is refused when it cannot be written', () => {
    const parent = temporaryFolder();
    fs.chmodSync(parent, 0o555);
    const folder = path.join(parent, 'data');
    expect(() => asOrdinaryUser(() => prepareDataFolder(folder))).toThrow(
      `The data folder ${folder} cannot be written (permission denied); give this user write permission to it, ` +
        'or name another folder with SIDEWASH_DATA.',
    );
  });

  it('is refused when a file is in its place', () => {
    const file = path.join(temporaryFolder(), 'file');
    fs.writeFileSync(file, '');
    expect(() => prepareDataFolder(file)).toThrow(/cannot be written .*SIDEWASH_DATA/);
  });

  it('is refused when it is nearly full', () => {
    expect(() => prepareDataFolder(temporaryFolder(), 1e18)).toThrow(
      /is full: \d+ MB free, .* needed; free some space/,
    );
  });
});

describe("Debian's packages", () => {
  const nothing = { find: () => undefined, run: async () => ({ code: 0, output: '' }), isRoot: true };

  it('are not asked for when the program is there', async () => {
    const find = (names: string[]) => (names[0] === 'mariadbd' ? '/usr/sbin/mariadbd' : undefined);
    expect(await ensureProgram(MARIADB_SERVER, { ...nothing, find })).toBe('/usr/sbin/mariadbd');
  });

  it('cannot be had without apt-get', async () => {
    await expect(ensureProgram(MARIADB_SERVER, nothing)).rejects.toThrow(/no apt-get .* DATABASE_URL=/);
  });

  it('cannot be had by a user without rights, who is told the command', async () => {
    const find = (names: string[]) => (names[0] === 'mariadbd' ? undefined : `/bin/${names[0]}`);
    const run = async () => ({ code: 1, output: 'a password is required' });
    await expect(ensureProgram(MARIADB_SERVER, { find, run, isRoot: false })).rejects.toThrow(
      /may not install Debian packages; run "sudo apt-get install mariadb-server-core mariadb-client-core" once/,
    );
  });

  it.each([
    [true, []],
    [false, ['/bin/sudo', '-n', 'env', 'DEBIAN_FRONTEND=noninteractive']],
  ])('are installed when permitted (root: %s)', async (isRoot, prefix) => {
    const calls: string[][] = [];
    const find = (names: string[]) =>
      names[0] !== 'mariadbd'
        ? `/bin/${names[0]}`
        : calls.some((call) => call.includes('install'))
          ? '/new'
          : undefined;
    const run = async (program: string, args: string[]) => {
      calls.push([program, ...args]);
      return { code: 0, output: '' };
    };
    expect(await ensureProgram(MARIADB_SERVER, { find, run, isRoot })).toBe('/new');
    expect(calls.at(-1)).toEqual([
      ...prefix,
      ...['/bin/apt-get', '-q', '-y', '--no-install-recommends', 'install'],
      ...['mariadb-server-core', 'mariadb-client-core'],
    ]);
  });

  it('say why when they cannot be installed', async () => {
    const find = (names: string[]) => (names[0] === 'mariadbd' ? undefined : `/bin/${names[0]}`);
    const run = async () => ({ code: 100, output: 'E: Unable to locate package' });
    const refusal = ensureProgram(MARIADB_SERVER, { find, run, isRoot: true });
    await expect(refusal).rejects.toThrow(/failed \(apt-get ended with 100\)/);
    await expect(refusal).rejects.toMatchObject({ details: ['E: Unable to locate package'] });
  });
});

describe('DATABASE_URL', () => {
  it('is accepted when a database answers', async () => {
    await expect(checkDatabaseAddress(String(process.env.DATABASE_URL))).resolves.toBeUndefined();
  });

  it.each(['nonsense', 'postgres://u:p@127.0.0.1/x', 'mysql://u:p@127.0.0.1:3306/'])('%s is refused', async (url) => {
    await expect(checkDatabaseAddress(url)).rejects.toThrow(/not the address .* write it as mysql:/);
  });

  it('is refused when nothing listens there', async () => {
    const port = await anyFreePort('127.0.0.1');
    await expect(checkDatabaseAddress(`mysql://u:p@127.0.0.1:${port}/x`)).rejects.toThrow(
      `No database answers at 127.0.0.1:${port}, which DATABASE_URL names (ECONNREFUSED); ` +
        'start that server or correct DATABASE_URL, or unset it to use the private database.',
    );
  });

  it('is refused when something else answers, or nothing', async () => {
    const talker = await listen((socket) => socket.end('HTTP/1.1 400 Bad Request\r\n\r\n'));
    await expect(checkDatabaseAddress(`mysql://u:p@127.0.0.1:${talker}/x`)).rejects.toThrow(/is not a database/);
    const silent = await listen(() => undefined);
    await expect(checkDatabaseAddress(`mysql://u:p@127.0.0.1:${silent}/x`, 100)).rejects.toThrow(/no answer within/);
  });
});

describe('ports', () => {
  it('one in use is seen, and the next free one found', async () => {
    const taken = await listen(() => undefined);
    expect(await portIsFree('127.0.0.1', taken)).toBe(false);
    expect(await nextFreePort('127.0.0.1', taken)).toBeGreaterThan(taken);
  });
});

describe('npm packages', () => {
  it('match when each package of the lock file is installed in its version, optional ones apart', () => {
    const folder = temporaryFolder();
    fs.mkdirSync(path.join(folder, 'node_modules'));
    const write = (file: string, packages: unknown) =>
      fs.writeFileSync(path.join(folder, file), JSON.stringify({ packages }));
    const own = { '': {}, 'node_modules/a': { version: '1.0.0' } };
    write('package-lock.json', { ...own, 'node_modules/other-machine': { version: '2.0.0', optional: true } });
    expect(packagesMatchLock(folder)).toBe(false);
    write('node_modules/.package-lock.json', { 'node_modules/a': { version: '1.0.0' } });
    expect(packagesMatchLock(folder)).toBe(true);
    write('package-lock.json', { 'node_modules/a': { version: '1.0.1' } });
    expect(packagesMatchLock(folder)).toBe(false);
    write('package-lock.json', { ...own, 'node_modules/b': { version: '1.0.0' } });
    expect(packagesMatchLock(folder)).toBe(false);
  });
});

describe('a build', () => {
  it('is stale without its product, after a change of a source, and not after a change of a start script', () => {
    const folder = temporaryFolder();
    const put = (file: string, text: string) => {
      fs.mkdirSync(path.dirname(path.join(folder, file)), { recursive: true });
      fs.writeFileSync(path.join(folder, file), text);
    };
    const build = {
      name: 'server',
      sources: ['server', 'absent.ts'],
      viteArguments: [],
      product: 'dist/server/main.js',
    };
    put('server/main.ts', 'one');
    expect(isStale(folder, build)).toBe(true);
    put('dist/server/main.js', 'built');
    put('dist/built-server.sha256', sourceHash(folder, build.sources));
    expect(isStale(folder, build)).toBe(false);
    put('server/bootstrap/start.mjs', 'changed');
    expect(isStale(folder, build)).toBe(false);
    put('server/main.ts', 'two');
    expect(isStale(folder, build)).toBe(true);
    put('server/main.ts', 'one');
    put('server/more.ts', 'new');
    expect(isStale(folder, build)).toBe(true);
  });
});

/** Runs an action without root's rights, which ignore permission bits. */
function asOrdinaryUser(action: () => void): void {
  if (process.geteuid?.() !== 0) return action();
  process.seteuid?.(65_534);
  try {
    action();
  } finally {
    process.seteuid?.(0);
  }
}

async function listen(onConnection: (socket: net.Socket) => void): Promise<number> {
  const sockets = new Set<net.Socket>();
  const server = net.createServer((socket) => {
    sockets.add(socket);
    onConnection(socket);
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  onTestFinished(() => {
    for (const socket of sockets) socket.destroy();
    server.close();
  });
  const address = server.address();
  return typeof address === 'object' && address !== null ? address.port : 0;
}
