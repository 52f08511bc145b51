import { type EntityManager, MoreThanOrEqual } from 'typeorm';
import { AttemptChunkEntity } from '../entities/attempt-chunk.entity.ts';

export interface ChunkRecord {
  attemptId: string;
  index: number;
  startTick: number;
  tickCount: number;
  nextTick: number;
  flownTicks: number;
  hash: string;
  bytes: Buffer;
  receivedAt: Date;
}

function chunkRecord(row: AttemptChunkEntity): ChunkRecord {
  const { attemptId, index, startTick, tickCount, nextTick, flownTicks, hash, bytes, receivedAt } = row;
  return { attemptId, index, startTick, tickCount, nextTick, flownTicks, hash, bytes, receivedAt };
}

export function createChunksRepository(manager: EntityManager) {
  return {
    async find(attemptId: string, index: number): Promise<ChunkRecord | null> {
      const row = await manager.findOne(AttemptChunkEntity, { where: { attemptId, index } });
      return row === null ? null : chunkRecord(row);
    },

    /** The chunk with the highest number; chunks are stored without gaps. */
    async last(attemptId: string): Promise<ChunkRecord | null> {
      const row = await manager.findOne(AttemptChunkEntity, { where: { attemptId }, order: { index: 'DESC' } });
      return row === null ? null : chunkRecord(row);
    },

    async count(attemptId: string): Promise<number> {
      return manager.count(AttemptChunkEntity, { where: { attemptId } });
    },

    async insert(chunk: ChunkRecord): Promise<void> {
      await manager.insert(AttemptChunkEntity, chunk);
    },

    async insertAll(chunks: readonly ChunkRecord[]): Promise<void> {
      await manager.insert(AttemptChunkEntity, [...chunks]);
    },

    /** Some chunks in order, from a number on. */
    async from(attemptId: string, index: number, most: number): Promise<ChunkRecord[]> {
      const rows = await manager.find(AttemptChunkEntity, {
        where: { attemptId, index: MoreThanOrEqual(index) },
        order: { index: 'ASC' },
        take: most,
      });
      return rows.map(chunkRecord);
    },

    /** How many chunks are stored of each of some attempts. */
    async counts(attemptIds: readonly string[]): Promise<Map<string, number>> {
      if (attemptIds.length === 0) return new Map();
      const rows: { id: string; n: string }[] = await manager
        .createQueryBuilder(AttemptChunkEntity, 'c')
        .select('c.attemptId', 'id')
        .addSelect('COUNT(*)', 'n')
        .where('c.attemptId IN (:...attemptIds)', { attemptIds: [...attemptIds] })
        .groupBy('c.attemptId')
        .getRawMany();
      return new Map(rows.map(({ id, n }) => [id, Number(n)]));
    },

    async all(attemptId: string): Promise<ChunkRecord[]> {
      const rows = await manager.find(AttemptChunkEntity, { where: { attemptId }, order: { index: 'ASC' } });
      return rows.map(chunkRecord);
    },
  };
}

export type ChunksRepository = ReturnType<typeof createChunksRepository>;
