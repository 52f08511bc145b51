import { randomUUID } from 'node:crypto';
import compression from 'compression';
import cookieParser from 'cookie-parser';
import express, { type Express, type RequestHandler } from 'express';
import { REQUEST_ID_HEADER } from '#shared/contracts/wire-names.ts';
import type { Environment } from './config/environment.ts';
import type { Logger } from './config/log.ts';
import { apiMounts } from './http/api-mounts.ts';
import { createCookies } from './http/cookies.ts';
import { csrfProtection } from './http/csrf.middleware.ts';
import { errorMapper, unknownRoute } from './http/error-mapper.ts';
import { healthRouter } from './http/health.router.ts';
import { openApiRouter } from './http/description/openapi.router.ts';
import { securityHeaders } from './http/security-headers.ts';
import type { Services } from './services/create-services.ts';

const LARGEST_JSON = '1mb';

export interface AppSetup {
  services: Services;
  log: Logger;
  env: Pick<Environment, 'publicOrigins' | 'secureCookies' | 'proxies' | 'dev'>;
  /** Serves the client: the built files, or the sources with hot reload. */
  client?: RequestHandler;
}

/** The HTTP half of the product, without listening. */
export function createApp({ services, log, env, client }: AppSetup): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', env.proxies);
  app.set('query parser', 'simple');
  const cookies = createCookies(env.secureCookies);

  app.use((_request, response, next) => {
    response.set(REQUEST_ID_HEADER, randomUUID());
    next();
  });
  app.use(securityHeaders(env.dev, env.secureCookies));
  app.use(compression());

  const api = express.Router();
  api.use((_request, response, next) => {
    response.set('cache-control', 'no-store');
    next();
  });
  api.use('/health', healthRouter(services.database));
  api.use(cookieParser());
  const mounts = apiMounts({
    services,
    cookies,
    publicOrigins: env.publicOrigins,
    behindProxy: env.proxies > 0 || env.publicOrigins.length > 0,
  });
  const openToTokens = new Set(mounts.filter(({ area }) => area !== null).map(({ path }) => path));
  api.use(csrfProtection(cookies, env.publicOrigins, openToTokens));
  api.use(express.json({ limit: LARGEST_JSON }));
  api.use('/openapi.json', openApiRouter());
  for (const { path, before, router } of mounts) api.use(path, ...before, router);
  api.use(unknownRoute);
  app.use('/api', api);

  if (client) app.use(client);
  app.use(errorMapper(log));
  return app;
}
