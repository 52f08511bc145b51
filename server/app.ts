import { randomUUID } from 'node:crypto';
import compression from 'compression';
import cookieParser from 'cookie-parser';
import express, { type Express, type RequestHandler } from 'express';
import { REQUEST_ID_HEADER } from '#shared/contracts/wire-names.ts';
import type { Environment } from './config/environment.ts';
import type { Logger } from './config/log.ts';
import {
  accountRouter,
  auditFileRouter,
  auditRouter,
  organisationRouter,
  outboxRouter,
  peopleRouter,
} from './http/administration.routers.ts';
import { accountSessionsRouter, personSessionsRouter } from './http/account.router.ts';
import { airframeEditingRouter } from './http/airframe-editing.router.ts';
import { airframesRouter } from './http/airframes.router.ts';
import { analysisReportsRouter } from './http/analysis-reports.router.ts';
import { assignmentsRouter } from './http/assignments.router.ts';
import { attemptsRouter } from './http/attempts.router.ts';
import { classesRouter } from './http/classes.router.ts';
import { cohortsRouter } from './http/cohorts.router.ts';
import { createCookies } from './http/cookies.ts';
import { csrfProtection } from './http/csrf.middleware.ts';
import { debriefRouter, remarksRouter } from './http/debrief.router.ts';
import { errorMapper, unknownRoute } from './http/error-mapper.ts';
import { healthRouter } from './http/health.router.ts';
import { playlistsRouter } from './http/playlists.router.ts';
import { recordsRouter } from './http/records.router.ts';
import { scenarioEditingRouter } from './http/scenario-editing.router.ts';
import { scenariosRouter } from './http/scenarios.router.ts';
import { securityHeaders } from './http/security-headers.ts';
import { requireSession } from './http/session.middleware.ts';
import { sessionRouter } from './http/session.router.ts';
import { setUpRouter } from './http/set-up.router.ts';
import { studiesRouter } from './http/studies.router.ts';
import { systemRouter } from './http/system.router.ts';
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
  api.use(csrfProtection(cookies, env.publicOrigins));
  api.use(express.json({ limit: LARGEST_JSON }));
  api.use('/session', sessionRouter(services.sessions, cookies));
  api.use('/session', accountRouter(services.accountLinks, services.sessions));
  api.use('/session', accountSessionsRouter(services));
  api.use('/set-up', setUpRouter(services.setUp, env.proxies > 0 || env.publicOrigins.length > 0));
  api.use('/classes', classesRouter({ services, cookies, publicOrigins: env.publicOrigins }));
  const signedIn = requireSession(services.sessions);
  api.use('/airframes', signedIn, airframesRouter(services.airframes));
  api.use('/airframes', signedIn, airframeEditingRouter(services));
  api.use('/studies', signedIn, studiesRouter(services.studies));
  api.use('/reports', signedIn, analysisReportsRouter(services));
  api.use('/scenarios', signedIn, scenariosRouter(services.scenarios));
  api.use('/scenarios', signedIn, scenarioEditingRouter(services));
  api.use('/attempts', signedIn, attemptsRouter(services.attempts));
  api.use('/attempts', signedIn, debriefRouter(services.debrief));
  api.use('/remarks', signedIn, remarksRouter(services.debrief));
  api.use('/assignments', signedIn, assignmentsRouter(services.assignments));
  api.use('/records', signedIn, recordsRouter(services.records));
  api.use('/playlists', signedIn, playlistsRouter(services.playlists));
  api.use('/people', signedIn, peopleRouter(services.people));
  api.use('/people', signedIn, personSessionsRouter(services.profile));
  api.use('/cohorts', signedIn, cohortsRouter(services.cohorts));
  api.use('/organisation', signedIn, organisationRouter(services.people));
  api.use('/outbox', signedIn, outboxRouter(services.outbox));
  api.use('/system', signedIn, systemRouter(services.system));
  api.use('/audit', signedIn, auditRouter(services.audit));
  api.use('/audit.csv', signedIn, auditFileRouter(services.audit));
  api.use(unknownRoute);
  app.use('/api', api);

  if (client) app.use(client);
  app.use(errorMapper(log));
  return app;
}
