import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  assignmentPageSchema,
  assignmentSchema,
  latePageSchema,
  noticePreviewSchema,
  ownAssignmentsSchema,
  targetsSchema,
  type Assignment,
  type Targets,
} from '#shared/contracts/assignments.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { deliverAttempt, flyAttempt } from '../../support/flown-attempt.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

const SLUG = 'left-engine-cut-after-lift-off';
const DAY = 24 * 3600 * 1000;
let shift = 0;
let server: TestServer;
let instructor: Client;
let trainee: Client;
let targets: Targets;

beforeAll(async () => {
  server = await startTestServer({ now: () => new Date(Date.now() + shift) });
  [instructor, trainee] = await Promise.all([server.client('m.okafor'), server.client('j.lindqvist')]);
  targets = targetsSchema.parse((await instructor('GET', '/api/assignments/targets')).body);
});
afterAll(() => server.close());

const idOf = (name: string): string => targets.people.find(({ displayName }) => displayName === name)?.id ?? '';
const wall = (days: number): string => new Date(Date.now() + shift + days * DAY).toISOString().slice(0, 16);
const terms = (over: Record<string, unknown> = {}) => ({
  zone: 'UTC',
  due: wall(3),
  tries: 2,
  passRule: 'one',
  practice: true,
  byMail: true,
  calendar: true,
  reminderDays: 2,
  tellAuthor: true,
  ...over,
});
const set = async (over: Record<string, unknown> = {}): Promise<Assignment> => {
  const json = { ...terms(), scenarios: [SLUG], people: [idOf('J. Lindqvist')], ...over };
  const answer = await instructor('POST', '/api/assignments', { json });
  expect(answer.status, JSON.stringify(answer.body)).toBe(201);
  return assignmentSchema.parse(answer.body);
};
const refusal = async (over: Record<string, unknown>) => {
  const json = { ...terms(), scenarios: [SLUG], people: [idOf('J. Lindqvist')], ...over };
  const answer = await instructor('POST', '/api/assignments', { json });
  expect(answer.status).toBe(422);
  return problemSchema.parse(answer.body).errors?.[0];
};
const start = (client: Client, json: Record<string, unknown>) => client('POST', '/api/attempts', { json });
const close = (id: string) => instructor('POST', `/api/assignments/${id}/close`, { json: {} });
const notices = (id: string) =>
  server.sql('SELECT kind, occasion FROM assignment_notice WHERE assignment_id = ? ORDER BY created_at, id', [id]);

const mail = (since: Date) =>
  server.sql(
    'SELECT email, subject, text, calendar_method AS method, calendar FROM notice_mail WHERE created_at >= ? ORDER BY created_at, email',
    [since],
  );

