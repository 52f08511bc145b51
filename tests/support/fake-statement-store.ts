import { createServer, type IncomingMessage } from 'node:http';
import type { AddressInfo } from 'node:net';

/** What the fake does with the next request. */
export type Behaviour = 'store' | 'store-then-hang-up' | 'refuse' | 'busy' | 'unauthorised';

export interface FakeStore {
  address: string;
  /** Statements by identifier, as they were stored. */
  stored: Map<string, unknown>;
  /** Every request that came, with its headers. */
  requests: { id: string; authorization: string; version: string }[];
  /** Behaviours of the next requests; "store" when it is empty. */
  next: Behaviour[];
  close(): Promise<void>;
}

/**
 * A local endpoint that keeps statements as the specification has it: PUT with an identifier, the same again changes
 * nothing and answers 204, a different one under a known identifier answers 409.
 */
export async function startFakeStore(): Promise<FakeStore> {
  const stored = new Map<string, unknown>();
  const requests: FakeStore['requests'] = [];
  const next: Behaviour[] = [];
  const server = createServer((request, response) => {
    void read(request).then((text) => {
      const id = new URL(request.url ?? '', 'http://x').searchParams.get('statementId') ?? '';
      requests.push({
        id,
        authorization: request.headers.authorization ?? '',
        version: String(request.headers['x-experience-api-version']),
      });
      const behaviour = next.shift() ?? 'store';
      if (behaviour === 'busy') return response.writeHead(503).end();
      if (behaviour === 'refuse') return response.writeHead(400).end();
      if (behaviour === 'unauthorised') return response.writeHead(401).end();
      const statement: unknown = JSON.parse(text);
      const before = stored.get(id);
      if (before !== undefined && JSON.stringify(before) !== JSON.stringify(statement)) {
        return response.writeHead(409).end();
      }
      stored.set(id, statement);
      if (behaviour === 'store-then-hang-up') return request.socket.destroy();
      return response.writeHead(204).end();
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const { port } = server.address() as AddressInfo; // it listens on a port, not on a pipe
  return {
    address: `http://127.0.0.1:${port}/store/`,
    stored,
    requests,
    next,
    close: () =>
      new Promise((resolve) => {
        server.closeAllConnections();
        server.close(() => resolve());
      }),
  };
}

async function read(request: IncomingMessage): Promise<string> {
  const parts: Buffer[] = [];
  for await (const part of request) parts.push(Buffer.from(part as Uint8Array)); // a request streams bytes
  return Buffer.concat(parts).toString('utf8');
}
