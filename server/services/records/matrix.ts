import type { Matrix, MatrixCell, MatrixQuery, RecordChoices, Totals } from '#shared/contracts/records.ts';
import type { Database } from '../../data/database.ts';
import type { NarrowAttempt, RecordsRepository } from '../../data/repositories/records.repository.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { setAsideNow, standingSignatures, type StandingSignatures } from './entries.ts';

/** Whose records an actor reads: everyone's, or only the own ones (then the person). */
export function readerOf(actor: Actor): string | null {
  requireDeed(actor, 'record.read-own');
  return may(actor, 'record.read') ? null : actor.personId;
}

/** A standing sign-off decides over the computed result. */
export function metOf(attempt: Pick<NarrowAttempt, 'passed'>, signed: StandingSignatures | undefined): boolean | null {
  if (signed?.signOff) return signed.signOff.verdict === 'met';
  return attempt.passed === null ? null : attempt.passed !== 0;
}

const VERDICT_RANK = { met: 3, near: 2, 'not-reached': 1, 'not-met': 0 } as const;

/** The attempt that speaks for a cell: the last, or the best by verdict and, among equals, the later. */
function speaking(attempts: readonly NarrowAttempt[], show: MatrixQuery['show']): NarrowAttempt | null {
  const judged = attempts.filter((attempt) => attempt.passed !== null);
  if (show === 'last') return judged.at(-1) ?? null;
  const rank = (attempt: NarrowAttempt): number =>
    (attempt.passed === null ? 0 : attempt.passed) * 10 +
    (attempt.verdict === null ? 0 : VERDICT_RANK[attempt.verdict]);
  return judged.reduce<NarrowAttempt | null>(
    (best, next) => (best === null || rank(next) >= rank(best) ? next : best),
    null,
  );
}

/** The cohort × scenario matrix, its totals and what its filters offer. */
export function createMatrix({ database }: { database: Database }) {
  const records: RecordsRepository = database.records;

  return {
    async matrix(actor: Actor, query: MatrixQuery): Promise<Matrix> {
      const reader = readerOf(actor);
      const { organisationId } = actor;
      const { page, pageSize } = query;
      const [scenarios, people] = await Promise.all([
        records.scenarios(organisationId, query.playlist),
        records.people(organisationId, query, reader, { limit: pageSize, offset: (page - 1) * pageSize }),
      ]);
      const personIds = people.items.map(({ id }) => id);
      const [attempts, signatures, corrections, due] = await Promise.all([
        records.attempts(
          personIds,
          scenarios.map(({ id }) => id),
          query,
        ),
        records.signatures(personIds),
        records.corrections(personIds),
        records.due(personIds),
      ]);
      const signed = standingSignatures(signatures);
      const aside = setAsideNow(corrections);
      const corrected = new Set(corrections.map(({ attemptId }) => attemptId));
      const cells = new Map<string, NarrowAttempt[]>();
      const marked = new Set<string>();
      for (const attempt of attempts) {
        const key = `${attempt.personId} ${attempt.scenarioId}`;
        if (corrected.has(attempt.id)) marked.add(key);
        if (aside.has(attempt.id)) continue;
        const list = cells.get(key);
        if (list) list.push(attempt);
        else cells.set(key, [attempt]);
      }
      const dueAt = new Map(due.map((row) => [`${row.personId} ${row.scenarioId}`, row.dueAt.toISOString()]));
      const speakers = new Map<string, NarrowAttempt>();
      for (const [key, list] of cells) {
        const found = speaking(list, query.show);
        if (found !== null) speakers.set(key, found);
      }
      const margins = await records.margins([...speakers.values()].map(({ id }) => id));
      const rows = people.items.map((person) => ({
        person: { id: person.id, displayName: person.displayName },
        active: person.active,
        cells: scenarios.flatMap((scenario, s): MatrixCell[] => {
          const key = `${person.id} ${scenario.id}`;
          const list = cells.get(key) ?? [];
          const set = dueAt.get(key) ?? null;
          if (list.length === 0 && set === null && !marked.has(key)) return [];
          const speaker = speakers.get(key);
          const signature = speaker && signed.get(speaker.id);
          const margin = speaker && margins.get(speaker.id);
          const last = list.at(-1);
          return [
            {
              s,
              attempts: list.length,
              attemptId: speaker?.id ?? null,
              met: speaker ? metOf(speaker, signature) : null,
              lastMet: last !== undefined && metOf(last, signed.get(last.id)) === true,
              verdict: speaker?.verdict ?? null,
              margin: margin?.margin ?? null,
              unit: margin?.unit ?? '',
              signed: signature?.counter ? 'counter-signed' : signature?.signOff ? 'signed' : 'no',
              corrected: marked.has(key),
              dueAt: list.length === 0 ? set : null,
            },
          ];
        }),
      }));
      return {
        scenarios: scenarios.map(({ slug, title }) => ({ slug, title })),
        rows,
        page,
        pageSize,
        total: people.total,
      };
    },

    async totals(actor: Actor, query: MatrixQuery): Promise<Totals> {
      const reader = readerOf(actor);
      const { organisationId } = actor;
      const scenarios = await records.scenarios(organisationId, query.playlist);
      const [people, rows] = await Promise.all([
        records.people(organisationId, query, reader, { limit: 1, offset: 0 }),
        records.totals(
          organisationId,
          query,
          reader,
          scenarios.map(({ id }) => id),
        ),
      ]);
      const found = new Map(rows.map((row) => [row.scenarioId, row]));
      return {
        people: people.total,
        scenarios: scenarios.map(({ id, slug }) => ({
          slug,
          flown: found.get(id)?.flown ?? 0,
          met: found.get(id)?.met ?? 0,
        })),
      };
    },

    async choices(actor: Actor): Promise<RecordChoices> {
      requireDeed(actor, 'record.read');
      const rows = await database.assignments.cohorts(actor.organisationId, false);
      const cohorts = new Map<string, RecordChoices['cohorts'][number]>();
      for (const { id, name, personId } of rows) {
        const cohort = cohorts.get(id) ?? { id, name, members: 0 };
        cohorts.set(id, cohort);
        if (personId !== null) cohort.members += 1;
      }
      const query = { page: 1, pageSize: 100, search: '', sort: 'name' } as const;
      const playlists = await database.playlists.list(actor.organisationId, query);
      return {
        cohorts: [...cohorts.values()],
        playlists: playlists.items.map(({ id, name }) => ({ id, name })),
      };
    },
  };
}