describe('setting', () => {
  it('to a cohort without some of it and to people, each once, with a notice each', async () => {
    const since = new Date(Date.now() + shift);
    const [cohort] = targets.cohorts;
    expect(cohort.members).toHaveLength(12);
    const made = await set({ cohorts: [cohort.id], without: [idOf('A. Bauer')] });
    expect(made).toMatchObject({ people: 11, to: 'Cohort 26-A, 11 people', counts: { toFly: 11, late: 0 } });
    expect(await notices(made.id)).toHaveLength(11);
    const sent = await mail(since);
    expect(sent).toHaveLength(11);
    expect(new Set(sent.map(({ email }) => email)).size).toBe(11);
    expect(sent[0]).toMatchObject({ method: 'REQUEST', subject: expect.stringContaining('Set for you') as unknown });
    expect(String(sent[0]['calendar'])).toContain('BEGIN:VEVENT');
    const page = assignmentPageSchema.parse((await instructor('GET', '/api/assignments')).body);
    expect(page.items.map(({ id }) => id)).toContain(made.id);
    expect((await close(made.id)).status).toBe(200);
    expect((await instructor('GET', '/api/assignments')).body).toMatchObject({ total: 0 });
  });

  it('from a playlist, in its order, pinned to the revisions of that moment', async () => {
    const slugs = (await server.sql('SELECT slug FROM scenario ORDER BY slug DESC LIMIT 2')).map((row) => row['slug']);
    const list = await instructor('POST', '/api/playlists', { json: { name: 'Two', scenarios: slugs } });
    const { id } = list.body as { id: string }; // as the playlist's own test has checked
    const made = await set({ scenarios: [], playlist: id });
    expect(made.scenarios.map(({ slug, revision }) => [slug, revision])).toEqual(slugs.map((slug) => [slug, 1]));
    expect(made.title).toBe('Two');
    await close(made.id);
  });

  it('is refused with the field, the rule and a remedy', async () => {
    expect(await refusal({ due: '2020-01-01T12:00' })).toMatchObject({ field: '/due', rule: 'in-the-past' });
    expect(await refusal({ due: '2027-03-28T02:30', zone: 'Europe/Oslo' })).toMatchObject({
      field: '/due',
      rule: 'clock-change',
    });
    expect(await refusal({ zone: 'Nowhere' })).toMatchObject({ field: '/zone' });
    expect(await refusal({ opens: wall(4) })).toMatchObject({ field: '/opens', rule: 'before-due' });
    expect(await refusal({ people: [] })).toMatchObject({ field: '/people', rule: 'somebody' });
    expect(await refusal({ scenarios: ['no-such'] })).toMatchObject({ field: '/scenarios/0', rule: 'published' });
    expect(await refusal({ passRule: 'two-in-a-row', tries: 1 })).toMatchObject({ field: '/tries' });
    await server.sql("UPDATE person SET status = 'deactivated' WHERE display_name = 'A. Bauer'");
    expect(await refusal({ people: [idOf('A. Bauer')] })).toMatchObject({ field: '/people/0', rule: 'active' });
    await server.sql("UPDATE person SET status = 'active' WHERE display_name = 'A. Bauer'");
  });

  it('to a cohort that was emptied meanwhile says so; emptied afterwards, nobody loses what is set', async () => {
    const [cohort] = targets.cohorts;
    const made = await set({ people: [], cohorts: [cohort.id] });
    const members = await server.sql('SELECT * FROM cohort_member');
    await server.sql('DELETE FROM cohort_member');
    expect(await refusal({ people: [], cohorts: [cohort.id] })).toMatchObject({ field: '/cohorts/0', rule: 'empty' });
    const after = assignmentSchema.parse((await instructor('GET', `/api/assignments/${made.id}`)).body);
    expect(after).toMatchObject({ people: 12, to: 'Cohort 26-A, 12 people' });
    for (const row of members) {
      await server.sql('INSERT INTO cohort_member VALUES (?, ?, ?)', [
        row['cohort_id'],
        row['person_id'],
        row['joined_at'],
      ]);
    }
    await close(made.id);
  });

  it('previews the message, the instants and the hour that comes twice', async () => {
    const json = {
      ...terms({ due: '2027-10-31T02:30', zone: 'Europe/Oslo' }),
      scenarios: [SLUG],
      cohorts: [targets.cohorts[0].id],
    };
    const shown = noticePreviewSchema.parse((await instructor('POST', '/api/assignments/preview', { json })).body);
    expect(shown).toMatchObject({ dueAt: '2027-10-31T01:30:00.000Z', people: 12 });
    expect(shown.remark).toContain('twice');
    expect(shown.text).toContain('Not an approved training device');
    expect((await instructor('GET', '/api/assignments')).body).toMatchObject({ total: 0 });
  });
});

describe('flying it', () => {
  it('counts tries, pins the revision, passes by the rule and tells the author once', async () => {
    const made = await set({ passRule: 'one', tries: 1 });
    const attempt = await flyAttempt(server, trainee, SLUG, { delayS: 1 }, { assignmentId: made.id });
    expect((await start(trainee, { scenarioSlug: SLUG, assignmentId: made.id })).status).toBe(409);
    expect((await deliverAttempt(trainee, attempt)).status).toBe(200);
    await deliverAttempt(trainee, attempt);
    const [own] = ownAssignmentsSchema.parse((await trainee('GET', '/api/assignments/mine')).body);
    expect(own).toMatchObject({ id: made.id, standing: 'passed', scenarios: [{ tries: [{ met: true }], allowed: 1 }] });
    expect((await notices(made.id)).map(({ kind }) => kind)).toEqual(['set', 'flown']);
    await close(made.id);
  });

  it('before it opens, after it is closed, by others and of another scenario is refused', async () => {
    const made = await set({ opens: wall(1) });
    const answer = await start(trainee, { scenarioSlug: SLUG, assignmentId: made.id });
    expect(problemSchema.parse(answer.body)).toMatchObject({ code: 'conflict' });
    const other = await server.client('a.bauer');
    expect((await start(other, { scenarioSlug: SLUG, assignmentId: made.id })).status).toBe(404);
    const [{ slug }] = await server.sql('SELECT slug FROM scenario WHERE slug <> ? LIMIT 1', [SLUG]);
    expect((await start(trainee, { scenarioSlug: slug, assignmentId: made.id })).status).toBe(409);
    await close(made.id);
    expect((await start(trainee, { scenarioSlug: SLUG, assignmentId: made.id })).status).toBe(409);
  });

  it('without practice, starts outside the assignment are refused until it is passed or closed', async () => {
    const made = await set({ practice: false, passRule: 'sign-off' });
    const refused = await start(trainee, { scenarioSlug: SLUG });
    expect(problemSchema.parse(refused.body).detail).toContain('without practice');
    expect((await start(await server.client('a.bauer'), { scenarioSlug: SLUG })).status).toBe(201);
    const attempt = await flyAttempt(server, trainee, SLUG, { delayS: 1 }, { assignmentId: made.id });
    await deliverAttempt(trainee, attempt);
    expect((await start(trainee, { scenarioSlug: SLUG })).status).toBe(409);
    const json = { kind: 'sign-off', verdict: 'met', heldControls: true };
    await instructor('POST', `/api/attempts/${attempt.id}/sign-offs`, { json });
    expect((await start(trainee, { scenarioSlug: SLUG })).status).toBe(201);
    await close(made.id);
  });

  it('two starts at once for one try leave one try', async () => {
    const made = await set({ tries: 1 });
    const both = await Promise.all([1, 2].map(() => start(trainee, { scenarioSlug: SLUG, assignmentId: made.id })));
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409]);
    await close(made.id);
  });
});

