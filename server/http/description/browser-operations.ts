import { z } from 'zod';
import * as account from '#shared/contracts/account.ts';
import * as administration from '#shared/contracts/administration.ts';
import { attemptChunksSchema } from '#shared/contracts/attempts.ts';
import * as classes from '#shared/contracts/classes.ts';
import { meSchema, signInBodySchema } from '#shared/contracts/session.ts';
import { setUpBodySchema, setUpStateSchema } from '#shared/contracts/set-up.ts';
import { madeTokenSchema, newTokenSchema, tokenListSchema } from '#shared/contracts/tokens.ts';
import { type Area, fileOf, made, NO_CONTENT, ok } from './operation.ts';

const anyone = { anyone: true } as const;

/** What only a signed-in browser reaches, with its cookies and the CSRF header; tokens do not. */
export const BROWSER_AREAS: readonly Area[] = [
  {
    area: 'session',
    title: 'Session',
    operations: [
      {
        ...anyone,
        method: 'post',
        path: '/session',
        summary: 'Sign in',
        body: signInBodySchema,
        answer: ok(meSchema),
        refusals: ['wrong-credentials', 'deactivated', 'throttled'],
      },
      { method: 'get', path: '/session', summary: 'Read who is signed in', answer: ok(meSchema) },
      {
        ...anyone,
        method: 'post',
        path: '/session/refresh',
        summary: 'Exchange the refresh cookie for fresh ones',
        answer: ok(meSchema),
        refusals: ['session-expired', 'deactivated'],
      },
      { ...anyone, method: 'delete', path: '/session', summary: 'Sign out', answer: NO_CONTENT },
      { method: 'delete', path: '/session/everywhere', summary: 'Sign out everywhere', answer: NO_CONTENT },
      {
        ...anyone,
        method: 'post',
        path: '/session/link/look',
        summary: 'Read what a link from a message is for',
        body: administration.linkBodySchema,
        answer: ok(administration.linkSchema),
        refusals: ['not-found', 'throttled'],
      },
      {
        ...anyone,
        method: 'post',
        path: '/session/link/take',
        summary: 'Take an invitation or set a new password by a link',
        body: administration.takeLinkSchema,
        answer: NO_CONTENT,
        refusals: ['not-found', 'conflict', 'throttled'],
      },
      {
        ...anyone,
        method: 'post',
        path: '/session/reset',
        summary: 'Ask for a message with a link to a new password',
        body: administration.askResetSchema,
        answer: NO_CONTENT,
        refusals: ['throttled'],
      },
      {
        method: 'put',
        path: '/session/password',
        summary: 'Change the own password; other sessions end',
        body: administration.changePasswordSchema,
        answer: NO_CONTENT,
        refusals: ['wrong-credentials', 'throttled'],
      },
      {
        method: 'get',
        path: '/session/open',
        summary: 'List the own open sessions',
        answer: ok(account.openSessionsSchema),
      },
      { method: 'delete', path: '/session/open/:id', summary: 'End one of the own sessions', answer: NO_CONTENT },
      {
        method: 'put',
        path: '/session/profile',
        summary: 'Change the own profile',
        body: account.profileBodySchema,
        answer: ok(meSchema),
      },
      {
        method: 'post',
        path: '/session/address',
        summary: 'Ask for a message that confirms another address',
        body: account.newAddressSchema,
        answer: NO_CONTENT,
        refusals: ['wrong-credentials', 'conflict', 'throttled'],
      },
      {
        ...anyone,
        method: 'post',
        path: '/session/link/confirm',
        summary: 'Confirm another address by a link',
        body: administration.linkBodySchema,
        answer: NO_CONTENT,
        refusals: ['not-found', 'conflict', 'throttled'],
      },
    ],
  },
  {
    area: 'set-up',
    title: 'First set-up',
    operations: [
      {
        ...anyone,
        method: 'get',
        path: '/set-up',
        summary: 'Read whether there is anything to set up',
        answer: ok(setUpStateSchema),
      },
      {
        ...anyone,
        method: 'post',
        path: '/set-up',
        summary: 'Make the organisation and its first administrator, once',
        body: setUpBodySchema,
        answer: NO_CONTENT,
        refusals: ['forbidden', 'conflict', 'throttled'],
      },
    ],
  },
  {
    area: 'tokens',
    title: 'Tokens',
    operations: [
      { method: 'get', path: '/tokens', summary: 'List the own tokens', answer: ok(tokenListSchema) },
      {
        method: 'post',
        path: '/tokens',
        summary: 'Make a token; it is shown this once',
        body: newTokenSchema,
        answer: made(madeTokenSchema),
        refusals: ['conflict'],
      },
      { method: 'delete', path: '/tokens/:id', summary: 'Revoke a token', answer: NO_CONTENT },
    ],
  },
  {
    area: 'classes',
    title: 'Classes',
    operations: [
      {
        deed: 'class.run',
        method: 'post',
        path: '/classes',
        summary: 'Open a class',
        body: classes.openClassBodySchema,
        answer: made(classes.classPassSchema),
        refusals: ['not-found', 'conflict'],
      },
      {
        deed: 'class.read',
        method: 'get',
        path: '/classes',
        summary: 'List classes',
        query: classes.classListQuerySchema,
        answer: ok(classes.classPageSchema),
      },
      {
        ...anyone,
        method: 'get',
        path: '/classes/door/:code',
        summary: 'Read which class a join code opens',
        answer: ok(classes.doorSchema),
        refusals: ['not-found', 'throttled'],
      },
      {
        ...anyone,
        method: 'post',
        path: '/classes/join',
        summary: 'Join a class',
        body: classes.joinClassBodySchema,
        answer: ok(classes.classPassSchema),
        refusals: ['not-found', 'forbidden', 'conflict', 'throttled'],
      },
      {
        ...anyone,
        method: 'get',
        path: '/classes/:id',
        summary: 'Read a class with its runs',
        answer: ok(classes.classDetailSchema),
      },
      {
        ...anyone,
        method: 'get',
        path: '/classes/:id/log',
        summary: 'Read all that happened in a class',
        answer: ok(classes.classLogSchema),
      },
      {
        deed: 'class.run',
        method: 'get',
        path: '/classes/:id/qr.svg',
        summary: 'Draw the join address as a QR code',
        answer: fileOf('image/svg+xml'),
      },
      {
        ...anyone,
        method: 'get',
        path: '/classes/:id/scenarios/:index',
        summary: 'Read a scenario of a class with its airframe',
        answer: ok(z.unknown()),
      },
      {
        ...anyone,
        method: 'get',
        path: '/classes/:id/attempts/:attempt/chunks',
        summary: 'Read the recorded inputs of a member',
        answer: ok(attemptChunksSchema),
      },
    ],
  },
];
