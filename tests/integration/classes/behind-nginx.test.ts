/** The deployment of the README: its nginx configuration in front of two processes, and its systemd unit. */
import { type ChildProcess, execFileSync, spawn } from 'node:child_process';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { classPassSchema } from '#shared/contracts/classes.ts';
import { projectFolder } from '../../../server/bootstrap/paths.mjs';
import { anyFreePort } from '../../../server/bootstrap/ports.mjs';
import { findProgram } from '../../../server/bootstrap/programs.mjs';
import { ClassClient, play, until } from '../../support/class-client.ts';
import { startRedis, startServerProcess, type RedisProcess, type ServerProcess } from '../../support/server-process.ts';
import { freshDatabase, openClient } from '../../support/test-server.ts';

const readme = fs.readFileSync(path.join(projectFolder, 'README.md'), 'utf8');
const block = (language: string): string => {
  const found = new RegExp(`\`\`\`${language}\n([\\s\\S]*?)\n\`\`\``, 'u').exec(readme)?.[1];
  if (found === undefined) throw new Error(`The README has no ${language} block.`);
  return found;
};
const nginx = findProgram(['nginx', '/usr/sbin/nginx']);
const analyze = findProgram(['systemd-analyze']);
const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'sidewash-nginx-'));
const servers: ServerProcess[] = [];
const clients: ClassClient[] = [];
let fresh: Awaited<ReturnType<typeof freshDatabase>>;
let redis: RedisProcess | null = null;
let proxy: ChildProcess | null = null;

/** The README's configuration with the ports of this test, and without the certificate. */
function configuration(port: number, upstreams: readonly string[]): string {
  const own = block('nginx')
    .replace('listen 443 ssl;', `listen 127.0.0.1:${port};`)
    .replace(/^\s*ssl_certificate.*$/gmu, '')
    .replace('127.0.0.1:5181', upstreams[0])
    .replace('127.0.0.1:5182', upstreams[1]);
  return `daemon off; pid ${folder}/pid; error_log ${folder}/error.log warn; worker_processes 1;
events {}
http { access_log ${folder}/access.log; client_body_temp_path ${folder}/body; proxy_temp_path ${folder}/proxy;
fastcgi_temp_path ${folder}/f; uwsgi_temp_path ${folder}/u; scgi_temp_path ${folder}/s;
log_format which '$upstream_addr'; access_log ${folder}/which.log which;
${own}
}`;
}

beforeAll(async () => {
  fresh = await freshDatabase();
  redis = await startRedis();
});
afterAll(async () => {
  for (const client of clients) client.close();
  proxy?.kill('SIGQUIT');
  for (const server of servers) await server.stop();
  await redis?.stop();
  await fresh.drop();
  fs.rmSync(folder, { recursive: true, force: true });
});

describe('the deployment of the README', () => {
  it('serves one class through nginx by two processes; each browser keeps its process; one that is killed is passed over', async (context) => {
    if (nginx === undefined || redis === null) return context.skip('nginx or redis-server is not installed');
    const port = await anyFreePort('127.0.0.1');
    const address = `http://127.0.0.1:${port}`;
    const env = { SIDEWASH_PROXIES: '1', SIDEWASH_ORIGIN: address };
    for (let i = 0; i < 2; i += 1)
      servers.push(await startServerProcess({ databaseUrl: fresh.url, redisUrl: redis.url, env }));
    const file = path.join(folder, 'nginx.conf');
    const hosts = servers.map(({ address }) => new URL(address).host);
    fs.writeFileSync(file, configuration(port, hosts));
    execFileSync(nginx, ['-t', '-e', `${folder}/start.log`, '-c', file], { stdio: 'pipe' });
    proxy = spawn(nginx, ['-e', `${folder}/start.log`, '-c', file], { stdio: 'ignore' });
    await expect
      .poll(() =>
        fetch(`${address}/api/session`).then(
          ({ status }) => status,
          () => 0,
        ),
      )
      .toBe(401);

    const http = await openClient(address, 'm.okafor');
    const json = { title: 'Behind nginx', playlist: [{ scenarioSlug: 'rudder-ratio-stuck' }], seats: 12 };
    const opened = await http('POST', '/api/classes', { json });
    expect(opened.status).toBe(201);
    const pass = classPassSchema.parse(opened.body);
    const instructor = new ClassClient(http, address, pass.classId);
    clients.push(instructor);
    await instructor.connect();
    // The cookie decides the process: some windows of one trainee or another fall on either.
    const trainees: ClassClient[] = [];
    for (const mailbox of ['j.lindqvist', 'a.bauer', 's.chandran']) {
      const own = await openClient(address, mailbox);
      expect((await own('POST', '/api/classes/join', { json: { code: pass.joinCode } })).status).toBe(200);
      const one = new ClassClient(own, address, pass.classId);
      clients.push(one);
      trainees.push(await one.connect());
    }
    await instructor.control({ deed: 'start', countdownS: 0.3 });
    await until(() => trainees.every(({ state }) => state.run !== null));
    const flight = await instructor.takeControls(true);
    for (const one of trainees) await one.follow(instructor.run.attempt ?? '');
    await play([instructor, ...trainees], 1500);
    const same = (): void => {
      for (const one of trainees) {
        const seen = one.follower?.line.run;
        flight.line.standAt(seen?.tick ?? 0);
        expect(seen?.tick).toBeGreaterThan(60);
        expect(seen?.stateHash()).toBe(flight.line.run.stateHash());
      }
    };
    same();

    await servers[0].kill();
    await play([instructor, ...trainees], 1500);
    // Everybody is back at the process that is left, through the same address.
    await until(() => [instructor, ...trainees].every(({ socket }) => socket.connected), 20_000);
    await instructor.control({ deed: 'message', text: 'One process is gone' });
    await until(() => trainees.every(({ state }) => state.messages.length === 1), 10_000);
    await play([instructor, ...trainees], 1500);
    same();
    const which = fs.readFileSync(path.join(folder, 'which.log'), 'utf8');
    expect(which).toContain(hosts[1]);
    expect(trainees.flatMap(({ differences }) => differences)).toEqual([]);
  }, 120_000);

  it('has a unit that systemd finds nothing wrong with', (context) => {
    if (analyze === undefined) return context.skip('systemd-analyze is not installed');
    const unit = path.join(folder, 'sidewash@.service');
    // Paths of the installed product, which are not here.
    const own = block('ini')
      .replace('WorkingDirectory=/opt/sidewash', `WorkingDirectory=${projectFolder}`)
      .replace('/usr/bin/node', process.execPath)
      .replace('User=sidewash', 'User=nobody');
    fs.writeFileSync(unit, own);
    let said = '';
    try {
      said = execFileSync(analyze, ['verify', '--man=no', '--recursive-errors=no', unit], {
        encoding: 'utf8',
        stdio: ['ignore', 'pipe', 'pipe'],
      });
    } catch (error) {
      said = error instanceof Error ? error.message : String(error);
    }
    expect(said.split('\n').filter((line) => line.includes('sidewash@'))).toEqual([]);
  });
});