describe('changing', () => {
  it('raises the sequence of the calendar entry, keeps an extension, and closing cancels it', async () => {
    const made = await set();
    const entry = async () => String((await trainee('GET', `/api/assignments/${made.id}/calendar.ics`)).body);
    const unfold = (text: string) => text.replaceAll('\r\n ', '');
    const first = unfold(await entry());
    expect(first).toContain('METHOD:REQUEST');
    expect(first).toContain('SEQUENCE:0');
    const uid = /UID:(\S+)/.exec(first)?.[1];
    const extension = {
      people: [idOf('J. Lindqvist')],
      zone: 'UTC',
      due: wall(9),
      reason: 'Sick leave',
      extraTries: 1,
    };
    const extended = await instructor('POST', `/api/assignments/${made.id}/extensions`, { json: extension });
    expect(assignmentSchema.parse(extended.body)).toMatchObject({
      members: [{ dueAt: `${extension.due}:00.000Z`, extended: true, scenarios: [{ allowed: 3 }] }],
      extensions: [{ reason: 'Sick leave', by: 'M. Okafor' }],
    });
    expect(unfold(await entry())).toContain('SEQUENCE:1');
    const { version } = assignmentSchema.parse((await instructor('GET', `/api/assignments/${made.id}`)).body);
    const headers = { 'if-match': `"${version}"` };
    const changed = await instructor('PUT', `/api/assignments/${made.id}`, { json: terms({ due: wall(5) }), headers });
    expect(assignmentSchema.parse(changed.body).members[0].dueAt).toBe(`${extension.due}:00.000Z`);
    const again = await instructor('PUT', `/api/assignments/${made.id}`, { json: terms(), headers });
    expect(again.status).toBe(412);
    expect(unfold(await entry())).toContain('SEQUENCE:2');
    const before = new Date(Date.now() + shift);
    await close(made.id);
    const [cancelled] = await mail(before);
    expect(cancelled).toMatchObject({ method: 'CANCEL', subject: expect.stringContaining('No longer set') as unknown });
    const last = unfold(await entry());
    expect(last).toContain('METHOD:CANCEL');
    expect(last).toContain('STATUS:CANCELLED');
    expect(last).toContain('SEQUENCE:3');
    expect(last).toContain(`UID:${uid}`);
    await expect(server.sql('DELETE FROM assignment_extension')).rejects.toThrow('never is deleted');
  });

  it('takes people off and adds those who come later', async () => {
    const made = await set();
    const lindqvist = { json: { people: [idOf('J. Lindqvist')] } };
    const off = await instructor('POST', `/api/assignments/${made.id}/excuse`, lindqvist);
    expect(assignmentSchema.parse(off.body)).toMatchObject({ people: 0, to: 'nobody any more' });
    expect((await trainee('GET', '/api/assignments/mine')).body).not.toContainEqual(
      expect.objectContaining({ id: made.id }),
    );
    const on = await instructor('POST', `/api/assignments/${made.id}/people`, {
      json: { people: [idOf('J. Lindqvist'), idOf('A. Bauer')] },
    });
    expect(assignmentSchema.parse(on.body)).toMatchObject({ people: 2, to: 'A. Bauer; J. Lindqvist' });
    await close(made.id);
  });
});

