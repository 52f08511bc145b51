import { once } from 'node:events';
import type { Writable } from 'node:stream';
import type { RecordFilter } from '#shared/contracts/records.ts';
import type { Database } from '../../data/database.ts';
import type { TableAttempt } from '../../data/repositories/records.repository.ts';
import { csvLine } from '../../reports/csv-text.ts';
import { streamWorkbook, type WorkbookCell, type WorkbookColumn } from '../../reports/workbook.ts';
import { cautionLines } from '../caution.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { setAsideNow, standingSignatures } from './entries.ts';
import type { Statements } from './statements.ts';

const PEOPLE_AT_ONCE = 10;
const STATEMENTS_AT_ONCE = 100;
const WORDS: Record<string, string> = { met: 'Met', near: 'Close', 'not-met': 'Not met', 'not-reached': 'Not reached' };

const COLUMNS: readonly WorkbookColumn[] = [
  { head: 'Trainee', width: 24 },
  { head: 'Scenario', width: 34 },
  { head: 'Revision', width: 9 },
  { head: 'Attempt', width: 9 },
  { head: 'Started (UTC)', width: 18, format: 'yyyy-mm-dd hh:mm' },
  { head: 'Duration, s', width: 11, format: '0.0' },
  { head: 'Result', width: 12 },
  { head: 'Least margin', width: 12, format: '+0.00;-0.00' },
  { head: 'Unit', width: 8 },
  { head: 'Of criterion', width: 28 },
  { head: 'First correct pedal, s', width: 12, format: '0.00' },
  { head: 'Signed off', width: 24 },
  { head: 'Counter-signed', width: 24 },
  { head: 'Set aside', width: 10 },
  { head: 'Attempt id', width: 38 },
];

/** Writes with regard to the reader's pace. */
async function write(out: Writable, text: string): Promise<void> {
  if (!out.write(text)) await Promise.race([once(out, 'drain'), once(out, 'close')]);
  if (out.destroyed) throw new Error('The reader went away.');
}

