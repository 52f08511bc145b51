import { describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import type { Problem } from '#shared/contracts/problem.ts';
import { CSRF_COOKIE, CSRF_HEADER } from '#shared/contracts/wire-names.ts';
import { ApiError } from '../../../src/services/api-error.ts';
import { createHttpClient } from '../../../src/services/http-client.ts';

const thing = z.object({ n: z.number() });

function answer(status: number, body?: unknown): Response {
  return new Response(body === undefined ? null : JSON.stringify(body), { status });
}

function refusal(status: number, code: Problem['code'], more: Partial<Problem> = {}): Response {
  return answer(status, { type: 'about:blank', title: code, status, code, detail: `refused: ${code}`, ...more });
}

/** A client whose server is a function; keeps the calls made. */
function clientOf(serve: (path: string, init: RequestInit) => Response | Promise<Response>, cookies = '') {
  const calls: { path: string; method: string; headers: Headers }[] = [];
  const client = createHttpClient({
    cookies: () => cookies,
    fetch: async (input, init) => {
      const request = init ?? {};
      calls.push({ path: String(input), method: request.method ?? 'GET', headers: new Headers(request.headers) });
      return serve(String(input), request);
    },
  });
  return { client, calls };
}

async function failureOf(promise: Promise<unknown>): Promise<ApiError> {
  const error: unknown = await promise.then(
    () => null,
    (reason: unknown) => reason,
  );
  expect(error).toBeInstanceOf(ApiError);
  return error as ApiError; // asserted on the line above
}

describe('http client', () => {
  it('parses an answer with its schema and leaves out empty query members', async () => {
    const { client, calls } = clientOf(() => answer(200, { n: 3, extra: true }));
    expect(await client.get('/api/things', thing, { query: { page: 2, search: '', tag: undefined } })).toEqual({
      n: 3,
    });
    expect(calls[0]?.path).toBe('/api/things?page=2');
  });

  it('ends the reads in flight when the person signs out, and reads nothing until that is answered', async () => {
    let answerSignOut = (): void => undefined;
    const { client, calls } = clientOf((path, { method, signal }) => {
      if (method === 'DELETE') return new Promise((resolve) => (answerSignOut = () => resolve(answer(204))));
      if (path === '/api/fast') return answer(200, { n: 1 });
      return new Promise((_resolve, reject) =>
        signal?.addEventListener('abort', () => reject(new DOMException('gone', 'AbortError'))),
      );
    });
    const slow = failureOf(client.get('/api/slow', thing));
    const leaving = client.delete('/api/session');
    expect((await slow).code).toBe('session-expired');
    expect((await failureOf(client.get('/api/fast', thing))).code).toBe('session-expired');
    answerSignOut();
    await leaving;
    expect(await client.get('/api/fast', thing)).toEqual({ n: 1 });
    expect(calls.map((call) => `${call.method} ${call.path}`)).toEqual([
      'GET /api/slow',
      'DELETE /api/session',
      'GET /api/fast',
    ]);
  });

  it('sends the csrf token with changes only', async () => {
    const { client, calls } = clientOf(() => answer(200, { n: 1 }), `a=b; ${CSRF_COOKIE}=to%2Fken; c=d`);
    await client.get('/api/things', thing);
    await client.post('/api/things', { n: 1 }, thing);
    expect(calls.map((call) => call.headers.get(CSRF_HEADER))).toEqual([null, 'to/ken']);
    expect(calls[1]?.headers.get('content-type')).toBe('application/json');
  });

  it('turns a problem into an ApiError with code, detail and field messages', async () => {
    const { client } = clientOf(() =>
      refusal(422, 'validation', {
        errors: [{ field: '/email', rule: 'email', message: 'Not an address.', remedy: 'Write name@place.' }],
      }),
    );
    const error = await failureOf(client.post('/api/things', {}, thing));
    expect([error.code, error.status, error.detail]).toEqual(['validation', 422, 'refused: validation']);
    expect(error.messageFor('email')).toBe('Not an address. Write name@place.');
    expect(error.messageFor('name')).toBeUndefined();
  });

  it('refreshes once on a 401 and repeats the request', async () => {
    let renewed = false;
    const { client, calls } = clientOf((path) => {
      if (path === '/api/session/refresh') {
        renewed = true;
        return answer(200, {});
      }
      return renewed ? answer(200, { n: 7 }) : refusal(401, 'session-expired');
    });
    expect(await client.get('/api/things', thing)).toEqual({ n: 7 });
    expect(calls.map((call) => call.path)).toEqual(['/api/things', '/api/session/refresh', '/api/things']);
  });

  it('shares one refresh between requests that fail together', async () => {
    let renewed = false;
    const { client, calls } = clientOf(async (path) => {
      await Promise.resolve();
      if (path === '/api/session/refresh') {
        renewed = true;
        return answer(200, {});
      }
      return renewed ? answer(200, { n: 1 }) : refusal(401, 'session-expired');
    });
    await Promise.all([client.get('/a', thing), client.get('/b', thing), client.get('/c', thing)]);
    expect(calls.filter((call) => call.path === '/api/session/refresh')).toHaveLength(1);
  });

  it('tells once that the session ended when the refresh is refused, and does not loop', async () => {
    const { client, calls } = clientOf(() => refusal(401, 'session-expired'));
    const ended = vi.fn();
    client.onSessionEnded(ended);
    const error = await failureOf(client.get('/api/things', thing));
    expect(error.code).toBe('session-expired');
    expect(ended).toHaveBeenCalledTimes(1);
    expect(calls.map((call) => call.path)).toEqual(['/api/things', '/api/session/refresh']);
  });

  it('does not refresh when a password is wrong', async () => {
    const { client, calls } = clientOf(() => refusal(401, 'wrong-credentials'));
    const error = await failureOf(client.post('/api/session', { email: 'a', password: 'b' }, thing));
    expect(error.code).toBe('wrong-credentials');
    expect(calls).toHaveLength(1);
  });

  it('calls an answer that does not fit its contract unreadable, with the reason as cause', async () => {
    const { client } = clientOf(() => answer(200, { n: 'three' }));
    const error = await failureOf(client.get('/api/things', thing));
    expect(error.code).toBe('unreadable-answer');
    expect(error.cause).toBeInstanceOf(z.ZodError);
  });

  it('reports whether the server answers', async () => {
    let up = false;
    const { client } = clientOf(() => {
      if (!up) throw new TypeError('Failed to fetch');
      return answer(500, 'oops');
    });
    const heard: boolean[] = [];
    const stop = client.onReachability((reachable) => heard.push(reachable));
    expect((await failureOf(client.get('/api/things', thing))).code).toBe('unreachable');
    up = true;
    expect((await failureOf(client.get('/api/things', thing))).code).toBe('internal');
    stop();
    await failureOf(client.get('/api/things', thing));
    expect(heard).toEqual([false, true]);
  });

  it('lets an abort pass without calling the server unreachable', async () => {
    const { client } = clientOf((_path, init) => {
      throw init.signal?.reason ?? new Error('no signal');
    });
    const heard = vi.fn();
    client.onReachability(heard);
    const abort = new AbortController();
    abort.abort(new DOMException('stopped', 'AbortError'));
    await expect(client.get('/api/things', thing, { signal: abort.signal })).rejects.toThrow('stopped');
    expect(heard).not.toHaveBeenCalled();
  });

  it('sends bytes as they are and accepts an empty answer to a deletion', async () => {
    const bodies: unknown[] = [];
    const { client, calls } = clientOf((_path, init) => {
      bodies.push(init.body);
      return init.method === 'DELETE' ? answer(204) : answer(200, { n: 1 });
    });
    const bytes = new Uint8Array([1, 2, 3]);
    await client.putBytes('/api/chunk', bytes, thing, { headers: { 'x-chunk-hash': 'ab' } });
    expect(await client.delete('/api/session')).toBeUndefined();
    expect(bodies[0]).toBe(bytes);
    expect(calls[0]?.headers.get('content-type')).toBe('application/octet-stream');
    expect(calls[0]?.headers.get('x-chunk-hash')).toBe('ab');
  });
});