describe('reminders and the overview', () => {
  it('are given once per due time, also by two servers at once, and again after an extension', async () => {
    const made = await set({ due: wall(1.5) });
    const kinds = async () => (await notices(made.id)).filter(({ kind }) => kind === 'reminder').length;
    const give = () => server.services.assignments.giveDueReminders();
    await Promise.all([give(), give(), give()]);
    expect(await kinds()).toBe(1);
    await give();
    expect(await kinds()).toBe(1);
    const json = { people: [idOf('J. Lindqvist')], zone: 'UTC', due: wall(1.9), reason: 'Weather' };
    await instructor('POST', `/api/assignments/${made.id}/extensions`, { json });
    await give();
    expect(await kinds()).toBe(2);
    const reminders = (await server.sql('SELECT subject FROM notice_mail')).filter(({ subject }) =>
      String(subject).startsWith('Due soon'),
    );
    expect(reminders).toHaveLength(2);
    await close(made.id);
  });

  it('wait for the mail queue, which takes each once, however many take at the same time', async () => {
    const waiting = await server.sql('SELECT COUNT(*) AS n FROM notice_mail WHERE handed_at IS NULL');
    const take = () => server.database.transaction((on) => on.noticeMail.take(10, new Date()));
    const ids: string[] = [];
    for (;;) {
      const taken = (await Promise.all([take(), take(), take()])).flat();
      if (taken.length === 0) break;
      ids.push(...taken.map(({ id }) => id));
    }
    expect(ids).toHaveLength(Number(waiting[0]['n']));
    expect(new Set(ids).size).toBe(ids.length);
    const made = await set({ byMail: false });
    expect(await server.sql('SELECT COUNT(*) AS n FROM notice_mail WHERE handed_at IS NULL')).toEqual([{ n: 0 }]);
    await close(made.id);
  });

  it('name who is late, from the longest overdue on', async () => {
    const made = await set({ due: wall(0.5), people: [idOf('J. Lindqvist'), idOf('A. Bauer')] });
    const rows = async () => latePageSchema.parse((await instructor('GET', '/api/assignments/late')).body).items;
    expect((await rows()).map(({ late }) => late)).toEqual([false, false]);
    shift = DAY;
    instructor = await server.client('m.okafor');
    trainee = await server.client('j.lindqvist');
    const late = await rows();
    expect(late).toMatchObject([
      { late: true, attempts: 0, allowed: 2, person: { displayName: 'A. Bauer' } },
      { late: true, person: { displayName: 'J. Lindqvist' } },
    ]);
    const reminded = await instructor('POST', `/api/assignments/${made.id}/reminders`, {
      json: { people: late.map(({ person }) => person.id) },
    });
    expect(reminded.body).toEqual({ reminded: 2 });
    expect((await instructor('GET', '/api/assignments/table.csv')).bytes.toString()).toContain('Late');
    await close(made.id);
  });
});

describe('who may', () => {
  it('trainees see their own only and set nothing; other organisations see nothing', async () => {
    const made = await set({ people: [idOf('A. Bauer')] });
    for (const path of ['', '/late', '/targets', '/table.csv', `/${made.id}`]) {
      expect((await trainee('GET', `/api/assignments${path}`)).status, path).toBe(403);
    }
    expect((await trainee('POST', '/api/assignments', { json: { ...terms(), scenarios: [SLUG] } })).status).toBe(403);
    expect((await trainee('GET', `/api/assignments/${made.id}/calendar.ics`)).status).toBe(404);
    const administrator = await server.client('s.virtanen');
    expect((await administrator('GET', `/api/assignments/${made.id}`)).status).toBe(200);
    expect((await administrator('POST', `/api/assignments/${made.id}/close`, { json: {} })).status).toBe(403);
    await server.sql(
      "INSERT INTO organisation SELECT UUID(), 'other', 'Other', settings, 0, NOW(3) FROM organisation LIMIT 1",
    );
    const [{ id: elsewhere }] = await server.sql("SELECT id FROM organisation WHERE slug = 'other'");
    await server.sql("UPDATE person SET organisation_id = ? WHERE display_name = 'H. Brandt'", [elsewhere]);
    const foreign = await server.client('h.brandt');
    expect((await foreign('GET', `/api/assignments/${made.id}`)).status).toBe(404);
    expect((await foreign('POST', `/api/assignments/${made.id}/close`, { json: {} })).status).toBe(404);
    expect((await foreign('GET', '/api/assignments')).body).toMatchObject({ total: 0 });
    await server.sql(
      "UPDATE person SET organisation_id = (SELECT id FROM organisation WHERE slug <> 'other') WHERE display_name = 'H. Brandt'",
    );
  });
});
