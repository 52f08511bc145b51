import type { ReceivedRemark } from '#shared/contracts/debrief.ts';
import { type EntityManager, IsNull } from 'typeorm';
import { RemarkEntity } from '../entities/remark.entity.ts';
import { SignOffEntity } from '../entities/sign-off.entity.ts';
import { offsetOf, type PageRequest, type Rows } from './paging.ts';

export interface RemarkRecord {
  id: string;
  attemptId: string;
  tick: number;
  text: string;
  author: { id: string; displayName: string };
  createdAt: Date;
  withdrawnAt: Date | null;
}
export interface SignOffRecord {
  id: string;
  kind: 'sign-off' | 'counter-signature';
  verdict: 'met' | 'not-met';
  note: string;
  signer: { id: string; displayName: string };
  createdAt: Date;
}

const nameOf = (person: { id: string; displayName: string } | undefined, id: string) => ({
  id,
  displayName: person?.displayName ?? '',
});

export function createDebriefRepository(manager: EntityManager) {
  return {
    async remarks(organisationId: string, attemptId: string): Promise<RemarkRecord[]> {
      const rows = await manager
        .createQueryBuilder(RemarkEntity, 'm')
        .innerJoin('m.author', 'author')
        .addSelect(['author.id', 'author.displayName'])
        .where('m.organisationId = :organisationId AND m.attemptId = :attemptId', { organisationId, attemptId })
        .orderBy('m.tick', 'ASC')
        .addOrderBy('m.createdAt', 'ASC')
        .getMany();
      return rows.map((row) => ({
        id: row.id,
        attemptId: row.attemptId,
        tick: row.tick,
        text: row.text,
        author: nameOf(row.author, row.authorId),
        createdAt: row.createdAt,
        withdrawnAt: row.withdrawnAt,
      }));
    },

    async insertRemark(remark: {
      id: string;
      organisationId: string;
      attemptId: string;
      authorId: string;
      tick: number;
      text: string;
      createdAt: Date;
    }): Promise<void> {
      await manager.insert(RemarkEntity, { ...remark, withdrawnAt: null });
    },

    /** Withdraws an author's own remark; false when there is none that stands. */
    async withdrawRemark(organisationId: string, id: string, authorId: string, at: Date): Promise<boolean> {
      const done = await manager.update(
        RemarkEntity,
        { id, organisationId, authorId, withdrawnAt: IsNull() },
        { withdrawnAt: at },
      );
      return (done.affected ?? 0) > 0;
    },

    /** Remarks on a person's attempts, by others, newest first. */
    async received(organisationId: string, personId: string, page: PageRequest): Promise<Rows<ReceivedRemark>> {
      const builder = manager
        .createQueryBuilder(RemarkEntity, 'm')
        .innerJoin('m.attempt', 't')
        .innerJoin('t.scenario', 's')
        .innerJoin('t.scenarioRevision', 'r')
        .innerJoin('m.author', 'author')
        .select(['m', 't.id', 's.id', 's.slug', 'r.id', 'r.title', 'author.id', 'author.displayName'])
        .where('m.organisationId = :organisationId AND t.personId = :personId', { organisationId, personId })
        .andWhere('m.authorId <> :personId AND m.withdrawnAt IS NULL')
        .orderBy('m.createdAt', 'DESC')
        .addOrderBy('m.id', 'ASC');
      const total = await builder.getCount();
      const rows = await builder.offset(offsetOf(page)).limit(page.pageSize).getMany();
      const items = rows.map((row) => ({
        id: row.id,
        attemptId: row.attemptId,
        scenarioSlug: row.attempt?.scenario?.slug ?? '',
        scenarioTitle: row.attempt?.scenarioRevision?.title ?? '',
        tick: row.tick,
        text: row.text,
        author: row.author?.displayName ?? '',
        at: row.createdAt.toISOString(),
      }));
      return { items, total };
    },

    async signOffs(organisationId: string, attemptId: string): Promise<SignOffRecord[]> {
      const rows = await manager
        .createQueryBuilder(SignOffEntity, 'g')
        .innerJoin('g.signer', 'signer')
        .addSelect(['signer.id', 'signer.displayName'])
        .where('g.organisationId = :organisationId AND g.attemptId = :attemptId', { organisationId, attemptId })
        .orderBy('g.createdAt', 'ASC')
        .addOrderBy('g.id', 'ASC')
        .getMany();
      return rows.map((row) => ({
        id: row.id,
        kind: row.kind,
        verdict: row.verdict,
        note: row.note,
        signer: nameOf(row.signer, row.signerId),
        createdAt: row.createdAt,
      }));
    },

    async insertSignOff(entry: {
      id: string;
      organisationId: string;
      attemptId: string;
      signerId: string;
      kind: SignOffRecord['kind'];
      verdict: SignOffRecord['verdict'];
      note: string;
      createdAt: Date;
    }): Promise<void> {
      await manager.insert(SignOffEntity, entry);
    },
  };
}

export type DebriefRepository = ReturnType<typeof createDebriefRepository>;
