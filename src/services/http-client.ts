import { z } from 'zod';
import { problemSchema } from '#shared/contracts/problem.ts';
import { CSRF_COOKIE, CSRF_HEADER } from '#shared/contracts/wire-names.ts';
import { ApiError } from './api-error.ts';

type QueryValue = string | number | boolean | null | undefined;
export type Query = Readonly<Record<string, QueryValue>>;

export interface CallOptions {
  query?: Query;
  signal?: AbortSignal;
  headers?: Readonly<Record<string, string>>;
}

export interface HttpDependencies {
  fetch: typeof fetch;
  /** The whole cookie text of the page. */
  cookies: () => string;
}

/** A file the server made, with the name it gave. */
export interface NamedFile {
  name: string;
  content: Blob;
}

interface Call extends CallOptions {
  method: 'GET' | 'POST' | 'PUT' | 'DELETE';
  path: string;
  body?: BodyInit;
  contentType?: string;
}

const SESSION_PATH = '/api/session';
const REFRESH_PATH = '/api/session/refresh';
const NOTHING = z.undefined();

/**
 * Calls the server's API. Every answer is parsed with the schema given; every refusal becomes an `ApiError`.
 * A 401 is answered once with a silent refresh of the session; simultaneous calls share one refresh.
 */
export function createHttpClient({ fetch, cookies }: HttpDependencies) {
  const sessionEnded = new Set<() => void>();
  const reachability = new Set<(reachable: boolean) => void>();
  let refreshing: Promise<boolean> | null = null;
  /** Ends the reads in flight when the person signs out: their answers would come too late to be allowed. */
  let reads = new AbortController();
  let leaving = false;

  function csrf(): Record<string, string> {
    const found = cookies()
      .split(/;\s*/)
      .find((pair) => pair.startsWith(`${CSRF_COOKIE}=`));
    return found ? { [CSRF_HEADER]: decodeURIComponent(found.slice(CSRF_COOKIE.length + 1)) } : {};
  }

  function signalOf({ method, signal }: Call): AbortSignal | null {
    if (method !== 'GET') return signal ?? null;
    return signal ? AbortSignal.any([signal, reads.signal]) : reads.signal;
  }

  async function send(call: Call): Promise<Response> {
    const headers: Record<string, string> = { accept: 'application/json', ...call.headers };
    if (call.contentType) headers['content-type'] = call.contentType;
    if (call.method !== 'GET') Object.assign(headers, csrf());
    try {
      const response = await fetch(call.path + queryText(call.query), {
        method: call.method,
        headers,
        body: call.body ?? null,
        signal: signalOf(call),
        credentials: 'same-origin',
        cache: 'no-store',
      });
      reachability.forEach((tell) => tell(true));
      return response;
    } catch (cause) {
      if (call.signal?.aborted) throw cause;
      if (cause instanceof DOMException && cause.name === 'AbortError') throw signedOutMeanwhile(cause);
      reachability.forEach((tell) => tell(false));
      throw new ApiError('unreachable', 0, 'The server cannot be reached. Check the network and try again.', [], null, {
        cause,
      });
    }
  }

  /** True when a new access token was given. */
  function refresh(): Promise<boolean> {
    refreshing ??= send({ method: 'POST', path: REFRESH_PATH })
      .then((response) => response.ok)
      .finally(() => {
        refreshing = null;
      });
    return refreshing;
  }

  /** Ends the session; nothing is read meanwhile. */
  async function leave(options: CallOptions): Promise<undefined> {
    reads.abort();
    reads = new AbortController();
    leaving = true;
    try {
      return await request({ ...options, method: 'DELETE', path: SESSION_PATH }, NOTHING);
    } finally {
      leaving = false;
    }
  }

  /** The server's answer, after a silent refresh where the access token had run out. */
  async function answerOf(call: Call): Promise<Response> {
    if (leaving && call.method === 'GET') throw signedOutMeanwhile();
    let response = await send(call);
    const signingIn = call.method === 'POST' && call.path === SESSION_PATH;
    if (response.status === 401 && !signingIn) {
      if (await refresh()) response = await send(call);
      if (response.status === 401) sessionEnded.forEach((tell) => tell());
    }
    return response;
  }

  async function requestFile(call: Call): Promise<NamedFile> {
    const response = await answerOf(call);
    if (!response.ok) throw toApiError(response, await readBody(response));
    const name = /filename="([^"]+)"/.exec(response.headers.get('content-disposition') ?? '')?.[1];
    return { name: name ?? 'sidewash.pdf', content: await response.blob() };
  }

  async function request<S extends z.ZodType>(call: Call, schema: S): Promise<z.output<S>> {
    const response = await answerOf(call);
    const content: unknown = await readBody(response);
    if (!response.ok) throw toApiError(response, content);
    const parsed = schema.safeParse(content);
    if (parsed.success) return parsed.data;
    throw new ApiError(
      'unreadable-answer',
      response.status,
      `The answer of ${call.path} does not fit this version of the program. Reload the page.`,
      [],
      null,
      { cause: parsed.error },
    );
  }

  const json = (body: unknown): Pick<Call, 'body' | 'contentType'> =>
    body === undefined ? {} : { body: JSON.stringify(body), contentType: 'application/json' };

  return {
    get: <S extends z.ZodType>(path: string, schema: S, options: CallOptions = {}) =>
      request({ ...options, method: 'GET', path }, schema),
    post: <S extends z.ZodType>(path: string, body: unknown, schema: S, options: CallOptions = {}) =>
      request({ ...options, method: 'POST', path, ...json(body) }, schema),
    getFile: (path: string, options: CallOptions = {}) => requestFile({ ...options, method: 'GET', path }),
    postForFile: (path: string, body: unknown, options: CallOptions = {}) =>
      requestFile({ ...options, method: 'POST', path, ...json(body) }),
    put: <S extends z.ZodType>(path: string, body: unknown, schema: S, options: CallOptions = {}) =>
      request({ ...options, method: 'PUT', path, ...json(body) }, schema),
    putBytes: <S extends z.ZodType>(
      path: string,
      bytes: Uint8Array<ArrayBuffer>,
      schema: S,
      options: CallOptions = {},
    ) => request({ ...options, method: 'PUT', path, body: bytes, contentType: 'application/octet-stream' }, schema),
    delete: (path: string, options: CallOptions = {}) =>
      path === SESSION_PATH ? leave(options) : request({ ...options, method: 'DELETE', path }, NOTHING),
    /** Called when the server no longer knows this session. Returns the way to stop listening. */
    onSessionEnded: (tell: () => void) => listen(sessionEnded, tell),
    /** Called after every request with whether the server answered. */
    onReachability: (tell: (reachable: boolean) => void) => listen(reachability, tell),
  };
}

