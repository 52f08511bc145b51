import { LessThan, type EntityManager } from 'typeorm';
import { ThrottleCountEntity } from '../entities/throttle-count.entity.ts';

/** Counters that all processes share. */
export function createThrottlesRepository(manager: EntityManager) {
  return {
    async count(key: string, windowStart: Date): Promise<number> {
      const row = await manager.findOne(ThrottleCountEntity, { where: { key, windowStart } });
      return row?.count ?? 0;
    },

    async add(key: string, windowStart: Date): Promise<void> {
      await manager.query(
        'INSERT INTO throttle_count (throttle_key, window_start, count) VALUES (?, ?, 1) ON DUPLICATE KEY UPDATE count = count + 1',
        [key, windowStart],
      );
    },

    async removeBefore(time: Date): Promise<void> {
      await manager.delete(ThrottleCountEntity, { windowStart: LessThan(time) });
    },
  };
}
export type ThrottlesRepository = ReturnType<typeof createThrottlesRepository>;
