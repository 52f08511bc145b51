/** A class with many members for load scripts and bench rows: guests over real HTTP and real sockets. */
import fs from 'node:fs';
import { io, type Socket } from 'socket.io-client';
import { createConnection } from 'mysql2/promise';
import { classPassSchema, type ClassPass } from '#shared/contracts/classes.ts';
import type { AttemptHold, Entered } from '#shared/contracts/class-socket.ts';
import type { ClientEvents, ServerEvents } from '#shared/contracts/socket-events.ts';
import { CSRF_COOKIE, CSRF_HEADER, GUEST_COOKIE } from '#shared/contracts/wire-names.ts';
import type { ClassMode } from '#shared/scenario/class-log.ts';
import { prepareDataFolder } from '../../server/bootstrap/data-folder.mjs';
import { startMariadb } from '../../server/bootstrap/mariadb.mjs';
import { freshDataFolder } from '../e2e/support/product.ts';
import { ClassClient } from '../support/class-client.ts';
import { startServerProcess, type ServerProcess } from '../support/server-process.ts';
import { openClient, type Client } from '../support/test-server.ts';

export type CleanUp = (action: () => unknown) => void;

export interface LoadProduct {
  server: ServerProcess;
  databaseUrl: string;
  sql(statement: string, values?: unknown[]): Promise<Record<string, unknown>[]>;
  /** Kills MariaDB and starts it again on the same port. */
  restartDatabase(): Promise<void>;
}

/** A server process over a database of its own whose organisation lets guests in. */
export async function startLoadProduct(cleanUp: CleanUp, redisUrl?: string): Promise<LoadProduct> {
  const dataFolder = freshDataFolder();
  cleanUp(() => fs.rmSync(dataFolder, { recursive: true, force: true }));
  prepareDataFolder(dataFolder);
  let mariadb = await startMariadb({ dataFolder, say: () => undefined });
  cleanUp(() => mariadb.stop());
  const databaseUrl = mariadb.url;
  const server = await startServerProcess({ databaseUrl, redisUrl, watched: true });
  cleanUp(() => server.stop());
  const sql = async (statement: string, values: unknown[] = []): Promise<Record<string, unknown>[]> => {
    const connection = await createConnection(databaseUrl);
    try {
      const [rows] = await connection.query(statement, values);
      return rows as Record<string, unknown>[]; // selects give rows
    } finally {
      await connection.end();
    }
  };
  await sql(`UPDATE organisation SET settings = JSON_SET(settings, '$.guests', true)`);
  const restartDatabase = async (): Promise<void> => {
    process.kill(mariadb.identity.pid, 'SIGKILL');
    await mariadb.exited;
    mariadb = await startMariadb({ dataFolder, say: () => undefined });
    if (mariadb.url !== databaseUrl) throw new Error('MariaDB came back at another address.');
  };
  return { server, databaseUrl, sql, restartDatabase };
}

export interface LoadClass {
  pass: ClassPass;
  instructor: ClassClient;
  http: Client;
}

export async function openLoadClass(
  address: string,
  setup: { mode: ClassMode; seats: number; scenario: string },
  cleanUp: CleanUp,
): Promise<LoadClass> {
  const http = await openClient(address, 'm.okafor');
  const opened = await http('POST', '/api/classes', {
    json: {
      title: 'Load',
      playlist: [{ scenarioSlug: setup.scenario }, { scenarioSlug: setup.scenario }],
      mode: setup.mode,
      seats: setup.seats,
      guests: true,
      options: { guestsAsk: false },
    },
  });
  const pass = classPassSchema.parse(opened.body);
  const instructor = new ClassClient(http, address, pass.classId);
  cleanUp(() => instructor.close());
  await instructor.connect();
  return { pass, instructor, http };
}

export interface CrowdMember {
  socket: Socket<ServerEvents, ClientEvents>;
  member: string;
}

/** Joins as many guests, some at once, and connects each with a socket of its own. */
export async function gatherCrowd(
  address: string,
  pass: ClassPass,
  size: number,
  cleanUp: CleanUp,
): Promise<CrowdMember[]> {
  const first = await fetch(`${address}/api/session`);
  const csrf =
    /^[^=]+=([^;]+)/u.exec(first.headers.getSetCookie().find((one) => one.startsWith(CSRF_COOKIE)) ?? '')?.[1] ?? '';
  const crowd: CrowdMember[] = [];
  let next = 0;
  const worker = async (): Promise<void> => {
    while (next < size) {
      next += 1;
      const name = `Guest ${next}`;
      const answer = await fetch(`${address}/api/classes/join`, {
        method: 'POST',
        headers: {
          'content-type': 'application/json',
          cookie: `${CSRF_COOKIE}=${csrf}`,
          [CSRF_HEADER]: decodeURIComponent(csrf),
          origin: address,
        },
        body: JSON.stringify({ code: pass.joinCode, displayName: name }),
      });
      if (!answer.ok) throw new Error(`Joining answered ${answer.status}: ${await answer.text()}`);
      const { member } = classPassSchema.parse(await answer.json());
      const cookie =
        answer.headers
          .getSetCookie()
          .find((one) => one.startsWith(GUEST_COOKIE))
          ?.split(';')[0] ?? '';
      crowd.push({ member, socket: await connectGuest(address, cookie, pass.classId, cleanUp) });
    }
  };
  await Promise.all(Array.from({ length: 8 }, worker));
  return crowd;
}

async function connectGuest(address: string, cookie: string, classId: string, cleanUp: CleanUp) {
  const socket: Socket<ServerEvents, ClientEvents> = io(address, {
    transports: ['websocket'],
    extraHeaders: { cookie, origin: address },
    forceNew: true,
  });
  cleanUp(() => socket.disconnect());
  await new Promise<void>((resolve, reject) => {
    socket.once('connect', () => resolve());
    socket.once('connect_error', reject);
  });
  await request<Entered>(socket, 'class:enter', { classId, since: 1_000_000 });
  return socket;
}

/** A request whose refusal is an error. */
export async function request<T>(
  socket: Socket<ServerEvents, ClientEvents>,
  event: keyof ClientEvents,
  body: unknown,
): Promise<T> {
  // Bodies are the caller's; the server checks them.
  const emit = socket.timeout(20_000).emitWithAck.bind(socket.timeout(20_000)) as unknown as (
    event: string,
    body: unknown,
  ) => Promise<{ ok: true; data: T } | { ok: false; code: string; detail: string }>;
  const answer = await emit(event, body);
  if (!answer.ok) throw new Error(`${event}: ${answer.code}: ${answer.detail}`);
  return answer.data;
}

export const takeAttempt = (one: CrowdMember, classId: string, run: number): Promise<AttemptHold> =>
  request<AttemptHold>(one.socket, 'run:take', { classId, run });
