import { randomUUID } from 'node:crypto';
import { lanesOf } from '#shared/scenario/time-line.ts';
import type { Database, Repositories } from '../database.ts';
import { DEMONSTRATION, DEMONSTRATION_PEOPLE } from './demonstration-people.ts';
import { readLibrary, type Library } from './read-library.ts';

export interface SeedReport {
  /** False when the database held an organisation already: then nothing was written. */
  seeded: boolean;
  airframes: number;
  scenarios: number;
  problems: string[];
}

export interface SeedSetup {
  database: Database;
  /** Folder of the shipped scenarios, with `airframes` inside. */
  folder: string;
  hashPassword: (password: string) => Promise<string>;
  now: () => Date;
}

/** Marks of a scenario's small time line. */
const tagsOf = (library: Library['airframes'][number]): string[] => {
  const { engines, controls } = library.airframe;
  const kinds = new Set(engines.map((engine) => engine.kind));
  return [
    'demonstration',
    ...(kinds.has('propeller') ? ['propeller'] : []),
    ...(kinds.has('jet') ? ['jet'] : []),
    ...(engines.length >= 4 ? ['four engines'] : []),
    ...(controls.rudderRatio ? ['rudder ratio'] : []),
  ];
};

/** Fills a database that holds no organisation with the invented one: people, cohort, airframes, scenarios. */
export async function seedEmptyDatabase({ database, folder, hashPassword, now }: SeedSetup): Promise<SeedReport> {
  if (!(await database.organisations.none())) return { seeded: false, airframes: 0, scenarios: 0, problems: [] };
  const library = readLibrary(folder);
  const passwordHash = await hashPassword(DEMONSTRATION.password);
  await database.transaction(async (on) => {
    const at = now();
    const organisationId = randomUUID();
    await on.organisations.insert({
      id: organisationId,
      slug: DEMONSTRATION.slug,
      name: DEMONSTRATION.name,
      settings: { units: 'aviation', recognitionTimeS: null, guests: false, caution: '' },
      demonstration: true,
      at,
    });
    await seedPeople(on, organisationId, passwordHash, at);
    await insertLibrary(on, organisationId, library, at);
    await on.audit.append({
      organisationId,
      at,
      actorId: null,
      deed: 'organisation.seeded',
      subjectKind: 'organisation',
      subjectId: organisationId,
      detail: { airframes: library.airframes.length, scenarios: library.scenarios.length },
      address: null,
    });
  });
  return {
    seeded: true,
    airframes: library.airframes.length,
    scenarios: library.scenarios.length,
    problems: library.problems,
  };
}

async function seedPeople(on: Repositories, organisationId: string, passwordHash: string, at: Date): Promise<void> {
  const memberIds: string[] = [];
  for (const [i, { mailbox, displayName, fullName, roles }] of DEMONSTRATION_PEOPLE.entries()) {
    const id = randomUUID();
    if (roles.includes('trainee')) memberIds.push(id);
    await on.people.insert({
      id,
      organisationId,
      email: `${mailbox}@${DEMONSTRATION.domain}`,
      displayName,
      fullName,
      passwordHash,
      status: 'active',
      roles,
      at: new Date(at.getTime() + i), // keeps the order of the list
    });
  }
  await on.organisations.insertCohort({ id: randomUUID(), organisationId, name: DEMONSTRATION.cohort, memberIds, at });
}

/** Puts the shipped airframes and scenarios of a folder into an organisation. @returns how many of each */
export async function seedLibrary(
  on: Repositories,
  organisationId: string,
  folder: string,
  at: Date,
): Promise<{ airframes: number; scenarios: number }> {
  const library = readLibrary(folder);
  await insertLibrary(on, organisationId, library, at);
  return { airframes: library.airframes.length, scenarios: library.scenarios.length };
}

async function insertLibrary(on: Repositories, organisationId: string, library: Library, at: Date): Promise<void> {
  const revisionIds = new Map<string, string>();
  for (const entry of library.airframes) {
    const airframeId = randomUUID();
    const revisionId = randomUUID();
    revisionIds.set(entry.slug, revisionId);
    await on.airframes.insert({ id: airframeId, organisationId, slug: entry.slug, tags: tagsOf(entry), at });
    await on.airframes.insertRevision({
      id: revisionId,
      organisationId,
      airframeId,
      number: 1,
      status: 'released',
      document: entry.document,
      note: 'Shipped with the program: invented for demonstration.',
      authorId: null,
      at,
    });
  }
  for (const { slug, scenario, document } of library.scenarios) {
    const scenarioId = randomUUID();
    const airframeRevisionId = revisionIds.get(scenario.airframe.slug);
    if (airframeRevisionId === undefined) continue;
    await on.scenarios.insert({ id: scenarioId, organisationId, slug, at });
    await on.scenarios.insertRevision({
      id: randomUUID(),
      organisationId,
      scenarioId,
      number: 1,
      status: 'published',
      title: scenario.title,
      summary: scenario.summary,
      purpose: scenario.purpose,
      durationS: scenario.duration_s,
      criterionCount: scenario.criteria.length,
      lanes: lanesOf(scenario),
      document,
      airframeRevisionId,
      note: 'Shipped with the program.',
      authorId: null,
      at,
    });
  }
}
