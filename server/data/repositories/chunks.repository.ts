import type { EntityManager } from 'typeorm';
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

    async all(attemptId: string): Promise<ChunkRecord[]> {
      const rows = await manager.find(AttemptChunkEntity, { where: { attemptId }, order: { index: 'ASC' } });
      return rows.map(chunkRecord);
    },
  };
}

export type ChunksRepository = ReturnType<typeof createChunksRepository>;