export type HttpClient = ReturnType<typeof createHttpClient>;

export const api: HttpClient = createHttpClient({
  fetch: (input, init) => globalThis.fetch(input, init),
  cookies: () => document.cookie,
});

function signedOutMeanwhile(cause?: unknown): ApiError {
  return new ApiError('session-expired', 401, 'You are signed out. Sign in to see this.', [], null, { cause });
}

function listen<T>(set: Set<T>, item: T): () => void {
  set.add(item);
  return () => void set.delete(item);
}

function queryText(query: Query = {}): string {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value !== null && value !== undefined && value !== '') search.set(name, String(value));
  }
  const text = search.toString();
  return text === '' ? '' : `?${text}`;
}

async function readBody(response: Response): Promise<unknown> {
  const text = await response.text();
  if (text === '') return undefined;
  try {
    return JSON.parse(text);
  } catch {
    return text;
  }
}

function toApiError(response: Response, content: unknown): ApiError {
  const problem = problemSchema.safeParse(content);
  if (problem.success) {
    const { code, status, detail, errors } = problem.data;
    return new ApiError(code, status, detail, errors, problem.data);
  }
  const busy = response.status === 502 || response.status === 503 || response.status === 504;
  return busy
    ? new ApiError('unavailable', response.status, 'The server is starting or busy. Try again in a moment.')
    : new ApiError('internal', response.status, 'The server refused the request without a reason. Try again.');
}
