import { randomBytes } from 'node:crypto';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import { createConnection } from 'mysql2/promise';
import { CSRF_COOKIE, CSRF_HEADER } from '#shared/contracts/wire-names.ts';
import { createApp } from '../../server/app.ts';
import { createLog } from '../../server/config/log.ts';
import { projectFolder } from '../../server/config/project-folder.ts';
import { type Database, openDatabase } from '../../server/data/database.ts';
import { DEMONSTRATION } from '../../server/data/seeds/demonstration-people.ts';
import { seedEmptyDatabase } from '../../server/data/seeds/seed-empty-database.ts';
import { attachSockets } from '../../server/realtime/sockets.ts';
import { createServices, type Services } from '../../server/services/create-services.ts';

/** An answer with its body read: JSON where it is, text otherwise. */
export interface Answer {
  status: number;
  headers: Headers;
  body: unknown;
  bytes: Buffer;
}
export interface CallSetup {
  json?: unknown;
  bytes?: Uint8Array;
  type?: string;
  headers?: Record<string, string>;
}
export interface Client {
  (method: string, address: string, setup?: CallSetup): Promise<Answer>;
  /** The cookie header of this browser. */
  cookie(): string;
}

export interface TestServer {
  address: string;
  url: string;
  database: Database;
  services: Services;
  /** A browser of its own, signed in as one of the demonstration people (or a whole address), or as nobody. */
  client(mailbox?: string): Promise<Client>;
  /** Rows of a plain SQL statement. */
  sql(statement: string, values?: unknown[]): Promise<Record<string, unknown>[]>;
  close(): Promise<void>;
}

/** A database of its own name on the server of DATABASE_URL. */
export async function freshDatabase(): Promise<{ url: string; drop: () => Promise<void> }> {
  const base = process.env.DATABASE_URL;
  if (base === undefined)
    throw new Error('DATABASE_URL is not set; the global setup of the integration tests sets it.');
  const name = `sidewash_test_${randomBytes(6).toString('hex')}`;
  const run = async (statement: string): Promise<void> => {
    const connection = await createConnection(base);
    await connection.query(statement);
    await connection.end();
  };
  await run(`CREATE DATABASE ${name} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`);
  const url = new URL(base);
  url.pathname = `/${name}`;
  return { url: url.href, drop: () => run(`DROP DATABASE ${name}`) };
}

/** The whole HTTP half over a real, seeded database. */
export async function startTestServer(setup: { now?: () => Date; seed?: boolean } = {}): Promise<TestServer> {
  const fresh = await freshDatabase();
  const { database } = await openDatabase({ url: fresh.url, connections: 6 });
  const services = createServices({ database, tokenSecret: 'test '.repeat(10), now: setup.now });
  if (setup.seed !== false) {
    const folder = path.join(projectFolder, 'scenarios');
    await seedEmptyDatabase({ database, folder, hashPassword: services.passwords.hash, now: () => new Date() });
  }
  const log = createLog({ log: process.env.TEST_LOG ? 'stderr' : 'off', logLevel: 'warn', dataFolder: '' });
  const env = { publicOrigins: [], secureCookies: false, proxies: 0, dev: false };
  const http = createServer((request, response) => void app(request, response));
  const app = createApp({ services, log, env });
  const { sessions, classes } = services;
  const sockets = attachSockets({ http, sessions, classes, log, publicOrigins: [] });
  await new Promise<void>((resolve) => http.listen(0, '127.0.0.1', resolve));
  const address = `http://127.0.0.1:${(http.address() as AddressInfo).port}`; // listens on a port, not on a pipe
  return {
    address,
    url: fresh.url,
    database,
    services,
    client: (mailbox) => openClient(address, mailbox),
    sql: async (statement, values = []) => {
      const connection = await createConnection(fresh.url);
      try {
        const [rows] = await connection.query(statement, values);
        return rows as Record<string, unknown>[]; // select statements give rows
      } finally {
        await connection.end();
      }
    },
    close: async () => {
      http.closeAllConnections();
      await sockets.close();
      await services.close();
      await database.close();
      await fresh.drop();
    },
  };
}

export async function openClient(address: string, mailbox: string | undefined): Promise<Client> {
  const cookies = new Map<string, string>();
  const cookie = (): string => [...cookies].map(([name, value]) => `${name}=${value}`).join('; ');
  const ask = async (method: string, where: string, setup: CallSetup = {}): Promise<Answer> => {
    const { json, bytes, type, headers = {} } = setup;
    const sent: Record<string, string> = {
      cookie: cookie(),
      [CSRF_HEADER]: decodeURIComponent(cookies.get(CSRF_COOKIE) ?? ''),
      origin: address,
      ...headers,
    };
    if (json !== undefined) sent['content-type'] = 'application/json';
    else if (bytes !== undefined) sent['content-type'] = type ?? 'application/octet-stream';
    const body = json !== undefined ? JSON.stringify(json) : bytes === undefined ? null : new Uint8Array(bytes);
    const response = await fetch(address + where, { method, headers: sent, body });
    for (const cookie of response.headers.getSetCookie()) {
      const [pair] = cookie.split(';');
      const at = pair.indexOf('=');
      cookies.set(pair.slice(0, at), pair.slice(at + 1));
    }
    const received = Buffer.from(await response.arrayBuffer());
    const isJson = (response.headers.get('content-type') ?? '').includes('json');
    const text = received.toString('utf8');
    const read: unknown = isJson && text !== '' ? JSON.parse(text) : text;
    return { status: response.status, headers: response.headers, body: read, bytes: received };
  };
  const call: Client = Object.assign(ask, { cookie });
  await call('GET', '/api/session');
  if (mailbox !== undefined) {
    const json = {
      email: mailbox.includes('@') ? mailbox : `${mailbox}@${DEMONSTRATION.domain}`,
      password: DEMONSTRATION.password,
    };
    const answer = await call('POST', '/api/session', { json });
    if (answer.status !== 200) throw new Error(`Signing in as ${mailbox} answered ${answer.status}.`);
  }
  return call;
}
