/** Cohorts: made, named, filled, emptied and archived; what was assigned through one stays with the people. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { rosterAnswerSchema } from '#shared/contracts/administration.ts';
import { assignmentSchema, targetsSchema } from '#shared/contracts/assignments.ts';
import { cohortCandidatesSchema, cohortPageSchema, cohortSchema } from '#shared/contracts/cohorts.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let instructor: Client;
beforeAll(async () => {
  server = await startTestServer();
  instructor = await server.client('m.okafor');
});
afterAll(() => server.close());

const list = async (query = '') => cohortPageSchema.parse((await instructor('GET', `/api/cohorts${query}`)).body).items;
const read = async (id: string) => cohortSchema.parse((await instructor('GET', `/api/cohorts/${id}`)).body);
const make = (name: string) => instructor('POST', '/api/cohorts', { json: { name } });
const add = (id: string, people: string[]) => instructor('POST', `/api/cohorts/${id}/members`, { json: { people } });
const take = (id: string, person: string) => instructor('DELETE', `/api/cohorts/${id}/members/${person}`);
const fieldOf = (body: unknown) => problemSchema.parse(body).errors?.[0]?.field;
const assign = (cohorts: string[]) =>
  instructor('POST', '/api/assignments', {
    json: {
      zone: 'UTC',
      due: '2099-06-05T17:00',
      tries: 3,
      passRule: 'one',
      practice: true,
      byMail: false,
      calendar: false,
      reminderDays: null,
      tellAuthor: false,
      cohorts,
      scenarios: ['left-engine-cut-after-lift-off'],
    },
  });

describe('a cohort', () => {
  it('is made once under a name, whatever the letters, and renamed', async () => {
    const made = await make('  Ｎight  course ');
    expect(made.status).toBe(201);
    const { id } = cohortSchema.parse(made.body);
    expect((await read(id)).name).toBe('Ｎight course');
    for (const name of ['26-a', '26-A']) {
      const again = await make(name);
      expect([again.status, fieldOf(again.body)]).toEqual([422, '/name']);
    }
    const put = await instructor('PUT', `/api/cohorts/${id}`, { json: { name: '26-A' } });
    expect(fieldOf(put.body)).toBe('/name');
    expect((await instructor('PUT', `/api/cohorts/${id}`, { json: { name: 'Курс 7' } })).status).toBe(200);
    expect((await list('?search=%D0%9A%D1%83%D1%80%D1%81')).map(({ name }) => name)).toEqual(['Курс 7']);
    expect((await make(' ')).status).toBe(422);
    expect((await make('a\u202Eb')).status).toBe(422);
  });

  it('takes people in and lets them go; nobody of elsewhere and nobody deactivated comes in', async () => {
    const { id } = cohortSchema.parse((await make('Pairs')).body);
    const candidates = cohortCandidatesSchema.parse(
      (await instructor('GET', `/api/cohorts/${id}/candidates?search=weiss`)).body,
    );
    expect(candidates).toMatchObject([{ displayName: 'E. Weiss' }]);
    const [{ id: weiss }] = candidates;
    expect((await add(id, [weiss, weiss])).status).toBe(200);
    expect((await add(id, [weiss])).status).toBe(200);
    expect((await read(id)).people.map(({ displayName }) => displayName)).toEqual(['E. Weiss']);
    const stranger = await add(id, ['00000000-0000-4000-8000-00000000abcd']);
    expect([stranger.status, fieldOf(stranger.body)]).toEqual([422, '/people/0']);
    expect((await take(id, weiss)).status).toBe(204);
    expect((await take(id, weiss)).status).toBe(404);
  });

  it('is for instructors and administrators alone', async () => {
    for (const mailbox of ['j.lindqvist', 'a.reyes']) {
      const client = await server.client(mailbox);
      expect((await client('GET', '/api/cohorts')).status).toBe(403);
      expect((await client('POST', '/api/cohorts', { json: { name: 'x' } })).status).toBe(403);
    }
    expect((await (await server.client('s.virtanen'))('GET', '/api/cohorts')).status).toBe(200);
  });

  it('emptied after an assignment leaves the assignment as it is; an empty one is refused by name', async () => {
    const { id } = cohortSchema.parse((await make('Emptied')).body);
    const people = (await read((await list('?search=26-A'))[0].id)).people.slice(0, 2).map(({ id: person }) => person);
    await add(id, people);
    const set = assignmentSchema.parse((await assign([id])).body);
    expect((await read(id)).people.map(({ openAssignments }) => openAssignments)).toEqual([1, 1]);
    await Promise.all(people.map((person) => take(id, person)));
    const after = assignmentSchema.parse((await instructor('GET', `/api/assignments/${set.id}`)).body);
    expect(after.members.map(({ person, cohort }) => [person.id, cohort])).toEqual(
      set.members.map(({ person }) => [person.id, 'Emptied']),
    );
    const refused = await assign([id]);
    expect([refused.status, fieldOf(refused.body)]).toEqual([422, '/cohorts/0']);
    expect(JSON.stringify(refused.body)).toContain('Emptied');
  });

  it('emptied while it is assigned to gives the whole cohort or a refusal, never half of it', async () => {
    const { id } = cohortSchema.parse((await make('At once')).body);
    const people = (await read((await list('?search=26-A'))[0].id)).people.slice(0, 3).map(({ id: person }) => person);
    for (let round = 0; round < 3; round++) {
      await add(id, people);
      const [answer] = await Promise.all([assign([id]), ...people.map((person) => take(id, person))]);
      expect([201, 422]).toContain(answer.status);
      if (answer.status === 422) expect(fieldOf(answer.body)).toBe('/cohorts/0');
      else expect(assignmentSchema.parse(answer.body).members.length).toBeGreaterThan(0);
      expect((await read(id)).people).toEqual([]);
    }
  });

  it('put away is not offered and not assigned to, keeps its name, and comes back', async () => {
    const { id } = cohortSchema.parse((await make('Old course')).body);
    expect((await instructor('POST', `/api/cohorts/${id}/archive`)).status).toBe(200);
    const offered = targetsSchema.parse((await instructor('GET', '/api/assignments/targets')).body);
    expect(offered.cohorts.map(({ id: cohort }) => cohort)).not.toContain(id);
    expect((await assign([id])).status).toBe(422);
    expect((await add(id, [(await read((await list('?search=26-A'))[0].id)).people[0].id])).status).toBe(409);
    expect(fieldOf((await make('old COURSE')).body)).toBe('/name');
    expect((await list('?state=archived')).map(({ name }) => name)).toEqual(['Old course']);
    const administrator = await server.client('s.virtanen');
    const rows = [{ line: 2, name: 'A', email: 'a@new.example', roles: '', cohort: 'OLD  course' }];
    const judged = await administrator('POST', '/api/people/roster', { json: { rows, invite: false } });
    expect(rosterAnswerSchema.parse(judged.body).rows[0]).toMatchObject({
      verdict: 'wrong',
      words: expect.stringContaining('archived'),
    });
    expect((await instructor('DELETE', `/api/cohorts/${id}/archive`)).status).toBe(204);
    expect((await list('?search=Old')).length).toBe(1);
    const deeds = await server.sql(`SELECT deed FROM audit_entry WHERE subject_id = ? ORDER BY id`, [id]);
    expect(deeds.map(({ deed }) => deed)).toEqual(['cohort.made', 'cohort.archived', 'cohort.restored']);
  });
});
