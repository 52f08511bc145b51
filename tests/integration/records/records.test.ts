import ExcelJS from 'exceljs';
import Papa from 'papaparse';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { problemSchema } from '#shared/contracts/problem.ts';
import { cellSchema, distributionSchema, matrixSchema, totalsSchema } from '#shared/contracts/records.ts';
import { deliverAttempt, flyAttempt } from '../../support/flown-attempt.ts';
import { publishedStatementSchema } from '../../support/statement-schema.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

const SLUG = 'left-engine-cut-after-lift-off';
let server: TestServer;
let trainee: Client;
let other: Client;
let instructor: Client;
let second: Client;
let administrator: Client;
let person: string;
let met: string;
let notMet: string;

beforeAll(async () => {
  server = await startTestServer();
  [trainee, other, instructor, second, administrator] = await Promise.all(
    ['j.lindqvist', 'a.bauer', 'm.okafor', 'h.brandt', 's.virtanen'].map((mailbox) => server.client(mailbox)),
  );
  const [row] = await server.sql("SELECT id FROM person WHERE display_name = 'J. Lindqvist'");
  person = String(row['id']);
  const bad = await flyAttempt(server, trainee, SLUG, 'hands-off');
  await deliverAttempt(trainee, bad);
  notMet = bad.id;
  const good = await flyAttempt(server, trainee, SLUG, { delayS: 1 });
  await deliverAttempt(trainee, good);
  met = good.id;
});
afterAll(() => server.close());

const matrix = async (client: Client, query = '') =>
  matrixSchema.parse((await client('GET', `/api/records/matrix${query}`)).body);
const cell = async (client: Client) =>
  cellSchema.parse((await client('GET', `/api/records/cell?person=${person}&scenario=${SLUG}`)).body);
const correct = (client: Client, id: string, effect: string, reason = 'Pedals came loose.') =>
  client('POST', `/api/records/attempts/${id}/corrections`, { json: { effect, reason } });
const sign = (client: Client, id: string, kind: string, verdict = 'met', note = '') =>
  client('POST', `/api/attempts/${id}/sign-offs`, { json: { kind, verdict, note, heldControls: true } });

describe('the matrix', () => {
  it('has a row for each trainee, a cell for what was flown, and the last attempt speaks', async () => {
    const whole = await matrix(instructor);
    expect(whole).toMatchObject({ total: 12, scenarios: [{ slug: SLUG }] });
    const row = whole.rows.find(({ person: { id } }) => id === person);
    expect(row?.cells).toMatchObject([{ attempts: 2, attemptId: met, met: true, lastMet: true, signed: 'no' }]);
    expect(row?.cells[0].margin).toBeGreaterThan(0);
    expect(whole.rows.filter(({ cells }) => cells.length > 0)).toHaveLength(1);
  });

  it('filters by name, cohort, playlist and day, and pages', async () => {
    expect(await matrix(instructor, '?search=lindq')).toMatchObject({ total: 1 });
    expect((await matrix(instructor, '?pageSize=5&page=3')).rows).toHaveLength(2);
    expect((await matrix(instructor, '?to=2020-01-01')).rows.every(({ cells }) => cells.length === 0)).toBe(true);
    const nobody = '00000000-0000-4000-8000-000000000000';
    expect(await matrix(instructor, `?cohort=${nobody}`)).toMatchObject({ total: 0 });
    expect(await matrix(instructor, `?playlist=${nobody}`)).toMatchObject({ scenarios: [] });
    const bad = await instructor('GET', '/api/records/matrix?from=yesterday');
    expect(problemSchema.parse(bad.body).errors?.[0]).toMatchObject({ field: '/from' });
  });

  it('shows a trainee the own row only, and totals of it', async () => {
    expect(await matrix(trainee)).toMatchObject({ total: 1, rows: [{ person: { id: person } }] });
    expect((await matrix(other)).rows[0].cells).toEqual([]);
    const totals = totalsSchema.parse((await instructor('GET', '/api/records/totals')).body);
    expect(totals).toEqual({ people: 12, scenarios: [{ slug: SLUG, flown: 1, met: 1 }] });
  });
});

