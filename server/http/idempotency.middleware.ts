import { createHash } from 'node:crypto';
import type { RequestHandler, Response } from 'express';
import { IDEMPOTENCY_HEADER, REPLAYED_HEADER, idempotencyKeySchema } from '#shared/contracts/tokens.ts';
import type { OnceService } from '../services/tokens/once.service.ts';
import { parse } from './parse.ts';
import { actorOf } from './session.middleware.ts';

const textOf = (body: unknown): string =>
  Buffer.isBuffer(body) ? body.toString('base64') : body === undefined ? '' : JSON.stringify(body);

/** A POST with an idempotency key is carried out once; the same again gets the first one's answer. */
export function doneOnce(once: OnceService): RequestHandler {
  return async (request, response, next) => {
    const given = request.get(IDEMPOTENCY_HEADER);
    if (request.method !== 'POST' || given === undefined) {
      next();
      return;
    }
    const key = parse(idempotencyKeySchema, given);
    const { personId } = actorOf(response);
    const fingerprint = createHash('sha256')
      .update(`${request.method} ${request.originalUrl}\n${textOf(request.body)}`)
      .digest('hex');
    const kept = await once.begin(personId, key, fingerprint);
    if (kept !== null) {
      response.set(REPLAYED_HEADER, 'true').status(kept.status);
      if (kept.location !== null) response.set('location', kept.location);
      if (kept.etag !== null) response.set('etag', kept.etag);
      if (kept.body === '') response.end();
      else response.type('application/json').send(kept.body);
      return;
    }
    keepAnswer(response, once, personId, key);
    next();
  };
}

/** Keeps a JSON or empty answer of success before it goes out; anything else frees the key. */
function keepAnswer(response: Response, once: OnceService, personId: string, key: string): void {
  const headerText = (name: string): string | null => response.get(name) ?? null;
  let settled: Promise<unknown> | null = null;
  const settle = (body: string): Promise<unknown> => {
    const { statusCode: status } = response;
    settled ??=
      status >= 200 && status < 300
        ? once.keep(personId, key, { status, location: headerText('location'), etag: headerText('etag'), body })
        : once.free(personId, key);
    return settled;
  };
  const json = response.json.bind(response);
  response.json = (value: unknown) => {
    void settle(JSON.stringify(value)).then(
      () => json(value),
      () => json(value),
    );
    return response;
  };
  response.on('finish', () => void settle('').catch(() => undefined));
  response.on('close', () => {
    if (settled === null) void once.free(personId, key).catch(() => undefined);
  });
}
