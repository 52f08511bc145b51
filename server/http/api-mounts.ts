import type { RequestHandler, Router } from 'express';
import type { TokenArea } from '#shared/contracts/tokens.ts';
import type { Services } from '../services/create-services.ts';
import {
  accountRouter,
  auditFileRouter,
  auditRouter,
  organisationRouter,
  outboxRouter,
  peopleRouter,
} from './administration.routers.ts';
import { accountSessionsRouter, personSessionsRouter } from './account.router.ts';
import { airframeEditingRouter } from './airframe-editing.router.ts';
import { airframesRouter } from './airframes.router.ts';
import { analysisReportsRouter } from './analysis-reports.router.ts';
import { assignmentsRouter } from './assignments.router.ts';
import { attemptsRouter } from './attempts.router.ts';
import { onlySession, sessionOrToken } from './bearer.ts';
import { classesRouter } from './classes.router.ts';
import { cohortsRouter } from './cohorts.router.ts';
import type { Cookies } from './cookies.ts';
import { debriefRouter, remarksRouter } from './debrief.router.ts';
import { doneOnce } from './idempotency.middleware.ts';
import { playlistsRouter } from './playlists.router.ts';
import { recordsRouter } from './records.router.ts';
import { scenarioEditingRouter } from './scenario-editing.router.ts';
import { scenariosRouter } from './scenarios.router.ts';
import { sessionRouter } from './session.router.ts';
import { setUpRouter } from './set-up.router.ts';
import { studiesRouter } from './studies.router.ts';
import { systemRouter } from './system.router.ts';
import { tokensRouter } from './tokens.router.ts';

/** A router below /api and what comes before it. The description of the interface is checked against this list. */
export interface ApiMount {
  path: string;
  before: readonly RequestHandler[];
  router: Router;
  /** Scopes that let a token in; null: browsers only. */
  area: TokenArea | null;
}

export interface ApiMountsSetup {
  services: Services;
  cookies: Cookies;
  publicOrigins: readonly string[];
  /** Requests may come through a proxy, so that none counts as one from this machine. */
  behindProxy: boolean;
}

/** Every router of the interface, in the order in which they are asked. */
export function apiMounts({ services, cookies, publicOrigins, behindProxy }: ApiMountsSetup): ApiMount[] {
  const { sessions, tokens, once } = services;
  const onceOnly = doneOnce(once);
  const browser = (path: string, router: Router, before: readonly RequestHandler[] = []): ApiMount => ({
    path,
    before,
    router,
    area: null,
  });
  const open = (area: TokenArea, router: Router, path = `/${area}`): ApiMount => ({
    path,
    before: [sessionOrToken(sessions, tokens, area), onceOnly],
    router,
    area,
  });
  return [
    browser('/session', sessionRouter(sessions, cookies)),
    browser('/session', accountRouter(services.accountLinks, sessions)),
    browser('/session', accountSessionsRouter(services)),
    browser('/set-up', setUpRouter(services.setUp, behindProxy)),
    browser('/classes', classesRouter({ services, cookies, publicOrigins })),
    browser('/tokens', tokensRouter(tokens), [onlySession(sessions), onceOnly]),
    open('airframes', airframesRouter(services.airframes)),
    open('airframes', airframeEditingRouter(services)),
    open('studies', studiesRouter(services.studies)),
    open('reports', analysisReportsRouter(services)),
    open('scenarios', scenariosRouter(services.scenarios)),
    open('scenarios', scenarioEditingRouter(services)),
    open('attempts', attemptsRouter(services.attempts)),
    open('attempts', debriefRouter(services.debrief)),
    open('remarks', remarksRouter(services.debrief)),
    open('assignments', assignmentsRouter(services.assignments)),
    open('records', recordsRouter(services.records)),
    open('playlists', playlistsRouter(services.playlists)),
    open('people', peopleRouter(services.people)),
    open('people', personSessionsRouter(services.profile)),
    open('cohorts', cohortsRouter(services.cohorts)),
    open('organisation', organisationRouter(services.people)),
    open('outbox', outboxRouter(services.outbox)),
    open('system', systemRouter(services.system)),
    open('audit', auditRouter(services.audit)),
    open('audit', auditFileRouter(services.audit), '/audit.csv'),
  ];
}