describe('a cell', () => {
  it('is read by instructors and the trainee it belongs to', async () => {
    expect((await cell(trainee)).attempts).toMatchObject([
      { id: notMet, number: 1, met: false, firstPedalS: null },
      { id: met, number: 2, met: true },
    ]);
    // The reference pilot wakes 1 s after the event; its pedal must then move by a tenth of its travel (computed: 0.2 s more).
    expect((await cell(instructor)).attempts[1].firstPedalS).toBeGreaterThan(1);
    expect((await cell(instructor)).attempts[1].firstPedalS).toBeLessThan(1.6);
    expect((await other('GET', `/api/records/cell?person=${person}&scenario=${SLUG}`)).status).toBe(404);
  });

  it('shows reaction times beside the budget, computed once', async () => {
    const ask = async () =>
      distributionSchema.parse((await instructor('GET', `/api/records/distribution?scenario=${SLUG}`)).body);
    const [first, again] = await Promise.all([ask(), ask()]);
    expect(first.budget.budgetS).toBeGreaterThan(1);
    expect(first).toMatchObject({ within: 1, beyond: 0, never: 0, recognitionTimeS: null });
    expect(first.bins.reduce((sum, count) => sum + count)).toBe(1);
    expect(again).toEqual(first);
    expect(await server.sql('SELECT COUNT(*) AS n FROM budget_result')).toEqual([{ n: 1 }]);
    expect((await trainee('GET', `/api/records/distribution?scenario=${SLUG}`)).status).toBe(403);
  });
});

describe('signatures and corrections', () => {
  it('a counter-signature is another instructor’s, and a newer sign-off needs a new one', async () => {
    expect((await sign(instructor, met, 'sign-off')).status).toBe(201);
    expect((await sign(instructor, met, 'counter-signature')).status).toBe(409);
    expect((await sign(second, met, 'counter-signature')).status).toBe(201);
    const shown = async () => (await matrix(instructor, '?search=lindq')).rows[0].cells[0];
    expect(await shown()).toMatchObject({ signed: 'counter-signed', met: true });
    await sign(instructor, met, 'sign-off', 'not-met', 'Seen again: the other hand helped.');
    expect(await shown()).toMatchObject({ signed: 'signed', met: false });
    await sign(instructor, met, 'sign-off', 'met', 'Seen a third time: it did not.');
  });

  it('a correction is a new entry; setting aside and restoring change what counts and nothing else', async () => {
    const before = await cell(instructor);
    expect((await correct(trainee, met, 'set-aside')).status).toBe(403);
    expect((await correct(instructor, met, 'restored')).status).toBe(409);
    expect(problemSchema.parse((await correct(instructor, met, 'note', 'x')).body).errors?.[0].field).toBe('/reason');
    expect((await correct(instructor, met, 'set-aside')).status).toBe(201);
    expect((await correct(instructor, met, 'set-aside')).status).toBe(409);
    const row = async () => (await matrix(instructor, '?search=lindq')).rows[0].cells[0];
    expect(await row()).toMatchObject({ attempts: 1, attemptId: notMet, met: false, corrected: true });
    expect(totalsSchema.parse((await instructor('GET', '/api/records/totals')).body).scenarios[0].met).toBe(0);
    expect((await correct(second, met, 'restored', 'It was another flight.')).status).toBe(201);
    expect(await row()).toMatchObject({ attempts: 2, attemptId: met, met: true, corrected: true });
    const after = await cell(instructor);
    expect(after.attempts.map(({ corrections: _corrections, ...rest }) => rest)).toEqual(
      before.attempts.map(({ corrections: _corrections, ...rest }) => rest),
    );
    expect(after.attempts[1].corrections).toMatchObject([{ effect: 'set-aside' }, { effect: 'restored' }]);
    await expect(server.sql("UPDATE record_correction SET reason = 'x'")).rejects.toThrow('never changes');
    await expect(server.sql('DELETE FROM record_correction')).rejects.toThrow('never is deleted');
  });
});

