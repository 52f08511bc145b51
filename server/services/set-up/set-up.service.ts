import { randomBytes, randomUUID, timingSafeEqual } from 'node:crypto';
import type { setUpBodySchema, SetUpState } from '#shared/contracts/set-up.ts';
import type { z } from 'zod';
import type { Database } from '../../data/database.ts';
import { isDuplicateKey } from '../../data/duplicate-key.ts';
import { seedLibrary } from '../../data/seeds/seed-empty-database.ts';
import { ProblemError } from '../problem-error.ts';
import type { Passwords } from '../sessions/passwords.ts';
import type { Caller } from '../sessions/sessions.service.ts';

/** Letters and digits that are not taken for one another when read off a terminal. */
const ALPHABET = '23456789ABCDEFGHJKLMNPQRSTUVWXYZ';
const CODE_LENGTH = 12;

/** Of 32 equally likely signs each: 60 bits. */
function newCode(): string {
  const signs = [...randomBytes(CODE_LENGTH)].map((byte) => ALPHABET[byte % ALPHABET.length]).join('');
  return signs.replace(/(.{4})(?=.)/g, '$1-');
}
const plain = (code: string): Buffer => Buffer.from(code.toUpperCase().replace(/[^A-Z0-9]/g, ''));

/** Makes the first organisation and its administrator; refuses from then on. */
export function createSetUp(setup: {
  database: Database;
  passwords: Passwords;
  /** Folder of the shipped scenarios and airframes. */
  libraryFolder: string;
  now: () => Date;
}) {
  const { database, passwords, libraryFolder, now } = setup;
  const code = newCode();
  const over = () =>
    new ProblemError('conflict', 'This server is set up already. Sign in, or ask its administrator for an invitation.');
  const open = (): Promise<boolean> => database.organisations.none();

  return {
    /** The code that opens the set-up from another machine; null once there is an organisation. */
    code: async (): Promise<string | null> => ((await open()) ? code : null),

    state: async (local: boolean): Promise<SetUpState> => ({ open: await open(), codeNeeded: !local }),

    /** @param local true when the request comes from the server's own machine, which needs no code */
    async run(body: z.output<typeof setUpBodySchema>, local: boolean, caller: Caller): Promise<void> {
      if (!(await open())) throw over();
      const given = plain(body.code);
      const wanted = plain(code);
      if (!local && !(given.length === wanted.length && timingSafeEqual(given, wanted))) {
        const message = 'The code is wrong';
        const remedy = 'Copy it from the terminal in which the server was started.';
        throw new ProblemError('validation', `${message}.`, {
          errors: [{ field: '/code', rule: 'as printed', message, remedy }],
        });
      }
      const passwordHash = await passwords.hash(body.password);
      const at = now();
      const organisationId = randomUUID();
      const personId = randomUUID();
      const { units, organisation: name, email, name: displayName } = body;
      try {
        await database.transaction(async (on) => {
          if (!(await on.organisations.none())) throw over();
          const settings = { units, recognitionTimeS: null, guests: false, caution: '' };
          await on.organisations.insert({
            id: organisationId,
            slug: slugOf(name),
            name,
            settings,
            demonstration: false,
            at,
          });
          await on.organisations.markSetUp(organisationId, at);
          await on.people.insert({
            ...{ id: personId, organisationId, email, displayName, fullName: displayName, passwordHash, at },
            status: 'active',
            roles: ['administrator'],
          });
          const counts = body.library ? await seedLibrary(on, organisationId, libraryFolder, at) : {};
          await on.audit.append({
            organisationId,
            at,
            actorId: personId,
            deed: 'organisation.set-up',
            subjectKind: 'organisation',
            subjectId: organisationId,
            detail: { units, ...counts },
            address: caller.address,
          });
        });
      } catch (error) {
        if (isDuplicateKey(error)) throw over();
        throw error;
      }
    },
  };
}
export type SetUp = ReturnType<typeof createSetUp>;

/** "École du Nord" → ecole-du-nord; names without Latin letters get a plain one: there is only this organisation. */
function slugOf(name: string): string {
  const words =
    name
      .normalize('NFKD')
      .toLowerCase()
      .replace(/\p{M}/gu, '')
      .match(/[a-z0-9]+/g) ?? [];
  return words.join('-').slice(0, 80).replace(/-$/, '') || 'organisation';
}
