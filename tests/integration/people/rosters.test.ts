/** Rosters that try the rules: one address in many spellings, names in every script, cohorts and roles as people write them. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { peoplePageSchema, rosterAnswerSchema } from '#shared/contracts/administration.ts';
import { openMailSink, type MailSink } from '../../support/mail-sink.ts';
import { openClient, startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let administrator: Client;
let mail: MailSink;
beforeAll(async () => {
  server = await startTestServer();
  administrator = await server.client('s.virtanen');
  mail = await openMailSink(server.services);
});
afterAll(async () => {
  await mail.close();
  await server.close();
});
const row = (line: number, name: string, email: string, roles = '', cohort = '') => ({
  line,
  name,
  email,
  roles,
  cohort,
});
async function roster(rows: unknown[], invite: boolean) {
  const answer = await administrator('POST', '/api/people/roster', { json: { rows, invite } });
  expect(answer.status, JSON.stringify(answer.body)).toBe(200);
  return rosterAnswerSchema.parse(answer.body);
}

describe('one address', () => {
  it.each([
    ['capitals', 'J.LINDQVIST@FIELDSCHOOL.EXAMPLE'],
    ['full-width letters', 'ｊ．ｌｉｎｄｑｖｉｓｔ＠ｆｉｅｌｄｓｃｈｏｏｌ．ｅｘａｍｐｌｅ'],
    ['a long s', 'j.lindqviſt@fieldschool.example'],
    ['spaces around', '  j.lindqvist@fieldschool.example\u3000'],
  ])('in %s is the same person', async (_what, email) => {
    expect((await roster([row(2, 'J', email)], true)).rows[0]).toMatchObject({ verdict: 'here' });
  });

  it.each([
    ['a dotless i', 'j.lındqvist@fieldschool.example'],
    ['a dotted capital I', 'J.LİNDQVIST@fieldschool.example'],
    ['a Cyrillic letter', 'j.lindqvist@fieldschооl.example'],
    ['an accent', 'jón@fieldschool.example'],
    ['no dot in the domain', 'jon@fieldschool'],
    ['a header behind it', 'jon@fieldschool.example\nBcc: all@fieldschool.example'],
  ])('with %s is no address, and is named', async (_what, email) => {
    const { rows, invited } = await roster([row(2, 'J', email)], true);
    expect([invited, rows[0]?.verdict]).toEqual([0, 'wrong']);
    expect(rows[0]?.words).toContain('is not an e-mail address');
  });

  it('twice in one file, in whatever letters, is invited once; two files at once invite once', async () => {
    const both = [row(2, 'A', 'Twice@new.example'), row(3, 'B', 'ＴＷＩＣＥ@NEW.example')];
    const answer = await roster(both, true);
    expect(answer.rows.map(({ verdict }) => verdict)).toEqual(['good', 'wrong']);
    expect(answer.rows[1]?.words).toContain('line 2');
    const at = await Promise.all([1, 2, 3].map(() => roster([row(2, 'C', 'once@new.example', '', 'New')], true)));
    expect(at.map(({ invited }) => invited).sort()).toEqual([0, 0, 1]);
    expect(await mail.messagesTo('once@new.example')).toHaveLength(1);
  });
});

describe('names', () => {
  it('in every script are kept, found and written to', async () => {
    const names = [
      'Łukasz Żółć',
      'Ёлкин Пётр',
      'محمد علی',
      'ประยุทธ์',
      'क्षितिज जोशी',
      '김철수',
      '𠮷田 太郎',
      'Ọlá',
      'O’Brien-Ñu 🛩',
    ];
    const rows = names.map((name, i) => row(i + 2, name, `name${i}@scripts.example`));
    expect((await roster(rows, true)).invited).toBe(names.length);
    for (const [i, name] of names.entries()) {
      const query = `/api/people?search=${encodeURIComponent(name)}`;
      const found = peoplePageSchema.parse((await administrator('GET', query)).body).items;
      expect(found.map(({ email }) => email)).toContain(`name${i}@scripts.example`);
      expect(found.find(({ email }) => email === `name${i}@scripts.example`)?.displayName).toBe(name.normalize('NFC'));
    }
    const token = await mail.linkTo('name2@scripts.example');
    const nobody = await openClient(server.address, undefined);
    const looked = await nobody('POST', '/api/session/link/look', { json: { token } });
    expect(looked.body).toMatchObject({ displayName: 'محمد علی' });
  });

  it.each([
    ['a letter that could not be read', 'Jos\uFFFD'],
    ['a sign that turns the line around', 'Ann\u202Emoc'],
    ['a line break', 'A\u0007B'],
    ['nothing but blanks', ' \u00a0\u3000'],
  ])('with %s are refused', async (_what, name) => {
    expect((await roster([row(2, name, 'bad@scripts.example')], true)).rows[0]?.verdict).toBe('wrong');
  });
});

describe('roles and cohorts', () => {
  it('are read as people write them', async () => {
    const email = 'several@roles.example';
    await roster([row(2, 'R', email, 'TRAINEE; Instructor/engineer', '  26-A ')], true);
    const found = peoplePageSchema.parse((await administrator('GET', `/api/people?search=${email}`)).body).items[0];
    expect(found).toMatchObject({ roles: ['engineer', 'instructor', 'trainee'], cohorts: ['26-A'] });
    const [{ n }] = await server.sql(`SELECT COUNT(*) AS n FROM cohort WHERE name LIKE '26-A%'`);
    expect(Number(n)).toBe(1);
  });
});