describe('files', () => {
  it('CSV and workbook hold the same rows, names cannot become formulas, and both are noted', async () => {
    await server.sql("UPDATE person SET display_name = '=HYPERLINK(1)' WHERE id = ?", [person]);
    const csv = await instructor('GET', '/api/records/table.csv?search=HYPER');
    const rows = Papa.parse<string[]>(csv.bytes.toString('utf8').slice(1).trimEnd()).data;
    expect(rows).toHaveLength(3);
    expect(rows[1][0]).toBe("'=HYPERLINK(1)");
    const file = await instructor('GET', '/api/records/table.xlsx?search=HYPER');
    const workbook = new ExcelJS.Workbook();
    await workbook.xlsx.load(new Uint8Array(file.bytes).buffer);
    const sheet = workbook.getWorksheet('Records');
    expect(sheet?.rowCount).toBe(3);
    expect(sheet?.getRow(2).getCell(1)).toMatchObject({ value: '=HYPERLINK(1)', type: ExcelJS.ValueType.String });
    for (const [i, cellText] of [4, 7, 15].map((column) => [column, rows[2][column - 1]] as const)) {
      expect(String(sheet?.getRow(3).getCell(i).value)).toBe(cellText);
    }
    await server.sql("UPDATE person SET display_name = 'J. Lindqvist' WHERE id = ?", [person]);
    expect((await trainee('GET', '/api/records/table.csv')).status).toBe(403);
    expect((await trainee('GET', '/api/records/table.xlsx')).status).toBe(403);
    const noted = await server.sql("SELECT COUNT(*) AS n FROM audit_entry WHERE deed = 'record.exported'");
    expect(noted).toEqual([{ n: 2 }]);
  });

  it('a transcript is a PDF for the trainee and instructors', async () => {
    const mine = await trainee('GET', `/api/records/people/${person}/transcript.pdf`);
    expect(mine.status).toBe(200);
    expect(mine.bytes.subarray(0, 5).toString()).toBe('%PDF-');
    expect(mine.headers.get('content-disposition')).toContain('transcript-j-lindqvist.pdf');
    expect((await other('GET', `/api/records/people/${person}/transcript.pdf`)).status).toBe(404);
    expect((await instructor('GET', `/api/records/people/${person}/transcript.pdf`)).status).toBe(200);
  });

  it('one’s own data holds all of it, recordings included, and nobody else’s', async () => {
    const answer = await trainee('GET', '/api/records/mine/data.json');
    const data = answer.body as { attempts: { id: string; recording: unknown[] }[]; person: { id: string } }; // compared below
    expect(data.person.id).toBe(person);
    expect(data.attempts.map(({ id }) => id)).toEqual([notMet, met]);
    expect(data.attempts.every(({ recording }) => recording.length > 0)).toBe(true);
    const empty = await other('GET', '/api/records/mine/data.json');
    expect(empty.body).toMatchObject({ attempts: [] });
    expect(empty.bytes.toString()).not.toContain(person);
  });

  it('statements keep the published rules, have stable identifiers and leave out what is set aside', async () => {
    const ask = async () => (await instructor('GET', '/api/records/statements.json')).body as { id: string }[]; // parsed below
    const statements = await ask();
    expect(statements).toHaveLength(2);
    for (const statement of statements) expect(publishedStatementSchema.safeParse(statement).error).toBeUndefined();
    expect(await ask()).toEqual(statements);
    await correct(instructor, notMet, 'set-aside');
    expect(await ask()).toHaveLength(1);
    await correct(instructor, notMet, 'restored');
    const stated = await ask();
    expect(stated).toHaveLength(2);
    expect(stated.map(({ id }) => id)).not.toEqual(statements.map(({ id }) => id));
  });
});

describe('retention', () => {
  it('removes old recordings only, notes each removal, and results stay', async () => {
    const rule = { json: { recordingDays: 30 } };
    expect((await instructor('PUT', '/api/records/retention', rule)).status).toBe(403);
    const short = await administrator('PUT', '/api/records/retention', { json: { recordingDays: 3 } });
    expect(problemSchema.parse(short.body).errors?.[0]).toMatchObject({ field: '/recordingDays' });
    expect((await administrator('PUT', '/api/records/retention', rule)).body).toEqual({ recordingDays: 30 });
    expect(await server.services.records.applyRetention()).toBe(0);
    const [trigger] = await server.sql('SHOW CREATE TRIGGER attempt_keep');
    await server.sql('DROP TRIGGER attempt_keep');
    await server.sql('UPDATE attempt SET started_at = started_at - INTERVAL 31 DAY WHERE id = ?', [notMet]);
    await server.sql(String(trigger['SQL Original Statement']));
    expect((await administrator('POST', '/api/records/retention/effect', rule)).body).toMatchObject({ attempts: 1 });
    expect(await server.services.records.applyRetention()).toBe(1);
    expect(await server.services.records.applyRetention()).toBe(0);
    const gone = await trainee('GET', `/api/attempts/${notMet}/chunks`);
    expect(problemSchema.parse(gone.body).detail).toContain('retention rule');
    expect((await trainee('GET', `/api/attempts/${met}/chunks`)).status).toBe(200);
    expect((await cell(instructor)).attempts).toHaveLength(2);
    await expect(server.sql('DELETE FROM recording_removal')).rejects.toThrow('never is deleted');
  });
});
