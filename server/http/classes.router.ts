import { Router, type Request, type RequestHandler, type Response } from 'express';
import { z } from 'zod';
import {
  classListQuerySchema,
  joinClassBodySchema,
  joinCodeSchema,
  openClassBodySchema,
} from '#shared/contracts/classes.ts';
import type { ClassRefusal } from '#shared/contracts/class-socket.ts';
import type { ProblemCode } from '#shared/contracts/problem.ts';
import { ACCESS_COOKIE, GUEST_COOKIE } from '#shared/contracts/wire-names.ts';
import type { Services } from '../services/create-services.ts';
import type { ClassReader } from '../services/classes/class-pages.ts';
import { ClassProblem } from '../services/classes/class-problem.ts';
import type { Actor } from '../services/permissions.ts';
import { notFound, ProblemError } from '../services/problem-error.ts';
import { cookieOf, type Cookies } from './cookies.ts';
import { parse } from './parse.ts';
import { callerOf } from './session.middleware.ts';

const READER = Symbol('class reader');
const CODES: Partial<Record<ClassRefusal, ProblemCode>> = { 'not-a-member': 'forbidden', 'bad-event': 'validation' };

export interface ClassesRouterSetup {
  services: Pick<Services, 'classes' | 'sessions'>;
  cookies: Cookies;
  publicOrigins: readonly string[];
}

function idOf(value: unknown, what: string): string {
  const parsed = z.uuid().safeParse(value);
  if (!parsed.success) throw notFound(what);
  return parsed.data;
}

/** Refusals of a class in the form of every other refusal. */
function mapped(handler: (request: Request, response: Response) => Promise<void>): RequestHandler {
  return async (request, response) => {
    try {
      await handler(request, response);
    } catch (error) {
      if (error instanceof ClassProblem) throw new ProblemError(CODES[error.reason] ?? 'conflict', error.message);
      throw error;
    }
  };
}

/** Classes: opening and joining, lists, and what remains of a class. Guests have a pass instead of a session. */
export function classesRouter({ services, cookies, publicOrigins }: ClassesRouterSetup): Router {
  const { classes, sessions } = services;
  const router = Router();

  /** The signed-in person; null when nobody is, or the session has ended. */
  const actorIf = async (request: Request): Promise<Actor | null> => {
    const token = cookieOf(request, ACCESS_COOKIE);
    return token === undefined ? null : sessions.authenticate(token);
  };
  const guestOf = (request: Request) => classes.guestPasses.check(cookieOf(request, GUEST_COOKIE));
  const signedIn = async (request: Request): Promise<Actor> => sessions.authenticate(cookieOf(request, ACCESS_COOKIE));

  const requireReader: RequestHandler = async (request, response, next) => {
    const guest = guestOf(request);
    const actor = await actorIf(request);
    if (actor === null && guest === null) throw new ProblemError('unauthenticated', 'Sign in first.');
    const asGuest = guest !== null && (actor === null || guest.classId === request.params['id']);
    const reader: ClassReader = asGuest && guest !== null ? { guest } : { actor: actor ?? (await signedIn(request)) };
    Reflect.set(response.locals, READER, reader);
    next();
  };
  const readerOf = (response: Response): ClassReader => Reflect.get(response.locals, READER) as ClassReader; // set by requireReader

  router.post(
    '/',
    mapped(async (request, response) => {
      const actor = await signedIn(request);
      const body = parse(openClassBodySchema, request.body);
      response.status(201).json(await classes.membership.open(actor, body, callerOf(request)));
    }),
  );

  router.get(
    '/',
    mapped(async (request, response) => {
      response.json(await classes.pages.list(await signedIn(request), parse(classListQuerySchema, request.query)));
    }),
  );

  router.get(
    '/door/:code',
    mapped(async (request, response) => {
      const code = parse(joinCodeSchema, request.params['code']);
      response.json(await classes.membership.door(code, callerOf(request)));
    }),
  );

  router.post(
    '/join',
    mapped(async (request, response) => {
      const body = parse(joinClassBodySchema, request.body);
      const actor = await actorIf(request);
      const { pass, token } = await classes.membership.join(actor, guestOf(request), body, callerOf(request));
      if (token !== null) cookies.setGuest(response, token);
      response.json(pass);
    }),
  );

  router.get(
    '/:id',
    requireReader,
    mapped(async (request, response) => {
      response.json(await classes.pages.detail(readerOf(response), idOf(request.params['id'], 'class')));
    }),
  );

  router.get(
    '/:id/log',
    requireReader,
    mapped(async (request, response) => {
      response.json(await classes.pages.entries(readerOf(response), idOf(request.params['id'], 'class')));
    }),
  );

  router.get(
    '/:id/qr.svg',
    mapped(async (request, response) => {
      const id = idOf(request.params['id'], 'class');
      const origin = publicOrigins[0] ?? `${request.protocol}://${request.get('host') ?? ''}`;
      const picture = await classes.pages.joinPicture(await signedIn(request), id, origin);
      response.type('image/svg+xml').send(picture);
    }),
  );

  router.get(
    '/:id/scenarios/:index',
    requireReader,
    mapped(async (request, response) => {
      const index = parse(z.coerce.number().int().min(0).max(1000), request.params['index']);
      response.json(await classes.pages.scenario(readerOf(response), idOf(request.params['id'], 'class'), index));
    }),
  );

  router.get(
    '/:id/attempts/:attempt/chunks',
    requireReader,
    mapped(async (request, response) => {
      const id = idOf(request.params['id'], 'class');
      response.json(await classes.pages.chunks(readerOf(response), id, idOf(request.params['attempt'], 'attempt')));
    }),
  );

  return router;
}