/** Records as files, read and written in pieces: memory stays flat however many they are. */
export function createExports(setup: { database: Database; statements: Statements; now: () => Date }) {
  const { database, statements, now } = setup;

  /** Rows of all attempts that a filter finds, by trainee, scenario and number. */
  async function* rows(organisationId: string, filter: RecordFilter): AsyncGenerator<WorkbookCell[]> {
    const scenarios = await database.records.scenarios(organisationId, filter.playlist);
    const titles = new Map(scenarios.map(({ id, title }) => [id, title]));
    const scenarioIds = scenarios.map(({ id }) => id);
    for (let offset = 0; ; offset += PEOPLE_AT_ONCE) {
      const page = { limit: PEOPLE_AT_ONCE, offset };
      const { items } = await database.records.people(organisationId, filter, null, page);
      if (items.length === 0) return;
      const ids = items.map(({ id }) => id);
      const [attempts, signatures, corrections] = await Promise.all([
        database.records.table(organisationId, ids, scenarioIds, filter),
        database.records.signatures(ids),
        database.records.corrections(ids),
      ]);
      const standing = standingSignatures(signatures);
      const aside = setAsideNow(corrections);
      const byPerson = new Map<string, TableAttempt[]>();
      for (const attempt of attempts) {
        const list = byPerson.get(attempt.personId);
        if (list) list.push(attempt);
        else byPerson.set(attempt.personId, [attempt]);
      }
      for (const person of items) {
        for (const attempt of byPerson.get(person.id) ?? []) {
          const signed = standing.get(attempt.id);
          const words = (entry: { verdict: string; signer: string } | null | undefined): string =>
            entry ? `${WORDS[entry.verdict]}, ${entry.signer}` : '';
          yield [
            person.displayName,
            titles.get(attempt.scenarioId) ?? '',
            attempt.revision,
            attempt.number,
            attempt.startedAt,
            attempt.durationS,
            attempt.passed === null
              ? 'No result'
              : attempt.passed === 0
                ? 'Not met'
                : (WORDS[attempt.verdict ?? 'met'] ?? 'Met'),
            attempt.margin === null ? null : Number(attempt.margin),
            attempt.unit ?? '',
            attempt.marginOf ?? '',
            attempt.firstPedalS,
            words(signed?.signOff),
            words(signed?.counter),
            aside.has(attempt.id) ? 'set aside' : '',
            attempt.id,
          ];
        }
      }
      if (items.length < PEOPLE_AT_ONCE) return;
    }
  }

  const note = (actor: Actor, caller: Caller, form: string, filter: RecordFilter): Promise<void> =>
    database.audit.append({
      organisationId: actor.organisationId,
      at: now(),
      actorId: actor.personId,
      deed: 'record.exported',
      subjectKind: 'organisation',
      subjectId: actor.organisationId,
      detail: { form, ...filter },
      address: caller.address,
    });

  return {
    async csv(actor: Actor, filter: RecordFilter, out: Writable, caller: Caller): Promise<void> {
      requireDeed(actor, 'record.read');
      await note(actor, caller, 'csv', filter);
      await write(out, `\ufeff${csvLine(COLUMNS.map(({ head }) => head))}`);
      let piece = '';
      for await (const row of rows(actor.organisationId, filter)) {
        piece += csvLine(row);
        if (piece.length < 65_536) continue;
        await write(out, piece);
        piece = '';
      }
      out.end(piece);
    },

    async workbook(actor: Actor, filter: RecordFilter, out: Writable, caller: Caller): Promise<void> {
      requireDeed(actor, 'record.read');
      await note(actor, caller, 'xlsx', filter);
      const { organisationId } = actor;
      const { caution } = await database.organisations.settings(organisationId);
      const chosen = Object.entries(filter).filter(([, value]) => value !== '' && value !== undefined);
      await streamWorkbook(out, [
        { name: 'Records', columns: COLUMNS, rows: rows(organisationId, filter) },
        {
          name: 'About',
          columns: [
            { head: 'What', width: 24 },
            { head: 'Value', width: 90 },
          ],
          rows: [['Written', now()], ...chosen, ...cautionLines(caution).map((line) => ['Caution', line])],
        },
      ]);
    },

    /** Statements of all results that a filter finds, those set aside left out. */
    async statements(actor: Actor, filter: RecordFilter, out: Writable, caller: Caller): Promise<void> {
      requireDeed(actor, 'record.read');
      await note(actor, caller, 'statements', filter);
      const { organisationId } = actor;
      const scenarios = await database.records.scenarios(organisationId, filter.playlist);
      const scenarioIds = scenarios.map(({ id }) => id);
      await write(out, '[');
      let first = true;
      for (let offset = 0; ; offset += PEOPLE_AT_ONCE) {
        const page = { limit: PEOPLE_AT_ONCE, offset };
        const { items } = await database.records.people(organisationId, filter, null, page);
        const ids = items.map(({ id }) => id);
        const [narrow, corrections] = await Promise.all([
          database.records.attempts(ids, scenarioIds, filter),
          database.records.corrections(ids),
        ]);
        const aside = setAsideNow(corrections);
        const wanted = narrow.filter(({ id, passed }) => passed !== null && !aside.has(id)).map(({ id }) => id);
        for (let i = 0; i < wanted.length; i += STATEMENTS_AT_ONCE) {
          const full = await database.records.fullByIds(organisationId, wanted.slice(i, i + STATEMENTS_AT_ONCE));
          for (const attempt of full) {
            const restored = corrections.filter(
              ({ attemptId, effect }) => attemptId === attempt.id && effect === 'restored',
            ).length;
            await write(out, `${first ? '' : ','}\n${JSON.stringify(statements.statementOf(attempt, restored))}`);
            first = false;
          }
        }
        if (items.length < PEOPLE_AT_ONCE) break;
      }
      out.end('\n]\n');
    },
  };
}
