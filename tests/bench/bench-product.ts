/** The HTTP half of the product over a scratch database of its own, for rows that measure the server. */
import fs from 'node:fs';
import { createServer, type RequestListener } from 'node:http';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import { CSRF_COOKIE, CSRF_HEADER } from '#shared/contracts/wire-names.ts';
import { createApp } from '../../server/app.ts';
import { prepareDataFolder } from '../../server/bootstrap/data-folder.mjs';
import { startMariadb } from '../../server/bootstrap/mariadb.mjs';
import { createLog } from '../../server/config/log.ts';
import { projectFolder } from '../../server/config/project-folder.ts';
import { openDatabase } from '../../server/data/database.ts';
import { DEMONSTRATION } from '../../server/data/seeds/demonstration-people.ts';
import { seedEmptyDatabase } from '../../server/data/seeds/seed-empty-database.ts';
import { createServices } from '../../server/services/create-services.ts';
import { freshDataFolder } from '../e2e/support/product.ts';
import type { BenchContext } from './harness.ts';

type CleanUp = BenchContext['cleanUp'];

export interface BenchProduct {
  address: string;
  databaseUrl: string;
  /** Headers of somebody signed in, also for requests that change something. */
  headers: Record<string, string>;
}

/** @param mailbox who is signed in; the engineer when absent */
export async function startBenchProduct(cleanUp: CleanUp, mailbox = 'a.reyes'): Promise<BenchProduct> {
  const dataFolder = freshDataFolder();
  cleanUp(() => fs.rmSync(dataFolder, { recursive: true, force: true }));
  prepareDataFolder(dataFolder);
  const mariadb = await startMariadb({ dataFolder, say: () => undefined });
  cleanUp(() => mariadb.stop());
  const { database } = await openDatabase({ url: mariadb.url, connections: 10 });
  cleanUp(() => database.close());
  const services = createServices({ database, tokenSecret: 'bench '.repeat(8) });
  cleanUp(() => services.close());
  await seedEmptyDatabase({
    database,
    folder: path.join(projectFolder, 'scenarios'),
    hashPassword: services.passwords.hash,
    now: () => new Date(),
  });
  const env = { publicOrigins: [], secureCookies: false, proxies: 0, dev: false };
  const app = createApp({ services, log: createLog({ log: 'off', logLevel: 'error', dataFolder: '' }), env });
  const address = await listen((request, response) => void app(request, response), cleanUp);
  return { address, databaseUrl: mariadb.url, headers: await signIn(address, mailbox) };
}

/** Serves a handler on a free port until the row is over. */
export async function listen(handler: RequestListener, cleanUp: CleanUp): Promise<string> {
  const server = createServer(handler);
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  cleanUp(() => {
    server.closeAllConnections();
    return new Promise((resolve) => server.close(resolve));
  });
  return `http://127.0.0.1:${(server.address() as AddressInfo).port}`; // listens on a port, not on a pipe
}

async function signIn(address: string, mailbox: string): Promise<Record<string, string>> {
  const cookies = new Map<string, string>();
  const take = (response: Response): void => {
    for (const cookie of response.headers.getSetCookie()) {
      const [name, value] = cookie.split(';')[0].split('=');
      cookies.set(name, value);
    }
  };
  const headers = (): Record<string, string> => ({
    cookie: [...cookies].map(([name, value]) => `${name}=${value}`).join('; '),
    origin: address,
    'content-type': 'application/json',
    [CSRF_HEADER]: decodeURIComponent(cookies.get(CSRF_COOKIE) ?? ''),
  });
  take(await fetch(`${address}/api/session`));
  const body = JSON.stringify({ email: `${mailbox}@${DEMONSTRATION.domain}`, password: DEMONSTRATION.password });
  const answer = await fetch(`${address}/api/session`, { method: 'POST', headers: headers(), body });
  if (!answer.ok) throw new Error(`Signing in answered ${answer.status}.`);
  take(answer);
  return headers();
}
